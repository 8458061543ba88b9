// What: for every door one good request or more: whom it names, who may send it, and what is sent. Tests walk the doors with it.
// Must not: say what is right; tests do. A request is made when it is asked for, and each time it can be sent anew.
import { randomUUID } from 'node:crypto';
import { z } from 'zod';
import { insertCaregiver, insertShares } from '@/db/queries/caregiver';
import { insertInvitation } from '@/db/queries/invitation';
import { hashOfMailToken, newMailToken } from '@/server/invitation';
import { inviteCaregiver } from '@/server/features/caregiver/invite-caregiver';
import { writePrescription } from '@/server/features/prescription/write-prescription';
import { enrolParticipant } from '@/server/features/participant/enrol-participant';
import { sendMessage } from '@/server/features/message/send-message';
import type { ContractShape } from '@/shared/contracts/contract';
import { doors, type DoorName } from '@/shared/contracts/doors';
import { defaultProtocolSettings } from '@/shared/rules/protocol-defaults';
import type { Role } from '@/shared/values/roles';
import { addDays, localDate } from '@/shared/values/zone';
import { password } from './house';
import { prescriptionFor } from './prescribing';
import { consentForm, newDevice, screeningForm, trainingForm } from './records';
import { clearAnswers, zone } from './running';
import { clearTheWay, smallPicture, type PersonsRecord } from './whole-record';
import type { Who, World } from './world';

export interface Asked {
  params?: Record<string, string>;
  query?: Record<string, string>;
  /** For an upload, the fields beside the file. */
  body?: Record<string, unknown>;
  file?: Buffer;
}

export interface Sample {
  /** Whose the request names: a person's record, a site's things, or nothing but oneself. */
  names: 'person' | 'site' | 'nothing';
  /** One of those who may. */
  by: Who;
  /** Tells two of one door apart. */
  note: string;
  ask(world: World, who: Who): Asked | Promise<Asked>;
}

type Make = (world: World, record: PersonsRecord, who: Who) => Asked | Promise<Asked>;
const sampleOf =
  (names: Sample['names']) =>
  (by: Who, make: Make = () => ({}), note = ''): Sample => {
    return { names, by, note, ask: (world, who) => make(world, world.recordFor(who), who) };
  };
const person = sampleOf('person');
const site = sampleOf('site');
const nothing = sampleOf('nothing');

const self = 'participant, self';
const clinician = 'clinician, own site';
const coordinator = 'coordinator, own site';
const administrator = 'administrator, own site';
const monitor = 'monitor, own site';
const reason = 'As agreed by telephone';
const oneCase = JSON.stringify({
  cases: [{ id: 'half', kind: 'fraction', input: { prescribed_C: 2, delivered_C: 1 }, expected: { fraction: 0.5 } }],
});

const ofPerson = ({ patient }: PersonsRecord) => ({ participantId: patient.participantId });
const today = async ({ clinic }: World) => localDate(Date.parse(await clinic.now()), zone);
const newAddress = () => `new.${randomUUID()}@harrowmere.example`;

/** A link that works, as if it had come by mail. */
export async function invite(
  { clinic, siteId }: World,
  { role = 'coordinator', email = newAddress(), subjectId = null, days = 7 }: Partial<Link> = {},
): Promise<string> {
  const { token, hash } = newMailToken();
  const createdAt = await clinic.now();
  const expiresAt = new Date(Date.parse(createdAt) + days * 86_400_000).toISOString();
  const row = { id: randomUUID(), role, email, name: 'Nell Carder', siteId, subjectId, tokenHash: hash };
  await insertInvitation(clinic.client.db, { ...row, invitedBy: 'Oona Feld', createdAt, expiresAt });
  return token;
}
interface Link {
  role: Role;
  email: string;
  subjectId: string | null;
  days: number;
}

