// What: two sites with somebody of every kind, each of them signed in to the real server, and a whole record to knock at doors with.
// Made once a test file. Must not: say what is right; tests do.
import { createServer } from 'node:http';
import request from 'supertest';
import { closeCaregiver } from '@/db/queries/caregiver';
import { beat } from '@/db/queries/house';
import type { AccountActor } from '@/server/action';
import { readEnv } from '@/server/env';
import { createHouse, type HouseParts } from '@/server/house/open-house';
import { hashSecret } from '@/server/password';
import { withdrawParticipant } from '@/server/features/participant/withdraw-participant';
import { changeShares } from '@/server/features/caregiver/change-shares';
import type { Role } from '@/shared/values/roles';
import { acceptCaregiver, type Caregiver } from './caregivers';
import { openClinic, secretOfTests, type Clinic, type Patient } from './clinic';
import { origin, password } from './house';
import { goToMorning, readyPatient, type ReadyPatient } from './running';
import { keepRecord, type PersonsRecord } from './whole-record';

export type Browser = ReturnType<typeof request.agent>;

/** How each of them stands to the one record that requests name (a withdrawn person: to their own). */
export interface Standing {
  role: Role | null;
  /** For staff: do they belong to the site of the record. */
  atSite?: boolean;
  isOwner?: boolean;
  /** For caregivers: linked to the person, and not removed. */
  isLinked?: boolean;
  sharesDiary?: boolean;
  isSuspended?: boolean;
}

export const standings = {
  anyone: { role: null },
  'participant, self': { role: 'participant', isOwner: true },
  'participant, same site': { role: 'participant' },
  'participant, other site': { role: 'participant' },
  'participant, withdrawn': { role: 'participant', isOwner: true },
  'caregiver, nothing shared': { role: 'caregiver', isLinked: true },
  'caregiver, adherence shared': { role: 'caregiver', isLinked: true },
  'caregiver, diary shared': { role: 'caregiver', isLinked: true, sharesDiary: true },
  'caregiver, not linked': { role: 'caregiver' },
  'caregiver, removed': { role: 'caregiver' },
  'coordinator, own site': { role: 'coordinator', atSite: true },
  'coordinator, other site': { role: 'coordinator', atSite: false },
  'clinician, own site': { role: 'clinician', atSite: true },
  'clinician, other site': { role: 'clinician', atSite: false },
  'monitor, own site': { role: 'monitor', atSite: true },
  'monitor, other site': { role: 'monitor', atSite: false },
  'administrator, own site': { role: 'administrator', atSite: true },
  'administrator, other site': { role: 'administrator', atSite: false },
  'clinician, suspended': { role: 'clinician', atSite: true, isSuspended: true },
} as const satisfies Record<string, Standing>;

export type Who = keyof typeof standings;
export const everybody = Object.keys(standings) as Who[];
export const standingOf = (who: Who): Standing => standings[who];

export interface World {
  clinic: Clinic;
  siteId: string;
  otherSiteId: string;
  /** Everybody who has an account. */
  people: Record<Exclude<Who, 'anyone'>, AccountActor>;
  caregivers: { shares: Caregiver; adherence: Caregiver };
  /** Of the participant, and of the one who withdrew. */
  record: PersonsRecord;
  withdrawn: PersonsRecord;
  /** Somebody else of the site, ready to start, for what would get in the way of the record. */
  spare: ReadyPatient;
  /** What the others know as the record of whoever asks: their own for somebody who withdrew. */
  recordFor(who: Who): PersonsRecord;
  /** A browser that is signed in; the same one each time. */
  as(who: Who): Promise<Browser>;
  /** The same for somebody who has no place in `standings`. */
  signIn(email: string): Promise<Browser>;
  /** A browser of nobody that says nothing of where it comes from. */
  bare(): Browser;
  close(): Promise<void>;
}

