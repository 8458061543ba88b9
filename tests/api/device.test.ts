// The register: stimulators and supplies, who has which, and what a recall does.

import { z } from 'zod';
import type { AccountActor } from '@/server/action';
import { addDevice } from '@/server/features/device/add-device';
import { assignDevice } from '@/server/features/device/assign-device';
import { changeDeviceState } from '@/server/features/device/change-device-state';
import { listDevices } from '@/server/features/device/list-devices';
import { readOwnDevice } from '@/server/features/device/read-own-device';
import { withdrawParticipant } from '@/server/features/participant/withdraw-participant';
import { giveSupply } from '@/server/features/supply/give-supply';
import { listSupplies } from '@/server/features/supply/list-supplies';
import { localDate } from '@/shared/values/zone';
import { pastTheGuards } from '../support/postgres';
import { openClinic, type Clinic, type Patient } from '../support/clinic';
import { inForce } from '../support/prescribing';
import { newDevice } from '../support/records';
import { beginSession, givePermit } from '../support/sessions';

let clinic: Clinic;
let siteId: string;
let otherSiteId: string;
let clinician: AccountActor;
let coordinator: AccountActor;
let stranger: AccountActor;

beforeAll(async () => {
  clinic = await openClinic();
  siteId = await clinic.site('LS');
  otherSiteId = await clinic.site('MR');
  clinician = await clinic.staff('Cora Clinician', 'clinician', siteId);
  coordinator = await clinic.staff('Cleo Coordinator', 'coordinator', siteId);
  stranger = await clinic.staff('Otto Other', 'clinician', otherSiteId);
});
afterAll(() => clinic.close());

const change = (deviceId: string, state: 'stock' | 'quarantined' | 'recalled' | 'lost' | 'retired') => ({
  params: { deviceId },
  body: { state, reason: 'As the maker says' },
});
const hand = (deviceId: string, patient: Patient) => ({
  params: { deviceId },
  body: { participantId: patient.participantId },
});