/** Somebody whom this caregiver may join too. */
async function inviteToJoin(world: World, who: Who): Promise<string> {
  const { clinic, siteId, people } = world;
  const email = who === 'anyone' ? newAddress() : people[who].email;
  const { participantId } = await clinic.patient('Joined Too', siteId);
  const id = randomUUID();
  const createdAt = await clinic.now();
  const row = { id, participantId, name: 'A Helper', email, createdAt, stopTokenHash: hashOfMailToken(id) };
  await insertCaregiver(clinic.client.db, row);
  const shares = { adherence: true, diary: false, missedMail: false };
  await insertShares(clinic.client.db, { id: randomUUID(), caregiverId: id, ...shares, createdAt });
  return invite(world, { role: 'caregiver', email, subjectId: id });
}

/** Enrolled, and not here yet. */
async function invited({ clinic, siteId, people }: World) {
  const contact = { phone: '020 7946 0142', emergencyContact: { name: 'Tam', phone: '020 7946 0143' } };
  const who = { siteId, name: 'Ivo Inviter', email: newAddress(), bornOn: '1984-03-02', zone };
  const { id } = await clinic.call(people[clinician], enrolParticipant, { body: { ...who, ...contact } });
  return { participantId: id };
}

async function draft({ clinic, siteId, people }: World) {
  const patient = await clinic.patient('Dora Fathom', siteId);
  const body = prescriptionFor(patient, await clinic.now());
  return clinic.call(people[clinician], writePrescription, { body });
}

async function protocolVersion({ clinic, siteId }: World): Promise<number> {
  const [row] = await clinic.rows({ n: z.number() }, 'select max(version)::int n from protocol where site_id = $1', [
    siteId,
  ]);
  return row?.n ?? 0;
}

/** The first session that is still to come; each time it moves to a later day. */
async function plannedSession(world: World) {
  const [row] = await world.clinic.rows(
    { id: z.string(), last: z.string() },
    `select id, (select max(window_from)::text from planned_session where participant_id = $1) as last from planned_session
     where participant_id = $1 and closed_at is null order by window_from limit 1`,
    [world.spare.patient.participantId],
  );
  if (!row) throw new Error('nothing is planned');
  return { id: row.id, free: addDays(localDate(Date.parse(row.last), zone), 1) };
}

/** The open row that the person's message stands in; a new message if it was closed. */
async function item({ clinic }: World, { patient }: PersonsRecord): Promise<string> {
  await clinic.call(patient, sendMessage, { body: { text: 'One more thing' } });
  const [row] = await clinic.rows(
    { id: z.string() },
    `select id from worklist_item where participant_id = $1 and matter = 'message' and closed_at is null`,
    [patient.participantId],
  );
  return row?.id ?? '';
}

async function oneOfOwnCaregivers({ clinic, withdrawn }: World, { patient }: PersonsRecord): Promise<string> {
  if (patient === withdrawn.patient) return withdrawn.caregiverId;
  const shares = { adherence: true, diary: false, missedMail: false };
  const body = { name: 'Sparrow Reed', email: newAddress(), shares };
  const [known] = await clinic.rows(
    { id: z.string() },
    `select id from caregiver where participant_id = $1 and name = 'Sparrow Reed' and closed_at is null`,
    [patient.participantId],
  );
  return known?.id ?? (await clinic.call(patient, inviteCaregiver, { body })).id;
}

let codes = 0;
/** Two to four letters that no site has. */
function newSiteCode(): string {
  codes += 1;
  const letter = (place: number) => String.fromCharCode(65 + (Math.floor(codes / 26 ** place) % 26));
  return `Z${letter(1)}${letter(0)}`;
}

const nextDay = { rednessStillThere: false, headacheNextDay: 0 };
const afterSession = { nothingFelt: true, effects: [], headacheAfter: 0, skin: 'ok', redFlags: [], freeText: 'Quiet' };

