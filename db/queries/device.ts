// The register of stimulators: devices, their history of states, who has which. The newest row of the history is the state; which state may
// follow which is asked of shared/rules/device-state.ts.

import { and, asc, desc, eq, inArray, isNull, sql, type SQL } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { device, deviceAssignment, deviceState } from '@/db/schema/device';
import { participant } from '@/db/schema/participant';
import { permit } from '@/db/schema/session';

export type DeviceStateWord = typeof deviceState.$inferSelect.state;

export interface DeviceRecord {
  id: string;
  siteId: string;
  label: string;
  model: string;
  serial: string;
  firmware: string;
  calibrationDueOn: string;
  state: DeviceStateWord;
  stateSince: string;
  stateReason: string | null;
  lastCounter: number;
  assignedTo: { participantId: string; code: string; name: string; since: string } | null;
}

function selectDevices(db: Db) {
  return db
    .select({
      id: device.id,
      siteId: device.siteId,
      label: device.label,
      model: device.model,
      serial: device.serial,
      firmware: device.firmware,
      calibrationDueOn: device.calibrationDueOn,
      lastCounter: device.lastCounter,
      state: deviceState.state,
      stateSince: deviceState.createdAt,
      stateReason: deviceState.reason,
      participantId: participant.id,
      code: participant.code,
      name: participant.name,
      assignedSince: deviceAssignment.createdAt,
    })
    .from(device)
    .innerJoin(
      deviceState,
      eq(
        deviceState.id,
        sql`(select newest.id from ${deviceState} newest where newest.device_id = ${device.id} order by newest.number desc limit 1)`,
      ),
    )
    .leftJoin(deviceAssignment, and(eq(deviceAssignment.deviceId, device.id), isNull(deviceAssignment.closedAt)))
    .leftJoin(participant, eq(participant.id, deviceAssignment.participantId));
}

type DeviceRow = Awaited<ReturnType<typeof selectDevices>>[number];

function deviceOf({ participantId, code, name, assignedSince, ...own }: DeviceRow): DeviceRecord {
  const isOut = participantId !== null && code !== null && name !== null && assignedSince !== null;
  return { ...own, assignedTo: isOut ? { participantId, code, name, since: assignedSince } : null };
}

/** Devices of these sites by label. */
export async function listDevices(
  db: Db,
  siteIds: readonly string[],
  page: { state: DeviceStateWord | undefined; limit: number; after: { label: string; id: string } | null },
): Promise<DeviceRecord[]> {
  if (siteIds.length === 0) return [];
  const conditions: (SQL | undefined)[] = [inArray(device.siteId, [...siteIds])];
  if (page.state) conditions.push(eq(deviceState.state, page.state));
  if (page.after) conditions.push(sql`(${device.label}, ${device.id}) > (${page.after.label}, ${page.after.id}::uuid)`);
  const rows = await selectDevices(db)
    .where(and(...conditions))
    .orderBy(asc(device.label), asc(device.id))
    .limit(page.limit);
  return rows.map(deviceOf);
}

/** One device of these sites; null if it is elsewhere or nowhere. */
export async function findDevice(db: Db, siteIds: readonly string[], deviceId: string): Promise<DeviceRecord | null> {
  if (siteIds.length === 0) return null;
  const [row] = await selectDevices(db).where(and(eq(device.id, deviceId), inArray(device.siteId, [...siteIds])));
  return row ? deviceOf(row) : null;
}

/** The same, held until the transaction ends: its state and who has it stay as they are. */
export async function lockDevice(db: Db, siteIds: readonly string[], deviceId: string): Promise<DeviceRecord | null> {
  await db.select({ id: device.id }).from(device).where(eq(device.id, deviceId)).for('update');
  return findDevice(db, siteIds, deviceId);
}

/** The device that a person has; null without one. */
export async function loadDeviceFor(db: Db, participantId: string): Promise<DeviceRecord | null> {
  const [row] = await selectDevices(db).where(eq(deviceAssignment.participantId, participantId));
  return row ? deviceOf(row) : null;
}

export interface NewDevice {
  id: string;
  siteId: string;
  label: string;
  model: string;
  serial: string;
  firmware: string;
  calibrationDueOn: string;
  createdAt: string;
}

/** False when the serial number is another device's. */
export async function insertDevice(db: Db, row: NewDevice): Promise<boolean> {
  const made = await db
    .insert(device)
    .values(row)
    .onConflictDoNothing({ target: device.serial })
    .returning({ id: device.id });
  return made.length > 0;
}

/** The next row of a device's history. The caller holds the device's lock, so the numbers follow each other. */
export async function insertDeviceState(
  db: Db,
  row: {
    id: string;
    deviceId: string;
    state: DeviceStateWord;
    reason: string | null;
    /** Account, or the job that acted. */
    by: string;
    createdAt: string;
  },
): Promise<void> {
  const [last] = await db
    .select({ number: deviceState.number })
    .from(deviceState)
    .where(eq(deviceState.deviceId, row.deviceId))
    .orderBy(desc(deviceState.number))
    .limit(1);
  await db.insert(deviceState).values({ ...row, number: (last?.number ?? 0) + 1 });
}

/** False when the device or the person has an open assignment already. */
export async function insertAssignment(
  db: Db,
  row: { id: string; deviceId: string; participantId: string; by: string; createdAt: string },
): Promise<boolean> {
  const made = await db
    .insert(deviceAssignment)
    .values(row)
    .onConflictDoNothing()
    .returning({ id: deviceAssignment.id });
  return made.length > 0;
}

export async function closeAssignment(db: Db, deviceId: string, at: string, why: string): Promise<void> {
  await db
    .update(deviceAssignment)
    .set({ closedAt: at, closedWhy: why })
    .where(and(eq(deviceAssignment.deviceId, deviceId), isNull(deviceAssignment.closedAt)));
}

/** Whose live permit stands on a device; null without one. */
export async function findPersonWithPermitOn(db: Db, deviceId: string): Promise<string | null> {
  const [row] = await db
    .select({ participantId: permit.participantId })
    .from(permit)
    .where(and(eq(permit.deviceId, deviceId), isNull(permit.closedAt)))
    .limit(1);
  return row?.participantId ?? null;
}
