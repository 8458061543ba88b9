/**
 * The participant's caregivers: who, what each may see, inviting and removing.
 */
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { ParticipantShell } from '@/components/layout/ParticipantShell';
import { useCall, usePages } from '@/components/runtime/api';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { Dialog } from '@/components/ui/Dialog';
import { Notice } from '@/components/ui/Notice';
import { EmptyState, FailedState, LoadingState } from '@/components/ui/States';
import { Switch } from '@/components/ui/Switch';
import { Tag } from '@/components/ui/Tag';
import { Text } from '@/components/ui/Text';
import { space } from '@/components/ui/theme';
import { changeShares, listCaregivers, removeCaregiver, type CaregiverView } from '@/shared/contracts/caregiver';
import { InviteForm } from './InviteForm';
import { shareNames } from './share-names';

export function CaregiversScreen() {
  const { t } = useTranslation('caregiver');
  const list = usePages(listCaregivers, { query: {} });
  const caregivers = list.data?.pages.flatMap((page) => page.items) ?? [];
  return (
    <ParticipantShell title={t('list.title')} lead={t('list.lead')}>
      {list.isPending ? <LoadingState /> : null}
      {list.isError ? <FailedState onRetry={() => void list.refetch()} /> : null}
      {list.data && caregivers.length === 0 ? <EmptyState title={t('list.empty')}>{t('list.emptyHelp')}</EmptyState> : null}
      {caregivers.map((caregiver) => (
        <CaregiverCard key={caregiver.id} caregiver={caregiver} />
      ))}
      <InviteForm />
    </ParticipantShell>
  );
}

function CaregiverCard({ caregiver }: { caregiver: CaregiverView }) {
  const { t } = useTranslation('caregiver');
  const change = useCall(changeShares);
  const remove = useCall(removeCaregiver);
  const [asks, setAsks] = useState(false);
  const shares = change.isPending && change.variables.body ? change.variables.body : caregiver.shares;
  const failed = change.error ?? remove.error;
  return (
    <Card heading={caregiver.name} note={caregiver.email} aside={<Tag tone={caregiver.state === 'active' ? 'steady' : 'muted'} label={t(`list.${caregiver.state}`)} />}>
      <View style={{ gap: space[4] }}>
        {failed ? <Notice tone="stop" title={failed.offline ? t('offline') : failed.problem.detail} announce="assertive" /> : null}
        {shareNames.map((name) => (
          <Switch
            key={name}
            label={t(`share.${name}`)}
            hint={t(`share.${name}Hint`)}
            value={shares[name]}
            onChange={(value) => change.mutate({ params: { caregiverId: caregiver.id }, body: { ...caregiver.shares, [name]: value } })}
          />
        ))}
        {caregiver.mailsStopped ? <Text tone="muted">{t('list.mailsStopped')}</Text> : null}
        <Button kind="quiet" label={t('list.remove')} accessibleLabel={t('list.removeWhom', { name: caregiver.name })} onPress={() => setAsks(true)} />
      </View>
      <Dialog
        open={asks}
        title={t('list.removeTitle', { name: caregiver.name })}
        onClose={() => setAsks(false)}
        busy={remove.isPending}
        actions={
          <>
            <Button kind="secondary" label={t('list.keep')} onPress={() => setAsks(false)} />
            <Button kind="danger" label={t('list.remove')} busy={remove.isPending} onPress={() => remove.mutate({ params: { caregiverId: caregiver.id }, body: {} }, { onSuccess: () => setAsks(false) })} />
          </>
        }
      >
        <Text>{t('list.removeHelp')}</Text>
      </Dialog>
    </Card>
  );
}
