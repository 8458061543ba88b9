/**
 * The demo's accounts, one press to be any of them. Where there is no demo the door does not exist and nothing is shown.
 */
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { useRead } from '@/components/runtime/api';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { Link } from '@/components/ui/Link';
import { Text } from '@/components/ui/Text';
import { space } from '@/components/ui/theme';
import { listDemoAccounts } from '@/shared/contracts/house';
import type { AnswerOf } from '@/shared/contracts/contract';

type DemoAccount = AnswerOf<typeof listDemoAccounts>[number];

/** One a role, and one participant in each state: enough to choose from, short enough to read. */
function shownOf(accounts: readonly DemoAccount[]): DemoAccount[] {
  const seen = new Set<string>();
  return accounts.filter(({ role, state }) => {
    const kind = `${role} ${state ?? ''}`;
    if (seen.has(kind) || state === 'invited') return false;
    seen.add(kind);
    return true;
  });
}

export function DemoAccounts({ onChoose }: { onChoose(email: string, password: string): void }) {
  const { t } = useTranslation('public');
  const read = useRead(listDemoAccounts);
  if (!read.data?.length) return null;
  return (
    <View style={{ paddingTop: space[8] }}>
      <Card heading={t('demo.title')} note={t('demo.note')} ground="sunken">
        <View style={{ gap: space[3] }}>
          {shownOf(read.data).map((account) => (
            <View
              key={account.email}
              style={{ flexDirection: 'row', alignItems: 'center', justifyContent: 'space-between', gap: space[3] }}
            >
              <View style={{ flexShrink: 1, minWidth: 0 }}>
                <Text weight="bold">{account.name}</Text>
                <Text size="small" tone="muted">
                  {[t(`role.${account.role}`), account.state ? t(`state.${account.state}`) : null, account.site].filter(Boolean).join(' · ')}
                </Text>
              </View>
              <Button
                kind="secondary"
                label={t('demo.be')}
                accessibleLabel={t('demo.beWhom', { name: account.name })}
                onPress={() => onChoose(account.email, account.password)}
              />
            </View>
          ))}
          <Link href="/demo/mail">{t('demo.mail')}</Link>
        </View>
      </Card>
    </View>
  );
}