describe('a stimulator', () => {
  it('begins in stock, under a serial number of its own', async () => {
    const device = await newDevice(clinic, coordinator, siteId, 'LS-01');
    expect(device).toMatchObject({ state: 'stock', assignedTo: null, lastCounter: 0, stateReason: null });
    const { label, model, serial, firmware, calibrationDueOn } = device;
    const body = { siteId, label, model, serial, firmware, calibrationDueOn };
    expect((await clinic.refused(coordinator, addDevice, { body })).code).toBe('device.serial_taken');
    expect((await clinic.refused(stranger, addDevice, { body })).status).toBe(404);
  });

  it('goes to one person, and one person has one', async () => {
    const [one, two] = [await newDevice(clinic, coordinator, siteId), await newDevice(clinic, coordinator, siteId)];
    const [ines, wanda] = [await clinic.patient('Ines Marlow', siteId), await clinic.patient('Wanda Weaver', siteId)];
    const handed = await clinic.call(coordinator, assignDevice, { ...hand(one.id, ines), key: 'assign-one-key' });
    expect(handed).toMatchObject({ state: 'out', assignedTo: { name: 'Ines Marlow', code: ines.code } });
    expect(await clinic.call(coordinator, assignDevice, { ...hand(one.id, ines), key: 'assign-one-key' })).toEqual(
      handed,
    );
    expect((await clinic.refused(coordinator, assignDevice, hand(one.id, wanda))).code).toBe('device.not_in_stock');
    expect((await clinic.refused(coordinator, assignDevice, hand(two.id, ines))).code).toBe('device.person_has_one');
    expect(await clinic.call(ines, readOwnDevice, {})).toMatchObject({ id: one.id, recalled: false });
    expect(await clinic.call(wanda, readOwnDevice, {})).toBeNull();
  });

  it('goes to one of two who are handed it at once', async () => {
    const device = await newDevice(clinic, coordinator, siteId);
    const people = [await clinic.patient('A A', siteId), await clinic.patient('B B', siteId)];
    const both = await Promise.allSettled(
      people.map((each) => clinic.call(coordinator, assignDevice, hand(device.id, each))),
    );
    expect(both.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected']);
  });

  it('goes to nobody who withdrew, and stays at its site', async () => {
    const device = await newDevice(clinic, coordinator, siteId);
    const gone = await clinic.patient('Gil Gone', siteId);
    await clinic.call(coordinator, withdrawParticipant, {
      params: { participantId: gone.participantId },
      body: { reason: 'Moves' },
    });
    expect((await clinic.refused(coordinator, assignDevice, hand(device.id, gone))).code).toBe('participant.withdrawn');
    const both = { ...coordinator, siteIds: [siteId, otherSiteId] };
    const elsewhere = await clinic.patient('El Sewhere', otherSiteId);
    expect((await clinic.refused(both, assignDevice, hand(device.id, elsewhere))).code).toBe('device.other_site');
    expect((await clinic.refused(coordinator, assignDevice, hand(device.id, elsewhere))).status).toBe(404);
    expect((await clinic.refused(stranger, assignDevice, hand(device.id, elsewhere))).status).toBe(404);
  });

  it('that is recalled voids a live permit and stays with the person; back in stock it is free', async () => {
    const device = await newDevice(clinic, coordinator, siteId);
    const patient = await clinic.patient('Rex Recall', siteId);
    await clinic.call(coordinator, assignDevice, hand(device.id, patient));
    await inForce(clinic, clinician, patient);
    const { permitId } = await givePermit(clinic, patient);
    await pastTheGuards(clinic.client, async (client) => {
      await client.query('set session_replication_role = replica');
      await client.query('update permit set device_id = $1 where id = $2', [device.id, permitId]);
    });
    const recalled = await clinic.call(coordinator, changeDeviceState, change(device.id, 'recalled'));
    expect(recalled).toMatchObject({
      state: 'recalled',
      stateReason: 'As the maker says',
      assignedTo: { code: patient.code },
    });
    const permits = await clinic.rows({ closed_why: z.string() }, 'select closed_why from permit where id = $1', [
      permitId,
    ]);
    expect(permits).toEqual([{ closed_why: 'void_device' }]);
    expect(await clinic.call(patient, readOwnDevice, {})).toMatchObject({ recalled: true });
    expect((await clinic.refused(coordinator, changeDeviceState, change(device.id, 'stock'))).code).toBe(
      'device.state_not_reachable',
    );
    await clinic.call(coordinator, changeDeviceState, change(device.id, 'quarantined'));
    const back = await clinic.call(coordinator, changeDeviceState, change(device.id, 'stock'));
    expect(back).toMatchObject({ state: 'stock', assignedTo: null });
    expect((await clinic.refused(stranger, changeDeviceState, change(device.id, 'lost'))).status).toBe(404);
  });

  it('that comes back after a withdrawal closes what waited for it', async () => {
    const device = await newDevice(clinic, coordinator, siteId);
    const patient = await clinic.patient('Wil Withdraw', siteId);
    await clinic.call(coordinator, assignDevice, hand(device.id, patient));
    const params = { participantId: patient.participantId };
    await clinic.call(coordinator, withdrawParticipant, { params, body: { reason: 'Moves away' } });
    await clinic.call(coordinator, changeDeviceState, change(device.id, 'stock'));
    const items = await clinic.rows(
      { closed_why: z.string().nullable() },
      `select closed_why from worklist_item where participant_id = $1 and why = 'device_return'`,
      [patient.participantId],
    );
    expect(items).toEqual([{ closed_why: 'stock' }]);
  });

  it('is listed by label, a page at a time, by state; a code stands for the name where names are not known', async () => {
    const manySiteId = await clinic.site('MA');
    const keeper = await clinic.staff('Kim Keeper', 'coordinator', manySiteId);
    for (const label of ['D3', 'D1', 'D2', 'D2']) await newDevice(clinic, keeper, manySiteId, label);
    const first = await clinic.call(keeper, listDevices, { query: { limit: 3 } });
    const second = await clinic.call(keeper, listDevices, { query: { limit: 3, cursor: first.nextCursor ?? '' } });
    expect([...first.items, ...second.items].map(({ label }) => label)).toEqual(['D1', 'D2', 'D2', 'D3']);
    expect(second.nextCursor).toBeNull();
    const patient = await clinic.patient('Nora Named', manySiteId);
    await clinic.call(keeper, assignDevice, hand(first.items[0]?.id ?? '', patient));
    const admin = await clinic.staff('Ada Admin', 'administrator', manySiteId);
    const out = await clinic.call(admin, listDevices, { query: { state: 'out' } });
    expect(out.items.map(({ assignedTo }) => assignedTo?.name)).toEqual([patient.code]);
    expect((await clinic.call(stranger, listDevices, { query: { state: 'out' } })).items).toEqual([]);
  });
});

describe('supplies', () => {
  it('of one kind follow each other, each with the sessions that it served', async () => {
    const patient = await clinic.patient('Sue Supply', siteId);
    const params = { participantId: patient.participantId };
    const openedOn = localDate(Date.parse(await clinic.now()), 'Europe/London');
    const give = (lot: string, kind: 'sponge' | 'saline' = 'sponge') =>
      clinic.call(coordinator, giveSupply, { params, body: { kind, lot, openedOn } });
    const first = await give('A1');
    expect(first).toMatchObject({ uses: 0, maxUses: 10, maxDays: 14, openedOn, endedAt: null });
    await inForce(clinic, clinician, patient);
    await beginSession(clinic, patient);
    await clinic.advance(60);
    await give('A2');
    await give('S1', 'saline');
    const { items } = await clinic.call(clinician, listSupplies, { params });
    expect(items.map(({ lot, uses, endedAt }) => [lot, uses, endedAt === null])).toEqual([
      ['S1', 1, true],
      ['A2', 1, true],
      ['A1', 1, false],
    ]);
    const page = await clinic.call(clinician, listSupplies, { params, query: { limit: 2 } });
    const rest = await clinic.call(clinician, listSupplies, {
      params,
      query: { limit: 2, cursor: page.nextCursor ?? '' },
    });
    expect([...page.items, ...rest.items]).toEqual(items);
  });

  it('are not opened tomorrow, and not given at another site', async () => {
    const patient = await clinic.patient('Tom Orrow', siteId);
    const params = { participantId: patient.participantId };
    const body = { kind: 'sponge' as const, lot: 'A1', openedOn: '2999-01-01' };
    expect((await clinic.refused(coordinator, giveSupply, { params, body })).code).toBe('supply.opened_in_future');
    expect((await clinic.refused(stranger, giveSupply, { params, body })).status).toBe(404);
    expect((await clinic.refused(stranger, listSupplies, { params })).status).toBe(404);
    await clinic.call(coordinator, withdrawParticipant, { params, body: { reason: 'Moves away' } });
    const late = { ...body, openedOn: '2026-01-02' };
    expect((await clinic.refused(coordinator, giveSupply, { params, body: late })).code).toBe('participant.withdrawn');
  });
});
