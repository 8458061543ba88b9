// Whether a permit may be given now, and what it would be bound to. Asks the rules; writes nothing. Whatever is missing refuses.

import type { ClearanceRecord } from '@/db/queries/clearance';
import { refuse, type Refusal } from '@/server/action';
import type { BodyOf } from '@/shared/contracts/contract';
import type { issuePermit } from '@/shared/contracts/permit';
import { clearance } from '@/shared/rules/clearance';
import { gatherFacts } from '@/shared/rules/clearance/gather';
import { plannedNow, withDeviceAtHand, withPlan } from '@/shared/rules/clearance/planned';
import { reason } from '@/shared/rules/clearance/reason';
import { permitExpiry } from '@/shared/rules/permit';
import { permitsPerHour } from '@/shared/rules/permit-rate';
import type { PermitExpiryCause } from '@/shared/values/codes';

type Person = ClearanceRecord['person'];

export interface Granted {
  refused: false;
  prescription: NonNullable<Person['prescription']>;
  precheckId: string;
  plannedSessionId: string;
  expiresAt: string;
  expiresBy: PermitExpiryCause;
}

export function decidePermit(
  gathered: ClearanceRecord,
  body: BodyOf<typeof issuePermit>,
  issuedInLastHour: number,
  now: string,
): Granted | Refusal {
  const { person, planned } = gathered;
  const { prescription, precheck } = person;
  const { id: participantId, siteId } = person.participant;
  const facts = withDeviceAtHand(gatherFacts(gathered, now, body.batteryPercent), person.deviceId === body.deviceId);
  const answer = withPlan(clearance(facts, now), planned, now);
  if (!answer.allowed) return refuse('clearance.refused', { reasons: answer.reasons, participantId, siteId });
  if (!permitsPerHour.allows(issuedInLastHour)) return refuse('permit.too_many', { participantId, siteId });

  const expiry = permitExpiry(
    {
      precheckAnsweredAt: precheck?.answeredAt,
      zone: person.participant.zone,
      hoursFrom: prescription?.hoursFrom,
      hoursTo: prescription?.hoursTo,
      prescriptionExpiresAt: prescription?.expiresAt,
    },
    now,
  );
  const plannedSession = plannedNow(planned, now);
  if (!expiry.known || !prescription || !precheck || !plannedSession) {
    const missing = expiry.known ? ['prescription'] : expiry.facts;
    const reasons = missing.map((fact) => reason('unknown_fact', { fact }));
    return refuse('clearance.refused', { reasons, participantId, siteId });
  }
  const { expiresAt, expiresBy } = expiry;
  return {
    ...{ refused: false, prescription, expiresAt, expiresBy },
    precheckId: precheck.id,
    plannedSessionId: plannedSession.id,
  };
}
