// Which state of a stimulator may follow which, and what a change takes with it. The states are words of the register (guidance R55);
// the arrows between them are own choices. Reads and writes nothing.

export const deviceStateWords = ['stock', 'out', 'quarantined', 'recalled', 'lost', 'retired'] as const;
export type DeviceState = (typeof deviceStateWords)[number];

const next: Readonly<Record<DeviceState, readonly DeviceState[]>> = {
  stock: ['out', 'quarantined', 'recalled', 'lost', 'retired'],
  out: ['stock', 'quarantined', 'recalled', 'lost'],
  quarantined: ['stock', 'recalled', 'lost', 'retired'],
  // What was recalled or lost is checked before anybody wears it again.
  recalled: ['quarantined', 'lost', 'retired'],
  lost: ['quarantined', 'retired'],
  retired: [],
};

/** `out` is reached by handing the device to a person, never by a change of state alone. */
export function deviceStateReachable(from: DeviceState, to: DeviceState): boolean {
  return next[from].includes(to);
}

/** Only a device in stock is handed out. */
export function mayAssign(state: DeviceState): boolean {
  return deviceStateReachable(state, 'out');
}

/**
 * True when the person no longer has it. A quarantined or recalled device is still at the person's home until somebody takes it back, so the
 * register goes on saying who has it; clearance refuses by its state.
 */
export function endsAssignment(to: DeviceState): boolean {
  return to === 'stock' || to === 'lost' || to === 'retired';
}

/** Only a device that is out may run: a live permit on it ends with any other state. */
export function voidsPermit(to: DeviceState): boolean {
  return to !== 'out';
}
