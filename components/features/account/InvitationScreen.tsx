/**
 * Opened from the invitation's mail: who invites, to what, and a password of one's own. A caregiver who has an account
 * already joins with it.
 */
import { useQuery, useQueryClient } from '@tanstack/react-query';
import { useRouter } from 'expo-router';
import { useTranslation } from 'react-i18next';
import { PublicShell } from '@/components/layout/PublicShell';
import { callDoor, useCall, type ApiProblem } from '@/components/runtime/api';
import { useFragment } from '@/components/runtime/fragment';
import { useMe } from '@/components/runtime/me';
import { Button } from '@/components/ui/Button';
import { Link } from '@/components/ui/Link';
import { Notice } from '@/components/ui/Notice';
import { FailedState, LoadingState } from '@/components/ui/States';
import { Text } from '@/components/ui/Text';
import { joinByInvitation, lookAtInvitation } from '@/shared/contracts/account';
import type { AnswerOf } from '@/shared/contracts/contract';
import { AcceptForm } from './AcceptForm';

type Invitation = AnswerOf<typeof lookAtInvitation>;

export function InvitationScreen() {
  const { t } = useTranslation('public');
  const token = useFragment('token');
  const look = useQuery<Invitation, ApiProblem>({
    queryKey: ['account', 'invitation', token],
    queryFn: () => callDoor(lookAtInvitation, { body: { token: token ?? '' } }),
    enabled: token !== null,
  });
  if (token === null || (look.error && !look.error.offline)) {
    return (
      <PublicShell title={t('invitation.overTitle')}>
        <Text>{look.error?.problem.detail ?? t('invitation.noToken')}</Text>
        <Text>{t('invitation.overHelp')}</Text>
        <Link href="/sign-in">{t('invitation.toSignIn')}</Link>
      </PublicShell>
    );
  }
  if (look.error) {
    return (
      <PublicShell title={t('invitation.title')}>
        <FailedState onRetry={() => void look.refetch()} />
      </PublicShell>
    );
  }
  if (!look.data) {
    return (
      <PublicShell title={t('invitation.title')}>
        <LoadingState />
      </PublicShell>
    );
  }
  const { invitedBy, siteName, role, hasAccount } = look.data;
  return (
    <PublicShell title={t('invitation.title')} lead={t(`invitation.lead.${role}`, { invitedBy, siteName })}>
      {hasAccount ? <Join token={token} email={look.data.email} /> : <AcceptForm token={token} email={look.data.email} />}
    </PublicShell>
  );
}

function Join({ token, email }: { token: string; email: string }) {
  const { t } = useTranslation('public');
  const me = useMe();
  const router = useRouter();
  const queries = useQueryClient();
  const join = useCall(joinByInvitation);
  if (me?.account.email !== email) {
    return (
      <>
        <Text>{t('invitation.signInFirst', { email })}</Text>
        <Link href="/sign-in">{t('invitation.toSignIn')}</Link>
      </>
    );
  }
  const accept = async () => {
    await join.mutateAsync({ body: { token } });
    await queries.resetQueries();
    router.replace('/shared');
  };
  return (
    <>
      {join.error ? <Notice tone="stop" title={join.error.problem.detail} announce="assertive" /> : null}
      <Button label={t('invitation.join')} size="large" grow busy={join.isPending} onPress={() => void accept().catch(() => undefined)} />
    </>
  );
}
