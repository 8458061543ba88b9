// The register of stimulators and supplies.

import { z } from 'zod';
import { Instant, Line, LocalDate, Uuid, pageOf, pageQuery } from '@/shared/values/primitives';
import { contract } from './contract';

export const deviceStates = ['stock', 'out', 'quarantined', 'recalled', 'lost', 'retired'] as const;

export const DeviceView = z.strictObject({
  id: Uuid,
  siteId: Uuid,
  label: z.string(),
  model: z.string(),
  serial: z.string(),
  firmware: z.string(),
  calibrationDueOn: LocalDate,
  state: z.enum(deviceStates),
  stateSince: Instant,
  stateReason: z.string().nullable(),
  assignedTo: z.strictObject({ participantId: Uuid, code: z.string(), name: z.string(), since: Instant }).nullable(),
  lastCounter: z.number().int(),
});
export type DeviceView = z.infer<typeof DeviceView>;

export const listDevices = contract({
  name: 'device.list',
  method: 'GET',
  path: '/api/devices',
  who: ['coordinator', 'clinician', 'monitor', 'administrator'],
  reach: 'site',
  query: z.strictObject({ ...pageQuery, state: z.enum(deviceStates).optional() }),
  answer: pageOf(DeviceView),
  about: 'Stimulators of own sites.',
});

export const addDevice = contract({
  name: 'device.add',
  method: 'POST',
  path: '/api/devices',
  who: ['coordinator', 'clinician', 'administrator'],
  reach: 'site',
  once: true,
  body: z.strictObject({
    siteId: Uuid,
    label: Line,
    model: Line,
    serial: Line,
    firmware: Line,
    calibrationDueOn: LocalDate,
  }),
  answer: DeviceView,
  status: 201,
  refusals: ['device.serial_taken'],
  touches: ['device'],
  about: 'Registers a stimulator.',
  example: {
    body: {
      siteId: '7d2a9e4c-3b5f-4d6e-8a1c-0f9e8d7c6b5a',
      label: 'LS-07',
      model: 'Simulated stimulator',
      serial: 'SIM-0007',
      firmware: '1.0',
      calibrationDueOn: '2027-05-01',
    },
  },
});

export const assignDevice = contract({
  name: 'device.assign',
  method: 'POST',
  path: '/api/devices/:deviceId/assignment',
  who: ['coordinator', 'clinician'],
  reach: 'site',
  once: true,
  params: z.strictObject({ deviceId: Uuid }),
  body: z.strictObject({ participantId: Uuid, reason: Line.optional() }),
  answer: DeviceView,
  refusals: ['device.not_in_stock', 'device.person_has_one', 'device.other_site', 'participant.withdrawn'],
  touches: ['device', 'participant', 'clearance'],
  about: 'Hands a stimulator to one person.',
  example: { body: { participantId: '7d2a9e4c-3b5f-4d6e-8a1c-0f9e8d7c6b5a' } },
});

export const changeDeviceState = contract({
  name: 'device.change-state',
  method: 'POST',
  path: '/api/devices/:deviceId/state',
  who: ['coordinator', 'clinician', 'administrator'],
  reach: 'site',
  once: true,
  params: z.strictObject({ deviceId: Uuid }),
  body: z.strictObject({ state: z.enum(['stock', 'quarantined', 'recalled', 'lost', 'retired']), reason: Line }),
  answer: DeviceView,
  refusals: ['device.state_not_reachable', 'version.stale'],
  touches: ['device', 'participant', 'clearance', 'permit'],
  about: 'Takes a stimulator back, quarantines or recalls it. A live permit on it is void at once.',
  example: { body: { state: 'quarantined', reason: 'Cable frayed' } },
});

export const SupplyView = z.strictObject({
  id: Uuid,
  kind: z.enum(['sponge', 'saline', 'insert']),
  lot: z.string(),
  openedOn: LocalDate,
  uses: z.number().int(),
  maxUses: z.number().int().nullable(),
  maxDays: z.number().int(),
  endedAt: Instant.nullable(),
});

export const listSupplies = contract({
  name: 'supply.list',
  method: 'GET',
  path: '/api/participants/:participantId/supplies',
  who: ['coordinator', 'clinician', 'monitor'],
  reach: 'site',
  params: z.strictObject({ participantId: Uuid }),
  query: z.strictObject(pageQuery),
  answer: pageOf(SupplyView),
  about: 'Supplies that a person was given.',
});

export const giveSupply = contract({
  name: 'supply.give',
  method: 'POST',
  path: '/api/participants/:participantId/supplies',
  who: ['coordinator', 'clinician'],
  reach: 'site',
  once: true,
  params: z.strictObject({ participantId: Uuid }),
  body: z.strictObject({ kind: z.enum(['sponge', 'saline', 'insert']), lot: Line, openedOn: LocalDate }),
  answer: SupplyView,
  status: 201,
  refusals: ['supply.opened_in_future', 'participant.withdrawn'],
  touches: ['supply', 'participant', 'clearance'],
  about: 'Gives supplies of one lot; the earlier ones of that kind end. Uses and days are the site’s defaults.',
  example: { body: { kind: 'sponge', lot: 'SP-2605', openedOn: '2026-05-11' } },
});
