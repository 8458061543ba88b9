/**
 * The end of the pre-check: go on, go on with care, wait, or get help, and what happens next. It shows what the server made of the
 * answers and adds nothing to it.
 */
import { useRouter } from 'expo-router';
import { useTranslation } from 'react-i18next';
import { EmergencyAdvice } from '@/components/features/session/pictures/EmergencyAdvice';
import { ParticipantShell } from '@/components/layout/ParticipantShell';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { Link } from '@/components/ui/Link';
import { Text } from '@/components/ui/Text';
import type { ClearanceView, PrecheckView } from '@/shared/contracts/clearance';

export interface OutcomePageProps {
  clearance: ClearanceView;
  view: PrecheckView;
  onAgain(): void;
}

export function OutcomePage({ clearance, view, onAgain }: OutcomePageProps) {
  const { t } = useTranslation('precheck');
  const router = useRouter();
  const outcome = view.emergencyAdvice ? 'emergency' : (view.outcome ?? 'open');
  const mayGoOn = outcome === 'go_on' || outcome === 'caution';
  const { site } = clearance;
  const main =
    outcome === 'open'
      ? { label: t('outcome.again'), onPress: onAgain }
      : {
          label: t(mayGoOn ? 'outcome.setUp' : 'outcome.today'),
          onPress: () => router.replace(mayGoOn ? '/set-up' : '/today'),
        };
  const urgent = view.findings.find((finding) => finding.outcome === 'emergency')?.code ?? 'other';
  return (
    <ParticipantShell
      title={t(`outcome.title.${outcome}`)}
      lead={outcome === 'emergency' ? undefined : t(`outcome.next.${outcome}`)}
      hideTabs={mayGoOn}
      tab="today"
      footer={<Button size="large" grow kind={mayGoOn || outcome === 'open' ? 'primary' : 'plain'} {...main} />}
    >
      {outcome === 'emergency' ? (
        <>
          <EmergencyAdvice
            code={urgent}
            emergencyNumber={site.emergencyNumber}
            siteName={site.name}
            phone={site.phone}
          />
          <Text>{t('outcome.next.emergency')}</Text>
        </>
      ) : null}
      {view.findings.length > 0 && outcome !== 'emergency' ? (
        <Card heading={t('outcome.why')} edge={mayGoOn ? 'caution' : 'stop'}>
          {view.findings.map((finding) => (
            <Text key={finding.code}>
              {t(`finding.${finding.code}`, { context: finding.outcome === 'caution' ? undefined : 'hold' })}
            </Text>
          ))}
        </Card>
      ) : null}
      {outcome === 'hold_review' ? (
        <Link href={`tel:${site.phone.replace(/[^+0-9]/g, '')}`} external>
          {t('outcome.call', { name: site.name, phone: site.phone })}
        </Link>
      ) : null}
    </ParticipantShell>
  );
}