export const samples: Record<DoorName, readonly Sample[]> = {
  readHealth: [nothing('anyone')],
  listDemoAccounts: [nothing('anyone')],
  listDemoMail: [nothing('anyone')],
  moveDemoClock: [nothing('anyone', () => ({ body: { advanceSeconds: 0 } }))],
  readMe: [nothing(self)],
  lookAtInvitation: [nothing('anyone', async (world) => ({ body: { token: await invite(world) } }))],
  acceptInvitation: [
    nothing('anyone', async (world) => ({
      body: { token: await invite(world), name: 'Nell Carder', password, language: 'en' },
    })),
  ],
  joinByInvitation: [
    nothing('caregiver, not linked', async (world, _record, who) => ({
      body: { token: await inviteToJoin(world, who) },
    })),
  ],
  stopMails: [nothing('anyone', ({ caregivers }) => ({ body: { token: caregivers.adherence.stopToken } }))],
  listSites: [nothing(administrator)],
  addSite: [
    nothing(administrator, () => ({
      body: {
        ...{ name: 'Harbour Clinic', code: newSiteCode(), kind: 'service', phone: '020 7946 0190' },
        ...{ emergencyNumber: '999', zone },
      },
    })),
  ],
  listStaff: [nothing(administrator), site(administrator, ({ siteId }) => ({ query: { siteId } }))],
  inviteStaff: [
    site(administrator, ({ siteId }) => ({
      body: { email: newAddress(), name: 'Nia Newcome', role: 'monitor', siteId },
    })),
  ],
  suspendStaff: [
    site(administrator, async ({ clinic, siteId }) => ({
      params: { accountId: (await clinic.staff('Spare Staff', 'monitor', siteId)).accountId },
      body: { suspended: true, reason },
    })),
  ],
  listProtocols: [nothing(administrator), site(administrator, ({ siteId }) => ({ query: { siteId, all: 'true' } }))],
  changeProtocol: [
    site(administrator, async (world) => {
      const contacts = [{ name: 'On call', email: 'oncall@harrowmere.example', phone: '020 7946 0101' }];
      const settings = defaultProtocolSettings({ contacts, consentRequiredFrom: await world.clinic.now() });
      const basedOnVersion = await protocolVersion(world);
      return { body: { siteId: world.siteId, basedOnVersion, settings: { ...settings }, reason, password } };
    }),
  ],
  listParticipants: [nothing(clinician)],
  enrolParticipant: [
    site(clinician, ({ siteId }) => ({
      body: {
        ...{ siteId, name: 'Edda Newman', email: newAddress(), phone: '020 7946 0155', bornOn: '1990-05-06', zone },
        ...{ language: 'en', emergencyContact: { name: 'Kit Newman', phone: '020 7946 0156' } },
      },
    })),
  ],
  inviteAgain: [person(clinician, async (world) => ({ params: await invited(world), body: {} }))],
  readParticipant: [person(clinician, (_world, record) => ({ params: ofPerson(record) }))],
  readTimeline: [person(clinician, (_world, record) => ({ params: ofPerson(record) }))],
  readTrends: [person(clinician, (_world, record) => ({ params: ofPerson(record) }))],
  withdrawParticipant: [
    person(clinician, async ({ clinic, siteId }) => {
      const { participantId } = await clinic.patient('Wim Drawn', siteId);
      return { params: { participantId }, body: { reason } };
    }),
  ],
  recordConsent: [
    person(clinician, (_world, record) => ({
      params: ofPerson(record),
      body: { kind: 'own', ...consentForm, remark: 'Read aloud' },
    })),
  ],
  recordScreening: [
    person(clinician, (_world, record) => ({ params: ofPerson(record), body: { ...screeningForm() } })),
  ],
  recordTraining: [
    person(clinician, (_world, record) => ({ params: ofPerson(record), body: { ...trainingForm, helperName: 'Tam' } })),
  ],
  recordWatchedSession: [
    person(clinician, (_world, record) => ({
      params: ofPerson(record),
      body: { where: 'clinic', when: 'done', tolerated: 'well', remark: 'Calm' },
    })),
  ],
  listDevices: [nothing(administrator)],
  addDevice: [
    site(administrator, ({ siteId }) => ({
      body: {
        ...{ siteId, label: 'LS-77', model: 'Model One', serial: `S-${randomUUID()}`, firmware: '1.0' },
        calibrationDueOn: '2030-01-01',
      },
    })),
  ],
  assignDevice: [
    person(clinician, async ({ clinic, siteId, people }) => {
      const device = await newDevice(clinic, people[clinician], siteId);
      const { participantId } = await clinic.patient('Hannes Hand', siteId);
      return { params: { deviceId: device.id }, body: { participantId, reason } };
    }),
  ],
  changeDeviceState: [
    site(administrator, async ({ clinic, siteId, people }) => {
      const device = await newDevice(clinic, people[clinician], siteId);
      return { params: { deviceId: device.id }, body: { state: 'quarantined', reason } };
    }),
  ],
  listSupplies: [person(clinician, (_world, record) => ({ params: ofPerson(record) }))],
  giveSupply: [
    person(clinician, async (world, record) => ({
      params: ofPerson(record),
      body: { kind: 'saline', lot: 'S-2', openedOn: await today(world) },
    })),
  ],
  writePrescription: [
    person(clinician, async ({ clinic, siteId }) => {
      const patient = await clinic.patient('Paul Prescott', siteId);
      return { body: { ...prescriptionFor(patient, await clinic.now()) } };
    }),
  ],
  readPrescription: [person(clinician, (_world, { prescription: { id } }) => ({ params: { prescriptionId: id } }))],
  listPrescriptions: [person(clinician, (_world, record) => ({ params: ofPerson(record) }))],
  signPrescription: [
    person(clinician, async (world) => {
      const { id, contentHash } = await draft(world);
      return { params: { prescriptionId: id }, body: { contentHash, meaning: 'prescribed', password } };
    }),
  ],
  acknowledgePrescription: [
    person(self, (_world, { prescription: { id } }) => ({ params: { prescriptionId: id }, body: {} })),
  ],
  readCourse: [person(clinician, (_world, { courseId }) => ({ params: { courseId } }))],
  pauseCourse: [
    person(clinician, async ({ clinic, spare: { courseId } }) => {
      const open = 'select id from course_pause where course_id = $1 and closed_at is null';
      const pauses = await clinic.rows({ id: z.string() }, open, [courseId]);
      return { params: { courseId }, body: { paused: pauses.length === 0, reason } };
    }),
  ],
  rescheduleSession: [
    person(clinician, async (world) => {
      const { id, free } = await plannedSession(world);
      return { params: { plannedSessionId: id }, body: { day: free, reason } };
    }),
  ],
  readClearance: [nothing(self), person(self, (_world, { courseId }) => ({ query: { courseId } }))],
  answerPrecheck: [nothing(self, () => ({ body: { answers: { ...clearAnswers }, language: 'en' } }))],
  readPermit: [person(self, (_world, { permit }) => ({ params: { permitId: permit.id } }))],
  readPermitKeys: [nothing('anyone')],
  readOwnDevice: [nothing(self)],
  sendEvents: [
    person(self, (_world, { second, lastEvent }) => ({
      params: { permitId: second.id },
      body: { events: [{ ...lastEvent }] },
    })),
  ],
  readSession: [person(self, (_world, { permit }) => ({ params: { sessionId: permit.sessionId } }))],
  writeDiary: [
    person(self, (_world, { second }) => ({
      params: { sessionId: second.sessionId },
      body: { kind: 'after', answers: { ...afterSession } },
    })),
    person(
      self,
      (_world, { permit }) => ({
        params: { sessionId: permit.sessionId },
        body: { kind: 'next_day', answers: { ...nextDay } },
      }),
      ' the next day',
    ),
  ],
  listDiary: [nothing(self)],
  addPhoto: [
    person(self, async (_world, { permit }) => ({
      params: { sessionId: permit.sessionId },
      body: { consent: 'true' },
      file: await smallPicture(),
    })),
  ],
  readPhoto: [person(self, (_world, { photoId }) => ({ params: { photoId } }))],
  readWorklist: [nothing(clinician)],
  claimItem: [
    person(clinician, async (world, record) => {
      const itemId = await item(world, record);
      const [row] = await world.clinic.rows(
        { owner: z.string().nullable() },
        'select account_id as owner from worklist_claim where item_id = $1 order by created_at desc, id desc limit 1',
        [itemId],
      );
      return { params: { itemId }, body: { claim: (row?.owner ?? null) === null } };
    }),
  ],
  recordReview: [
    person(clinician, async (world, record) => ({
      body: { itemId: await item(world, record), finding: 'Asked and answered', decision: 'done', reason, password },
    })),
  ],
  listReviews: [person(clinician, (_world, record) => ({ params: ofPerson(record) }))],
  listCaregivers: [nothing(self)],
  inviteCaregiver: [
    nothing(self, () => ({
      body: {
        ...{ name: 'Cara Giver', email: newAddress() },
        shares: { adherence: true, diary: false, missedMail: true },
      },
    })),
  ],
  changeShares: [
    person(self, async (world, record) => ({
      params: { caregiverId: await oneOfOwnCaregivers(world, record) },
      body: { adherence: false, diary: false, missedMail: false },
    })),
  ],
  removeCaregiver: [
    person(self, async (world, record) => ({
      params: { caregiverId: await oneOfOwnCaregivers(world, record) },
      body: {},
    })),
  ],
  readShared: [nothing('caregiver, diary shared')],
  readSharedDiary: [person('caregiver, diary shared', (_world, record) => ({ params: ofPerson(record) }))],
  setCaregiverCode: [nothing('caregiver, diary shared', () => ({ body: { code: '246810' } }))],
  listMessages: [nothing(self), person(clinician, (_world, record) => ({ query: ofPerson(record) }))],
  sendMessage: [
    nothing(self, () => ({ body: { text: 'Is tomorrow fine too?' } })),
    person(clinician, (_world, record) => ({ body: { ...ofPerson(record), text: 'Please call us' } })),
  ],
  readAudit: [
    nothing(monitor),
    person(monitor, (_world, record) => ({ query: ofPerson(record) })),
    site(monitor, ({ siteId }) => ({ query: { siteId } })),
  ],
  readSiteReport: [nothing(monitor), site(monitor, ({ siteId }) => ({ query: { siteId } }))],
  exportSessions: [nothing(monitor), site(coordinator, ({ siteId }) => ({ query: { siteId } }))],
  exportOwn: [nothing(self)],
  readQualification: [nothing(monitor)],
  runQualification: [
    site(administrator, ({ siteId }) => ({ body: { siteId, fileName: 'own-cases.json', content: oneCase } })),
  ],
  // Last: what it clears out of its way is what other doors are asked to do.
  issuePermit: [
    person(self, async ({ clinic, record, withdrawn }, { patient }) =>
      patient === record.patient
        ? { body: await clearTheWay(clinic, record) }
        : {
            body: {
              courseId: withdrawn.courseId,
              precheckId: randomUUID(),
              batteryPercent: 80,
              deviceId: withdrawn.deviceId,
            },
          },
    ),
  ],
};

export interface Knock {
  door: DoorName;
  contract: ContractShape;
  sample: Sample;
}

/** As titles of tests say it. */
export const nameOf = ({ door, sample }: Knock) => `${door} of ${sample.names}${sample.note}`;
export const titled = (list: readonly Knock[]) => list.map((knock) => [nameOf(knock), knock] as const);

/** Every door with each of its samples, in the order in which they do not get in each other's way; one without a sample throws by name. */
export function allKnocks(): Knock[] {
  for (const door of Object.keys(doors))
    if (!(door in samples)) throw new Error(`The door ${door} has no sample in tests/support/samples.ts`);
  return (Object.keys(samples) as DoorName[]).flatMap((door) =>
    samples[door].map((sample) => ({ door, contract: doors[door], sample })),
  );
}
