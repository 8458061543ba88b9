// Fills an empty database with the demo: two sites of the invented Harrowmere Health with their protocols and staff, by the real actions.
// Each step is done once, so that a start that was cut short goes on where it stopped.

import { z } from 'zod';
import { findDemoStep, insertDemoStep } from '@/db/queries/house';
import { inviteStaff } from '@/server/features/site/invite-staff';
import { addSite } from '@/server/features/site/add-site';
import { changeProtocol } from '@/server/features/protocol/change-protocol';
import { firstAdministrator } from '@/server/house/first-administrator';
import type { House } from '@/server/house/open-house';
import { act, Anything, personOf, WithId } from '@/server/demo/act';
import { demoPassword } from '@/server/demo/demo-password';
import { accept } from '@/server/demo/invite';
import { playStory } from '@/server/demo/story';
import { storyDays } from '@/server/demo/cast';
import { daySeconds } from '@/server/demo/times';
import { readOffset, setOffset } from '@/db/queries/clock';
import { defaultProtocolSettings } from '@/shared/rules/protocol-defaults';

export const administratorEmail = 'administrator@harrowmere.example';

// Telephone numbers from the ranges that Ofcom keeps for fiction.
const sites = [
  { code: 'LS', name: 'Lantern Street Clinic', kind: 'service', phone: '020 7946 0100' },
  { code: 'MR', name: 'Millrace Research Unit', kind: 'research', phone: '020 7946 0200' },
] as const;

const staff = [
  { email: 'clinician@harrowmere.example', name: 'Dr Maren Oakes', role: 'clinician', site: 'LS' },
  { email: 'second.clinician@harrowmere.example', name: 'Dr Idris Fenn', role: 'clinician', site: 'LS' },
  { email: 'coordinator@harrowmere.example', name: 'Tobin Ashe', role: 'coordinator', site: 'LS' },
  { email: 'monitor@harrowmere.example', name: 'Pell Norwood', role: 'monitor', site: 'LS' },
  { email: 'research.clinician@harrowmere.example', name: 'Dr Sunniva Hale', role: 'clinician', site: 'MR' },
  { email: 'research.coordinator@harrowmere.example', name: 'Odile Brandt', role: 'coordinator', site: 'MR' },
] as const;

/** Does a step unless it was done, and keeps what it made for the steps that follow. */
async function step<T>({ transact }: House, name: string, shape: z.ZodType<T>, work: () => Promise<T>): Promise<T> {
  const known = await findDemoStep(transact.db, name);
  if (known !== null) return shape.parse(known);
  const made = await work();
  await insertDemoStep(transact.db, name, made ?? {});
  return made;
}

async function makeSites(house: House): Promise<Record<string, string>> {
  const ids: Record<string, string> = {};
  for (const { code, name, kind, phone } of sites) {
    const administrator = await personOf(house, administratorEmail);
    const body = { code, name, kind, phone, emergencyNumber: '999', zone: 'Europe/London' };
    ids[code] = (await act(house, addSite, administrator, { body }, WithId)).id;
  }
  return ids;
}

async function signProtocols(house: House, siteIds: Record<string, string>): Promise<void> {
  const administrator = await personOf(house, administratorEmail);
  for (const { code, phone } of sites) {
    const contacts = staff
      .filter((one) => one.site === code && one.role !== 'monitor')
      .map(({ name, email }) => ({ name, email, phone }));
    const settings = defaultProtocolSettings({ contacts, consentRequiredFrom: await house.transact.now() });
    const body = {
      siteId: siteIds[code],
      basedOnVersion: 0,
      settings,
      reason: 'First version',
      password: demoPassword,
    };
    await act(house, changeProtocol, administrator, { body }, Anything);
  }
}

async function inviteEverybody(house: House, siteIds: Record<string, string>): Promise<void> {
  const administrator = await personOf(house, administratorEmail);
  for (const { email, name, role, site } of staff) {
    const body = { email, name, role, siteId: siteIds[site] };
    await act(house, inviteStaff, administrator, { body }, Anything);
    await accept(house, email, name);
  }
}

export async function seedDemo(house: House, say: (line: string) => void): Promise<void> {
  const Ids = z.record(z.string(), z.string());
  // The story begins in the past, so that it ends now. One day more than it is long: staff are there before the first person.
  if ((await findDemoStep(house.transact.db, 'sites')) === null && (await readOffset(house.transact.db)) === 0)
    await setOffset(house.transact.db, -(storyDays + 1) * daySeconds);
  await firstAdministrator(house.transact, administratorEmail, { name: 'Wren Calloway', password: demoPassword });
  const siteIds = await step(house, 'sites', Ids, () => {
    say('Demo: two sites, their protocols and staff');
    return makeSites(house);
  });
  await step(house, 'protocols', Anything, () => signProtocols(house, siteIds));
  await step(house, 'staff', Anything, () => inviteEverybody(house, siteIds));
  await playStory(house, siteIds, say);
}
