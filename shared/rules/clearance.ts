// "May a session start now?" Pure: facts and the server's clock in, every reason out, in a fixed order. The server
// decides with it inside the transaction that acts; a client may call it only to explain.

import type { LimitLayer, ReasonCode, Resolver } from '@/shared/values/codes';
import type { ClearanceFacts } from './clearance/facts';

export type Reason = {
  readonly code: ReasonCode;
  /** When this reason alone passes by itself, ISO UTC. */
  readonly until?: string;
  /** Of `unknown_fact`: what is missing, in the stable dotted names. */
  readonly fact?: string;
  readonly resolvedBy: Resolver;
  /** What it is about: the code of the lockout, the kind of supply, the cause of a pre-check hold. */
  readonly subject?: string;
  readonly layer?: LimitLayer;
  readonly value?: number;
  readonly limit?: number;
  readonly unit?: string;
  readonly source?: string;
};
export type ClearanceAnswer =
  | { readonly allowed: true; readonly reasons: readonly [] }
  | { readonly allowed: false; readonly reasons: readonly Reason[] };
export type PlannedCounts = {
  readonly sessionsToday?: number;
  readonly sessionsLast7Days?: number;
  readonly sessionsDone?: number;
  readonly sessionsTotal?: number;
  readonly charge24hCoulomb?: number;
  readonly charge7dCoulomb?: number;
  readonly minutes24h?: number;
};

export declare function clearance(facts: ClearanceFacts, now: string): ClearanceAnswer;
/** The latest `until` of the reasons, ISO UTC; null if none has one. Ask again then. */
export declare function earliestStart(reasons: readonly Reason[]): string | null;
/** Codes that go away in the course of starting: the pre-check and what the phone asks the device. */
export declare const startStepCodes: readonly ReasonCode[];
/** True when time alone, and a fresh pre-check, clear all of them. */
export declare function passesByTime(reasons: readonly Reason[]): boolean;
export declare function plannedCounts(facts: ClearanceFacts, now: string): PlannedCounts;
