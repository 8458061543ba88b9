/**
 * Shown at an address that is no door, with the way back. It does not say whether something else is there.
 */
import { useTranslation } from 'react-i18next';
import { PublicShell } from '@/components/layout/PublicShell';
import { Link } from '@/components/ui/Link';
import { Text } from '@/components/ui/Text';

export function NotFoundPage() {
  const { t } = useTranslation('common');
  return (
    <PublicShell title={t('notFound.title')}>
      <Text>{t('notFound.detail')}</Text>
      <Link href="/">{t('notFound.back')}</Link>
    </PublicShell>
  );
}
