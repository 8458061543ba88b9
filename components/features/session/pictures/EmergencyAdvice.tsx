/**
 * What to do now when something serious happened: text that needs no network, with the site's own emergency number and the clinic's. It
 * must stand before anything else on its page, and must not be something to close.
 */
import { View } from 'react-native';
import { useTranslation } from 'react-i18next';
import { Link } from '@/components/ui/Link';
import { Notice } from '@/components/ui/Notice';
import { Text } from '@/components/ui/Text';
import { space } from '@/components/ui/theme';

export interface EmergencyAdviceProps {
  /** What happened: a red flag's or a finding's code. */
  code: string;
  emergencyNumber: string;
  siteName: string;
  phone: string;
}

/** Own words for what needs another help than the usual; everything else has the usual. */
const ownAdvice = [
  'seizure',
  'faint',
  'head_injury',
  'burn_or_blister',
  'neuro_deficit',
  'chest_pain',
  'worst_headache',
  'self_harm_thoughts',
  'mania_signs',
  'pain_high',
];

export function EmergencyAdvice({ code, emergencyNumber, siteName, phone }: EmergencyAdviceProps) {
  const { t } = useTranslation('session');
  const known = ownAdvice.includes(code) ? code : 'other';
  const isUrgent = known !== 'pain_high' && known !== 'burn_or_blister';
  return (
    <Notice tone="stop" word={t('advice.word')} title={t(`advice.title.${known}`)} announce="assertive">
      <View style={{ gap: space[3] }}>
        <Text>{t(`advice.text.${known}`, { number: emergencyNumber })}</Text>
        {isUrgent ? (
          <Link href={`tel:${emergencyNumber.replace(/[^+0-9]/g, '')}`} external tone="stop" size="title">
            {t('advice.callEmergency', { number: emergencyNumber })}
          </Link>
        ) : null}
        <Link href={`tel:${phone.replace(/[^+0-9]/g, '')}`} external>
          {t('advice.callSite', { name: siteName, phone })}
        </Link>
      </View>
    </Notice>
  );
}
