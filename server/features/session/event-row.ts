// A session's event as it is kept: hashed by its content, and read back by the contract's own shape.

import { createHash } from 'node:crypto';
import type { EventRow } from '@/db/queries/session';
import { SessionEvent } from '@/shared/contracts/permit';
import type { IncomingEvent } from '@/shared/rules/session-record';
import { latestSecondsOf } from '@/shared/rules/session-summary';
import { canonicalJson } from '@/shared/values/canonical';
import { millisecondsOf } from '@/shared/values/units';

export function contentHashOf(event: SessionEvent): string {
  return createHash('sha256').update(canonicalJson(event)).digest('hex');
}

export function incomingOf(event: SessionEvent): IncomingEvent {
  const { id, sequence } = event;
  const lastSequence = event.kind === 'ended' ? event.lastSequence : undefined;
  return { id, sequence, latestSeconds: latestSecondsOf(event), contentHash: contentHashOf(event), lastSequence };
}

export function rowOf(event: SessionEvent, receivedAt: string): EventRow {
  const { id, sequence, kind } = event;
  const atMs = millisecondsOf(latestSecondsOf(event));
  return { id, sequence, atMs, kind, body: event, contentHash: contentHashOf(event), receivedAt };
}

export function eventsOf(bodies: readonly unknown[]): SessionEvent[] {
  return bodies.map((body) => SessionEvent.parse(body));
}
