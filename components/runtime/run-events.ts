// A run's first row, and the stimulator's record as events for the server. Shapes only: it writes and sends nothing.

import type { PermitView } from '@/shared/contracts/permit';
import type { Sample } from '@/shared/rules/delivered';
import type { DeviceEntry, DeviceIdentity, ElectrodeContact } from './device/stimulator';
import type { EventDraft } from './event-log';
import type { RunRow } from './phone-store';

/** Most samples that one event may hold (the contract's bound). */
const samplesAtMost = 600;

export function freshRun(permit: PermitView, site: RunRow['site']): RunRow {
  return {
    permitId: permit.id,
    sessionId: permit.sessionId,
    courseId: permit.courseId,
    deviceId: permit.deviceId,
    sessionNumber: permit.sessionNumber,
    sessionsTotal: permit.sessionsTotal,
    dose: permit.dose,
    site,
    phase: 'starting',
    nextSequence: 0,
    entriesTaken: 0,
    samplesTaken: 0,
    advice: null,
    demoSecondsTold: 0,
  };
}

export function contactEvents(contacts: readonly ElectrodeContact[]): EventDraft[] {
  return contacts.map(({ position, kiloohm, grade }) => ({ kind: 'contact', atSeconds: 0, position, kiloohm, grade }));
}

export function openingEvents(identity: DeviceIdentity, contacts: readonly ElectrodeContact[]): EventDraft[] {
  return [{ kind: 'identified', atSeconds: 0, ...identity }, ...contactEvents(contacts)];
}

function sampleEvents(samples: readonly Sample[], contacts: readonly ElectrodeContact[]): EventDraft[] {
  const readings = samples.flatMap(([seconds, milliamp]): [number, number][] =>
    milliamp === null ? [] : [[seconds, milliamp]],
  );
  const impedance = contacts.flatMap(({ position, kiloohm }): [string, number][] =>
    kiloohm === null ? [] : [[position, kiloohm]],
  );
  const events: EventDraft[] = [];
  for (let from = 0; from < readings.length; from += samplesAtMost) {
    const part = readings.slice(from, from + samplesAtMost);
    events.push({ kind: 'samples', atSeconds: part[0]?.[0] ?? 0, samples: part, impedance });
  }
  return events;
}

/** In the order in which they belong: what happened, what was measured, the end last of all. */
export function entryEvents(
  entries: readonly DeviceEntry[],
  samples: readonly Sample[],
  contacts: readonly ElectrodeContact[],
): EventDraft[] {
  const events = entries.map(({ index: _index, ...body }): EventDraft => body);
  return [
    ...events.filter((event) => event.kind !== 'ended'),
    ...sampleEvents(samples, contacts),
    ...events.filter((event) => event.kind === 'ended'),
  ];
}