/** @param parts of the house that serves it, for the one test that deceives it */
export async function openWorld(parts: Pick<HouseParts, 'mistake'> = {}): Promise<World> {
  const clinic = await openClinic();
  await goToMorning(clinic);
  const siteId = await clinic.site('LS');
  const otherSiteId = await clinic.site('MR');
  const staff = (name: string, role: Role, site: string) => clinic.staff(name, role, site);
  const clinician = await staff('Oona Feld', 'clinician', siteId);

  const owner = await clinic.patient('Quillon Ashgrove', siteId);
  const gone = await clinic.patient('Perrin Yelland', siteId);
  const shares = await acceptCaregiver(clinic, owner, 'Sabra Quince');
  const [nothing, adherence, removed] = [
    await acceptCaregiver(clinic, owner, 'Nial Quince'),
    await acceptCaregiver(clinic, owner, 'Adair Quince'),
    await acceptCaregiver(clinic, owner, 'Remy Quince'),
  ];
  const share = (patient: Patient, { caregiverId }: Caregiver, body: { adherence: boolean; diary: boolean }) =>
    clinic.call(patient, changeShares, { params: { caregiverId }, body: { ...body, missedMail: true } });
  await share(owner, nothing, { adherence: false, diary: false });
  await share(owner, shares, { adherence: true, diary: true });
  const elsewhere = await clinic.patient('Elsa Nowell', siteId);

  const withdrawn = await keepRecord(clinic, {
    ...{ siteId, clinician, patient: gone },
    caregiver: await acceptCaregiver(clinic, gone, 'Gale Yelland'),
  });
  // Last of all, so that its next session is today's.
  const record = await keepRecord(clinic, { siteId, clinician, patient: owner, caregiver: shares });
  const params = { participantId: gone.participantId };
  await clinic.call(clinician, withdrawParticipant, { params, body: { reason: 'Moves away' } });
  await closeCaregiver(clinic.client.db, removed.caregiverId, await clinic.now());
  const spare = await readyPatient(clinic, clinician, siteId);

  const people: World['people'] = {
    'participant, self': owner,
    'participant, same site': await clinic.patient('Same Site', siteId),
    'participant, other site': await clinic.patient('Other Site', otherSiteId),
    'participant, withdrawn': gone,
    'caregiver, nothing shared': nothing,
    'caregiver, adherence shared': adherence,
    'caregiver, diary shared': shares,
    'caregiver, not linked': await acceptCaregiver(clinic, elsewhere, 'Una Linked'),
    'caregiver, removed': removed,
    'coordinator, own site': await staff('Cleo Roth', 'coordinator', siteId),
    'coordinator, other site': await staff('Cleo Far', 'coordinator', otherSiteId),
    'clinician, own site': clinician,
    'clinician, other site': await staff('Odd Far', 'clinician', otherSiteId),
    'monitor, own site': await staff('Mo Grey', 'monitor', siteId),
    'monitor, other site': await staff('Mo Far', 'monitor', otherSiteId),
    'administrator, own site': await staff('Ada Hale', 'administrator', siteId),
    'administrator, other site': await staff('Ada Far', 'administrator', otherSiteId),
    'clinician, suspended': await staff('Sue Spended', 'clinician', siteId),
  };
  // One hash for all: it takes a tenth of a second on purpose.
  await clinic.client.pool.query('update auth_credential set password = $1', [await hashSecret(password)]);
  await beat(clinic.client.db, 'test');

  const env = readEnv({
    ...{ DATABASE_URL: clinic.client.pool.options.connectionString ?? '', DEMO: '1', SECRET: secretOfTests },
    ...{ BASE_URL: origin, LOG_LEVEL: 'silent' },
  });
  const house = createHouse(env, parts);
  const server = createServer(house.app);
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  const signedIn = new Map<Who, Promise<Browser>>();

  const browserOfOurs = () => request.agent(server).set('origin', origin);

  async function signIn(email: string): Promise<Browser> {
    const browser = browserOfOurs();
    await browser.post('/api/auth/sign-in/email').send({ email, password }).expect(200);
    return browser;
  }

  async function enter(who: Who): Promise<Browser> {
    if (who === 'anyone') return browserOfOurs();
    const { email, accountId } = people[who];
    const browser = await signIn(email);
    // Behind the house's back, so that the cookie stays: a suspension by the door would end it.
    if (standingOf(who).isSuspended)
      await clinic.client.pool.query(`update account set state = 'suspended' where id = $1`, [accountId]);
    return browser;
  }

  return {
    ...{ clinic, siteId, otherSiteId, people, record, withdrawn, spare },
    caregivers: { shares, adherence },
    recordFor: (who) => (who === 'participant, withdrawn' ? withdrawn : record),
    as(who) {
      const known = signedIn.get(who) ?? enter(who);
      signedIn.set(who, known);
      return known;
    },
    signIn,
    bare: () => request.agent(server),
    async close() {
      server.closeAllConnections();
      await new Promise((resolve) => server.close(resolve));
      await house.close();
      await clinic.close();
    },
  };
}
