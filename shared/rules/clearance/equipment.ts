// Clearance: the last session's record and diary, the stimulator, supplies, other permits, facts from the future.

import { dayMilliseconds } from '@/shared/values/units';
import { isoOf, parseInstant } from '@/shared/values/zone';
import { lastSession, type ClearanceContext } from './context';
import { reason, when, type Reason } from './reason';

/** Common practice; two sessions' worth is about a third of a small cell. */
export const leastBatteryPercent = 30;

export function sessionReasons(context: ClearanceContext): Reason[] {
  // Any open one counts, not only the newest: its dose is not known yet.
  const isOpen = context.sessions?.some((session) => session.isOpen) === true;
  const last = lastSession(context);
  return [
    ...when(isOpen, 'session_open'),
    ...when(last?.state === 'closed' && last.hasDiary === false, 'diary_missing'),
  ];
}

export function deviceReasons({ facts, known }: ClearanceContext): Reason[] {
  const device = known.some('device', facts.device);
  const isAssigned = known.flag('device.assigned', device?.isAssigned);
  // Without a device there is nothing to recall or to charge.
  if (isAssigned === false) return [reason('device_unassigned')];
  const isRecalled = known.flag('device.recalled', device?.isRecalled);
  const value = known.amount('device.battery_pct', device?.batteryPercent);
  const isLow = value !== undefined && value < leastBatteryPercent;
  return [
    ...when(isRecalled === true, 'device_recalled'),
    ...when(isLow, 'battery_low', { value, limit: leastBatteryPercent, unit: '%', layer: 'default' }),
  ];
}

/** One reason a kind of fault, about the first supply that has it. */
export function supplyReasons({ facts, known, now }: ClearanceContext): Reason[] {
  const usedUp: Reason[] = [];
  const expired: Reason[] = [];
  for (const [index, supply] of (known.some('supplies', facts.supplies) ?? []).entries()) {
    const name = `supplies.${index}`;
    const subject = supply.kind;
    const value = known.amount(`${name}.uses`, supply.uses);
    // null: this kind is not counted by uses.
    const most = supply.maxUses === null ? Number.POSITIVE_INFINITY : known.amount(`${name}.max_uses`, supply.maxUses);
    const openedAt = known.instant(`${name}.opened_at`, supply.openedAt);
    const days = known.amount(`${name}.max_days`, supply.maxDays);
    if (value !== undefined && most !== undefined && value >= most) {
      usedUp.push(reason('supply_used_up', { subject, value, limit: most, layer: 'default' }));
    }
    if (openedAt !== undefined && days !== undefined && openedAt + days * dayMilliseconds <= now) {
      const value = (now - openedAt) / dayMilliseconds;
      expired.push(reason('supply_expired', { subject, value, limit: days, unit: 'd', layer: 'default' }));
    }
  }
  return [...usedUp.slice(0, 1), ...expired.slice(0, 1)];
}

export function permitReasons({ facts, known, now }: ClearanceContext): Reason[] {
  let latest: number | undefined;
  for (const [index, permit] of (known.some('live_permits', facts.livePermits) ?? []).entries()) {
    known.instant(`live_permits.${index}.issued_at`, permit.issuedAt);
    const expiresAt = known.instant(`live_permits.${index}.expires_at`, permit.expiresAt);
    if (expiresAt !== undefined && expiresAt > now) latest = Math.max(latest ?? expiresAt, expiresAt);
  }
  return latest === undefined ? [] : [reason('live_permit', { until: isoOf(latest) })];
}

/** Something that has happened cannot lie ahead: then a clock is wrong, and nothing that it says can be used. */
export function clockReasons({ facts, now }: ClearanceContext): Reason[] {
  const happened = [
    facts.precheck?.answeredAt,
    facts.recallCallAt,
    ...(facts.sessions ?? []).flatMap(({ state, startedAt, endedAt }) =>
      state === 'void' ? [] : [startedAt, endedAt],
    ),
    ...(facts.supplies ?? []).map(({ openedAt }) => openedAt),
    ...(facts.livePermits ?? []).map(({ issuedAt }) => issuedAt),
  ];
  const isAhead = happened.some((iso) => (parseInstant(iso) ?? now) > now);
  return when(isAhead, 'clock_bad');
}
