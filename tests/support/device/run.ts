// What: a session's run on the bench: the real runner, log and sender around a stimulator whose clocks are turned by hand.
// Must not: wait for real time.
import { phoneStore } from '@/components/runtime/phone-store';
import { SessionRun } from '@/components/runtime/session-run';
import { UnsentSender } from '@/components/runtime/unsent-sender';
import type { PermitView } from '@/shared/contracts/permit';
import { milliampOf, secondsOf, coulombOf } from '@/shared/values/units';
import { freshAccount, readyBench, settled, type Bench } from './bench';
import { claimsOf, nowText, type Signer } from './permits';

export const site = {
  id: '5f0c4a1b-2c3d-4e5f-8a9b-0c1d2e3f4a5b',
  name: 'Lantern Street Clinic',
  code: 'LS',
  phone: '+44 1632 960100',
  emergencyNumber: '999',
  zone: 'Europe/London',
};

export async function permitView(house: Signer): Promise<PermitView> {
  const claims = claimsOf();
  return {
    id: claims.jti,
    sessionId: claims.session,
    courseId: '8f5f2c3e-6f0b-4a62-8b6a-0e5d3c1b2a90',
    participantId: claims.participant,
    deviceId: claims.device,
    prescriptionVersion: 1,
    state: 'live',
    voidedBy: null,
    issuedAt: nowText,
    expiresAt: nowText,
    expiresBy: 'issue',
    counter: claims.counter,
    token: await house.sign(claims),
    dose: {
      waveform: 'tDCS',
      intensityMilliamp: milliampOf(claims.intensityMicroamp),
      rampUpSeconds: secondsOf(claims.rampUpMs),
      holdSeconds: secondsOf(claims.holdMs),
      rampDownSeconds: secondsOf(claims.rampDownMs),
      chargeCoulomb: coulombOf(claims.chargeMicrocoulomb),
      minutes: 21,
      electrodes: [
        { position: 'F3', polarity: 'anode', areaSquareCentimetre: 25, share: 1 },
        { position: 'Fp2', polarity: 'cathode', areaSquareCentimetre: 25, share: 1 },
      ],
    },
    sessionNumber: 8,
    sessionsTotal: 20,
  };
}

export interface RunBench {
  accountId: string;
  run: SessionRun;
  sender: UnsentSender;
  pass(seconds: number): Promise<void>;
  reload(seconds: number): Promise<RunBench>;
}

const senders: UnsentSender[] = [];
/** After a test: what still wants to send gives up. */
export async function restAll(): Promise<void> {
  for (let turn = 0; turn < 4; turn += 1) await settled();
  for (const sender of senders) sender.rest();
}

async function around(accountId: string, bench: Bench, sender = new UnsentSender(accountId)): Promise<RunBench> {
  let seconds = 0;
  senders.push(sender);
  const run = new SessionRun(accountId, {
    stimulator: async () => bench.device,
    store: phoneStore,
    sender: () => sender,
    claim: async () => true,
    monotonicSeconds: () => seconds,
  });
  return {
    accountId,
    run,
    sender,
    async pass(by) {
      for (let second = 0; second < by; second += 1) {
        seconds += 1;
        await bench.pass(1);
      }
      for (let turn = 0; turn < 4; turn += 1) await settled();
    },
    async reload(by) {
      const again = await around(accountId, await bench.reload(by));
      await again.run.open();
      await settled();
      return again;
    },
  };
}

/** Paired, on the head, contact good, nothing begun. The bench's device is open already. */
export async function runBench(signer: Signer, accountId = freshAccount()): Promise<RunBench> {
  return runBenchOf(accountId, await readyBench(signer, accountId));
}

export async function runBenchOf(accountId: string, bench: Bench, sender?: UnsentSender): Promise<RunBench> {
  const opened = bench.device;
  // The runner opens what it is given; this one is open.
  opened.open = async () => undefined;
  const made = await around(accountId, bench, sender);
  await made.run.open();
  return made;
}
