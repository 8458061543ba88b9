// Worked cases of kinds `session`, `adherence`, `delivered` (corner points of a curve) and `scale`.

import { z } from 'zod';
import { plannedSessionStates, scaleNames, sessionEventWords } from '@/shared/values/codes';
import { adherence } from '../adherence';
import { deliveredFrom } from '../delivered';
import { changeOf, scoreScale } from '../scales';
import { sessionStateAt } from '../session';
import { kindOf, present } from './form';

const sessionSchema = z.strictObject({
  permit: z.strictObject({
    intensity_mA: z.number(),
    ramp_up_s: z.number(),
    hold_s: z.number(),
    ramp_down_s: z.number(),
  }),
  events: z.array(z.tuple([z.number(), z.enum(sessionEventWords)])).min(1),
});

/** The state at the last tick. */
export const sessionKind = kindOf(sessionSchema, ({ permit, events }) => {
  const snapshot = sessionStateAt(
    {
      intensityMilliamp: permit.intensity_mA,
      rampUpSeconds: permit.ramp_up_s,
      holdSeconds: permit.hold_s,
      rampDownSeconds: permit.ramp_down_s,
    },
    events,
    Math.max(...events.map(([seconds]) => seconds)),
  );
  return {
    state: snapshot.state,
    current_mA: snapshot.currentMilliamp,
    remaining_hold_s: snapshot.remainingHoldSeconds,
    charge_C: snapshot.chargeCoulomb,
    on_s: snapshot.onSeconds,
    pauses: snapshot.pauses,
    pause_s: snapshot.pauseSeconds,
    end_reason: snapshot.endReason,
    ended_at_s: snapshot.endedAtSeconds,
  };
});

const adherenceSchema = z.strictObject({
  sessions: z.array(
    z.strictObject({
      window_from: z.string(),
      window_to: z.string(),
      state: z.enum(plannedSessionStates),
      ended_at: z.string().optional(),
    }),
  ),
  holds: z.array(z.strictObject({ from: z.string(), until: z.string().optional() })),
  recall_call_at: z.string().optional(),
});

export const adherenceKind = kindOf(adherenceSchema, ({ sessions, holds, recall_call_at }, now) => {
  const facts = {
    sessions: sessions.map((session) => ({
      windowFrom: session.window_from,
      windowTo: session.window_to,
      state: session.state,
      endedAt: session.ended_at,
    })),
    holds,
    recallCallAt: recall_call_at,
  };
  const { counts, planned, fraction, interval, missedRunning, flags } = adherence(facts, now);
  return {
    counts,
    planned,
    fraction,
    interval: interval === null ? null : [interval.low, interval.high],
    missed_running: missedRunning,
    flags,
  };
});

const deliveredSchema = z.strictObject({
  samples: z.array(z.tuple([z.number(), z.number().nullable()])),
  planned_C: z.number(),
});

/** Corner points only: no gap rule. */
export const deliveredKind = kindOf(deliveredSchema, ({ samples, planned_C }) => {
  const plan = { intensityMilliamp: 0, chargeCoulomb: planned_C, maxGapSeconds: null };
  const { chargeCoulomb, fraction } = deliveredFrom(samples, plan);
  return { charge_C: chargeCoulomb, fraction };
});

const scaleSchema = z.union([
  z.strictObject({ scale: z.enum(scaleNames), answers: z.array(z.number().nullable()) }),
  z.strictObject({ scale: z.enum(scaleNames), before: z.number(), after: z.number() }),
]);

export const scaleKind = kindOf(scaleSchema, (given) => {
  if ('before' in given) {
    const change = changeOf(given.scale, given.before, given.after);
    return present({
      points: change.points,
      percent: change.percent,
      important_by_points: change.importantByPoints,
      important_by_percent: change.importantByPercent,
      worse_bound_reached: change.worseBoundReached,
    });
  }
  const score = scoreScale(given.scale, given.answers);
  if ('error' in score) return { error: score.error };
  const { selfHarm, ...rest } = score;
  return present({ ...rest, self_harm: selfHarm });
});
