// Six things that somebody does while another person's session is under way, at each of its steps: no permit is given or begun after it,
// what runs goes down at its next contact if the reason is safety and goes on otherwise, and what was delivered is kept.

import { randomUUID } from 'node:crypto';
import { z } from 'zod';
import type { AccountActor } from '@/server/action';
import { readClearance } from '@/server/features/clearance/read-clearance';
import { pauseCourse } from '@/server/features/course/pause-course';
import { changeDeviceState } from '@/server/features/device/change-device-state';
import { withdrawParticipant } from '@/server/features/participant/withdraw-participant';
import { issuePermit } from '@/server/features/permit/issue-permit';
import { readPermit } from '@/server/features/permit/read-permit';
import { type Clinic } from '../support/clinic';
import { sign, write, type Change } from '../support/prescribing';
import {
  answer,
  numbered,
  permitBody,
  permitFor,
  readyPatient,
  runUpTo,
  samplesOf,
  send,
  openMorning,
} from '../support/running';
import type { ReadyPatient, Said } from '../support/running';

let clinic: Clinic;
let siteId: string;
let oona: AccountActor;

beforeAll(async () => {
  ({ clinic, siteId, oona } = await openMorning());
});
afterAll(() => clinic.close());

async function amend(ready: ReadyPatient, change: Change): Promise<void> {
  const [version] = await clinic.rows({ id: z.string() }, `select id from prescription where course_id = $1`, [
    ready.courseId,
  ]);
  await sign(
    clinic,
    oona,
    await write(clinic, oona, ready.patient, { amendsId: version?.id, reason: 'Seen', ...change }),
  );
}

interface Act {
  what: string;
  /** Why no permit is given. */
  refusal: string;
  voidedBy: string;
  /** Whether what runs goes down. */
  isSafety: boolean;
  run(ready: ReadyPatient): Promise<unknown>;
}
const acts: Act[] = [
  {
    ...{ what: 'an amendment to less', refusal: 'prescription_unacknowledged', voidedBy: 'amended', isSafety: true },
    run: (ready) => amend(ready, { dose: { intensityMilliamp: 1.5 } }),
  },
  {
    ...{
      what: 'an amendment of the plan alone',
      refusal: 'prescription_unacknowledged',
      voidedBy: 'amended',
      isSafety: false,
    },
    run: (ready) => amend(ready, { schedule: { sessionsTotal: 25 } }),
  },
  {
    ...{ what: 'a pause', refusal: 'prescription_paused', voidedBy: 'paused', isSafety: true },
    run: ({ courseId }) =>
      clinic.call(oona, pauseCourse, { params: { courseId }, body: { paused: true, reason: 'Seen' } }),
  },
  {
    ...{ what: 'a lockout', refusal: 'lockout_safety', voidedBy: 'lockout', isSafety: true },
    run: ({ patient }) => answer(clinic, patient, { seizure: 'today' }),
  },
  {
    ...{ what: 'a withdrawal', refusal: 'consent_withdrawn', voidedBy: 'withdrawn', isSafety: true },
    run: ({ patient: { participantId } }) =>
      clinic.call(oona, withdrawParticipant, { params: { participantId }, body: { reason: 'Wishes to' } }),
  },
  {
    ...{ what: 'a recall of the stimulator', refusal: 'device_recalled', voidedBy: 'device', isSafety: true },
    run: ({ deviceId }) =>
      clinic.call(oona, changeDeviceState, { params: { deviceId }, body: { state: 'recalled', reason: 'Batch' } }),
  },
];

const batch = (from: number, to: number): Said => ({
  kind: 'samples',
  atSeconds: from,
  samples: samplesOf(2, from, to),
  impedance: [],
});
const at = (kind: 'contact_lost' | 'contact_back' | 'pause' | 'resume', atSeconds: number): Said => ({
  kind,
  atSeconds,
});

/** What has been said when the act comes; each adds to the one before. */
const permitted: [string, Said[]][] = [
  ['the permit is given', []],
  [
    'the stimulator is found',
    [{ kind: 'identified', atSeconds: 0, deviceId: randomUUID(), serial: 'S', firmware: '1', batteryPercent: 80 }],
  ],
  ['contact is measured', [{ kind: 'contact', atSeconds: 0, position: 'F3', kiloohm: 6, grade: 'good' }]],
];
const running: [string, Said[]][] = [
  ['the stimulator has started', [{ kind: 'started', atSeconds: 0, counter: 1 }]],
  ['current goes up', [batch(0, 20)]],
  ['current is held', [batch(21, 120)]],
  ['something is felt', [{ kind: 'sensation', atSeconds: 125, sensation: 'tingling', strength: 3 }]],
  ['contact is lost', [at('contact_lost', 130)]],
  ['contact is back', [at('contact_back', 132)]],
  ['it is paused', [at('pause', 150)]],
  ['it goes on', [at('resume', 170)]],
  ['Stop was pressed', [{ kind: 'stop', atSeconds: 300, why: 'button' }]],
];
/** Everything up to a step. */
const upTo = (steps: readonly [string, Said[]][], index: number) =>
  steps.slice(0, index + 1).flatMap(([, said]) => said);

