// From an allowed start to a running session: find the stimulator, place, watch contact, ask the server for the permit, begin. Every way
// out that is not a start is said with its reason; nothing is tried behind the person's back.

import { useRouter } from 'expo-router';
import { useState } from 'react';
import { ApiProblem, callDoor, useCall, useRead } from '@/components/runtime/api';
import type { DeviceIdentity, Pairing, StartAnswer, StartRefusal } from '@/components/runtime/device/stimulator';
import { canKeep } from '@/components/runtime/phone-store';
import { useMe } from '@/components/runtime/me';
import { useSessionRun } from '@/components/runtime/use-session-run';
import { readClearance, type ClearanceView } from '@/shared/contracts/clearance';
import { issuePermit, readOwnDevice, readPermit, readPermitKeys, type PermitView } from '@/shared/contracts/permit';
import type { Problem } from '@/shared/contracts/problem';

/** Why it did not start: the server's answer, the stimulator's, or none at all. */
export type StartProblem =
  | { from: 'server'; problem: Problem }
  | { from: 'stimulator'; why: StartRefusal }
  | { from: 'network' }
  | { from: 'ended' };

/** What the stimulator is told when it is found. */
function pairingOf(
  device: { id: string; serial: string },
  keys: Pairing['keys'],
  { participantId, asOf }: ClearanceView,
): Pairing {
  return { deviceId: device.id, serial: device.serial, keys, participantId, now: asOf };
}

export function useSetUp() {
  const router = useRouter();
  const me = useMe();
  const { view, session } = useSessionRun();
  const clearance = useRead(readClearance, { query: {} });
  const ownDevice = useRead(readOwnDevice);
  const keys = useRead(readPermitKeys);
  const issue = useCall(issuePermit);
  const [step, setStep] = useState(0);
  const [placed, setPlaced] = useState<readonly string[]>([]);
  const [isFound, setFound] = useState(false);
  const [isBusy, setBusy] = useState(false);
  const [isUnkept, setUnkept] = useState(false);
  const [problem, setProblem] = useState<StartProblem | null>(null);
  // Made once a wish: a second press after a lost answer asks for the same permit.
  const [key, setKey] = useState(() => crypto.randomUUID());
  const answer = clearance.data;
  const identity = view.device?.identity ?? null;

  async function find(): Promise<void> {
    const stimulator = session?.stimulator();
    if (!stimulator || !ownDevice.data || !keys.data || !answer || !me) return;
    setBusy(true);
    const isKept = await canKeep(me.account.id);
    setUnkept(!isKept);
    if (isKept) {
      await stimulator.pair(pairingOf(ownDevice.data, keys.data.keys, answer));
      setFound(true);
    }
    setBusy(false);
  }

  function toContact(): void {
    if (answer?.dose) session?.stimulator()?.measureContact(answer.dose.electrodes);
    setStep(2);
  }

  async function permitFor(given: ClearanceView): Promise<PermitView> {
    // One that was given and not used yet, before a reload or on another phone.
    if (given.livePermitId) return callDoor(readPermit, { params: { permitId: given.livePermitId } });
    return issue.mutateAsync({
      key,
      body: {
        courseId: given.courseId ?? '',
        precheckId: given.precheck?.id ?? '',
        batteryPercent: identity?.batteryPercent ?? 0,
        deviceId: identity?.deviceId ?? '',
      },
    });
  }

  /** The clinic may have changed its keys since the stimulator was found: then it is told the new ones, once. */
  async function begin(permit: PermitView, given: ClearanceView, found: DeviceIdentity): Promise<StartAnswer> {
    if (!session) return { started: false, why: 'not_paired' };
    const began = await session.begin(permit, given.site, found);
    if (began.started || began.why !== 'permit_foreign' || !ownDevice.data) return began;
    const [fresh, { data: present }] = await Promise.all([keys.refetch(), clearance.refetch()]);
    if (!fresh.data || !present) return began;
    await session.stimulator()?.pair(pairingOf(ownDevice.data, fresh.data.keys, present));
    return session.begin(permit, given.site, found);
  }

  async function start(): Promise<void> {
    if (!session || !answer || !identity || isBusy) return;
    setBusy(true);
    setProblem(null);
    try {
      const permit = await permitFor(answer);
      if (permit.state !== 'live') {
        setKey(crypto.randomUUID());
        setProblem({ from: 'ended' });
        await clearance.refetch();
      } else {
        const began = await begin(permit, answer, identity);
        if (began.started) router.replace('/run');
        else setProblem({ from: 'stimulator', why: began.why });
      }
    } catch (error) {
      if (!(error instanceof ApiProblem)) throw error;
      setProblem(error.offline ? { from: 'network' } : { from: 'server', problem: error.problem });
      // Refused is answered: the next press is a new wish.
      if (!error.offline) setKey(crypto.randomUUID());
    } finally {
      setBusy(false);
    }
  }

  return {
    view,
    session,
    clearance,
    ownDevice,
    keys,
    step,
    back: step === 0 ? () => router.replace('/today') : () => setStep(step - 1),
    toPlacement: () => setStep(1),
    toContact,
    placed,
    setPlaced,
    isFound,
    isBusy,
    isUnkept,
    identity,
    contacts: view.device?.contacts ?? [],
    problem,
    find,
    start,
  };
}
export type SetUp = ReturnType<typeof useSetUp>;
