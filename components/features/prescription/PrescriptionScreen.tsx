/**
 * Writing, amending and signing: left the form, right what it means (the trapezoid to scale, every limit as a bar). The page judges only
 * to explain; the server judges again when it is written and when it is signed.
 */
import { useLocalSearchParams } from 'expo-router';
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { RecordShell } from '@/components/features/participant/pictures/RecordShell';
import { usePages, useRead } from '@/components/runtime/api';
import { useMe, useNowOfServer } from '@/components/runtime/me';
import { EmptyState, FailedState, LoadingState } from '@/components/ui/States';
import { readParticipant, type ParticipantView } from '@/shared/contracts/participant';
import { listPrescriptions, type PrescriptionView } from '@/shared/contracts/prescription';
import { listProtocols } from '@/shared/contracts/site';
import type { ProtocolSettings } from '@/shared/values/protocol-settings';
import { PrescriptionEditor } from './PrescriptionEditor';
import { SignPanel } from './SignPanel';
import { VersionsCard } from './VersionsCard';

const wideRem = 90;

export function PrescriptionScreen() {
  const { t } = useTranslation('prescription');
  const { participantId = '' } = useLocalSearchParams<{ participantId: string }>();
  const me = useMe();
  const now = useNowOfServer();
  const person = useRead(readParticipant, { params: { participantId } });
  const versions = usePages(listPrescriptions, { params: { participantId }, query: {} });
  const siteId = person.data?.siteId;
  const protocols = usePages(listProtocols, { query: { ...(siteId ? { siteId } : {}) }, enabled: siteId !== undefined });
  const failed = [person, versions, protocols].find((read) => read.isError);
  const all = versions.data?.pages.flatMap((page) => page.items) ?? [];
  const inForce = all.find((one) => one.status === 'signed') ?? null;
  const settings = protocols.data?.pages[0]?.items[0]?.settings;
  const mayWrite = me?.account.role === 'clinician';
  return (
    <RecordShell title={t(mayWrite ? (inForce ? 'amendTitle' : 'title') : 'readTitle')} participantId={participantId} name={person.data?.name ?? ''} maxRem={wideRem}>
      {failed ? <FailedState onRetry={() => void Promise.all([person.refetch(), versions.refetch(), protocols.refetch()])} /> : null}
      {!failed && (!person.data || !versions.data || !settings || now === null) ? <LoadingState lines={10} /> : null}
      {person.data && versions.data && settings && now !== null ? (
        <Content person={person.data} all={all} inForce={inForce} settings={settings} now={now} isClinician={mayWrite} accountName={me?.account.name ?? ''} />
      ) : null}
    </RecordShell>
  );
}

interface ContentProps {
  person: ParticipantView;
  all: readonly PrescriptionView[];
  inForce: PrescriptionView | null;
  settings: ProtocolSettings;
  /** The server's clock. */
  now: string;
  isClinician: boolean;
  accountName: string;
}

function Content({ person, all, inForce, settings, now, isClinician, accountName }: ContentProps) {
  const { t } = useTranslation('prescription');
  const [editing, setEditing] = useState(false);
  const waiting = all.find((one) => one.status === 'draft' || one.status === 'awaiting_second_signature') ?? null;
  const editor = isClinician && person.withdrawnAt === null && (editing || waiting === null);
  return (
    <>
      {waiting && !editing ? <SignPanel draft={waiting} before={inForce} mayEdit={isClinician} isClinician={isClinician} accountName={accountName} onEdit={() => setEditing(true)} /> : null}
      {editor ? <PrescriptionEditor person={person} inForce={inForce} draft={waiting} settings={settings} now={now} onWritten={() => setEditing(false)} /> : null}
      {!isClinician && all.length === 0 ? <EmptyState title={t('none')}>{t('noneHelp')}</EmptyState> : null}
      {all.length > 0 ? <VersionsCard versions={all} zone={person.zone} /> : null}
    </>
  );
}
