/**
 * What the answers on this page lead to, at once and in words: what to look for, then what to do. It must not sound as if it had decided;
 * the server does.
 */
import { useTranslation } from 'react-i18next';
import { EmergencyAdvice } from '@/components/features/session/pictures/EmergencyAdvice';
import { Notice } from '@/components/ui/Notice';
import { Text } from '@/components/ui/Text';
import type { ClearanceView } from '@/shared/contracts/clearance';
import type { Consequence } from './precheck-pages';

export function ConsequenceNotice({ consequence, site }: { consequence: Consequence; site: ClearanceView['site'] }) {
  const { t } = useTranslation('precheck');
  const { outcome, findings } = consequence;
  if (outcome === 'go_on') return null;
  if (outcome === 'emergency') {
    const code = findings.find((finding) => finding.outcome === 'emergency')?.code ?? 'other';
    return (
      <EmergencyAdvice code={code} emergencyNumber={site.emergencyNumber} siteName={site.name} phone={site.phone} />
    );
  }
  return (
    <Notice tone={outcome === 'caution' ? 'caution' : 'stop'} title={t(`consequence.${outcome}`)} announce="polite">
      {findings.map((finding) => (
        <Text key={finding.code} size="small">
          {t(`finding.${finding.code}`, { context: finding.outcome === 'caution' ? undefined : 'hold' })}
        </Text>
      ))}
    </Notice>
  );
}