describe.each(acts)('$what', ({ refusal, voidedBy, isSafety, run }) => {
  it('before the pre-check and before the permit: no permit is given', async () => {
    const [early, late] = [await readyPatient(clinic, oona, siteId), await readyPatient(clinic, oona, siteId)];
    await run(early);
    expect(await clinic.call(early.patient, readClearance, { query: {} })).toMatchObject({ allowed: false });
    const { id } = await answer(clinic, late.patient);
    await run(late);
    const refused = await clinic.refused(late.patient, issuePermit, { body: permitBody(late, id), key: randomUUID() });
    expect(refused.reasons?.map(({ code }) => code) ?? [refused.code]).toContain(refusal);
  });

  it.each(permitted.map(([what], index) => [what, index] as const))(
    'when %s: the permit is void at once, and the stimulator hears it at its next word',
    async (_what, index) => {
      const ready = await readyPatient(clinic, oona, siteId);
      const permit = await permitFor(clinic, ready);
      const said = numbered(upTo(permitted, index));
      if (said.length > 0) await send(clinic, ready.patient, permit, said);
      await run(ready);
      const state = await clinic.call(ready.patient, readPermit, { params: { permitId: permit.id } });
      expect(state).toMatchObject({ state: 'void', voidedBy });
      const next = numbered(
        [{ kind: 'contact', atSeconds: 0, position: 'Fp2', kiloohm: 7, grade: 'good' }],
        said.length,
      );
      expect(await send(clinic, ready.patient, permit, next)).toMatchObject({
        ...{ refused: [], sessionState: 'void' },
        permit: { state: 'void', voidedBy, rampDown: true },
      });
    },
  );

  it.each(running.map(([what], index) => [what, index] as const))(
    `when %s: what runs ${isSafety ? 'goes down' : 'goes on'}, and all that was delivered is kept`,
    async (_what, index) => {
      const ready = await readyPatient(clinic, oona, siteId);
      const permit = await permitFor(clinic, ready);
      await clinic.advance(400);
      const before = numbered([...upTo(permitted, 2), ...upTo(running, index)]);
      await send(clinic, ready.patient, permit, before);
      await run(ready);
      const [next] = numbered(
        [{ kind: 'sensation', atSeconds: 301, sensation: 'itching', strength: 2 }],
        before.length,
      );
      if (!next) throw new Error('nothing is said');
      expect(await send(clinic, ready.patient, permit, [next])).toMatchObject({
        ...{ stored: [next.id], refused: [], sessionState: 'running' },
        permit: { state: 'used', voidedBy: isSafety ? voidedBy : null, rampDown: isSafety },
      });
      const lastSequence = before.length + 1;
      const [ended] = numbered(
        [{ kind: 'ended', atSeconds: 310, reason: 'permit_void', onSeconds: 310, chargeCoulomb: 0.5, lastSequence }],
        lastSequence,
      );
      if (!ended) throw new Error('nothing is said');
      const last = await send(clinic, ready.patient, permit, [...before, next, ended]);
      expect(last).toMatchObject({
        known: [...before, next].map(({ id }) => id),
        stored: [ended.id],
        refused: [],
        missing: [],
      });
      expect(last).toMatchObject({ sessionState: 'closed', permit: { state: 'used', rampDown: false } });
    },
  );

  it('after the record is whole: it stays as it was', async () => {
    const ready = await readyPatient(clinic, oona, siteId);
    const permit = await permitFor(clinic, ready);
    await clinic.advance(400);
    const said = runUpTo(permit, 300);
    const end = {
      kind: 'ended',
      atSeconds: 300,
      reason: 'stopped',
      onSeconds: 300,
      chargeCoulomb: 0,
      lastSequence: said.length,
    } as const;
    const whole = numbered([...said, end]);
    expect(await send(clinic, ready.patient, permit, whole)).toMatchObject({ sessionState: 'closed' });
    const kept = () =>
      clinic.rows({ row: z.unknown() }, `select to_jsonb(session) as row from session where permit_id = $1`, [
        permit.id,
      ]);
    const before = await kept();
    await run(ready);
    expect(await send(clinic, ready.patient, permit, whole)).toMatchObject({
      ...{ stored: [], refused: [], sessionState: 'closed' },
      permit: { state: 'used', voidedBy: null, rampDown: false },
    });
    expect(await kept()).toEqual(before);
  });
});
