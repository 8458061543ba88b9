// What a review may decide, by whom, and what it closes.

import { reviewing, type ReviewFacts } from '@/shared/rules/review';
import { escalatesAgainAt, nextStep } from '@/shared/rules/worklist-next';
import { courseHasEnded } from '@/shared/rules/course-end';

const facts: ReviewFacts = {
  decision: 'lift',
  role: 'clinician',
  isItemClosed: false,
  hasGrading: false,
  lockoutLevel: 'safety',
};

function outcome(change: Partial<ReviewFacts>): string {
  const answer = reviewing({ ...facts, ...change });
  if (!answer.allowed) return answer.code;
  return `${answer.closesItem ? 'row closed' : 'row stays'}, ${answer.closesLockout ? 'lockout lifted' : 'lockout untouched'}`;
}

describe('a review', () => {
  it('by a clinician lifts safety, review and device lockouts', () => {
    for (const lockoutLevel of ['safety', 'review', 'device'] as const)
      expect(outcome({ lockoutLevel })).toBe('row closed, lockout lifted');
  });

  it('by a coordinator lifts a device hold alone', () => {
    expect(outcome({ role: 'coordinator', lockoutLevel: 'device' })).toBe('row closed, lockout lifted');
    expect(outcome({ role: 'coordinator', lockoutLevel: 'safety' })).toBe('review.clinician_decides');
    expect(outcome({ role: 'coordinator', lockoutLevel: 'review' })).toBe('review.clinician_decides');
  });

  it('lifts nothing where nothing is open, or where time alone lifts', () => {
    expect(outcome({ lockoutLevel: null })).toBe('review.nothing_to_lift');
    expect(outcome({ lockoutLevel: 'hold' })).toBe('review.nothing_to_lift');
  });

  it('that keeps leaves row and lockout as they are', () => {
    expect(outcome({ decision: 'keep', role: 'coordinator' })).toBe('row stays, lockout untouched');
  });

  it('closes a row only when its lockout is not open', () => {
    expect(outcome({ decision: 'noted' })).toBe('review.lockout_open');
    expect(outcome({ decision: 'done', lockoutLevel: null })).toBe('row closed, lockout untouched');
  });

  it('is refused on a closed row', () => {
    expect(outcome({ isItemClosed: true })).toBe('worklist.closed');
  });

  it('grades an event only by a clinician', () => {
    expect(outcome({ decision: 'noted', lockoutLevel: null, hasGrading: true, role: 'coordinator' })).toBe(
      'review.clinician_decides',
    );
    expect(outcome({ decision: 'noted', lockoutLevel: null, hasGrading: true })).toBe('row closed, lockout untouched');
  });

  it('is no role’s that the table does not name', () => {
    expect(outcome({ role: 'monitor' })).toBe('review.clinician_decides');
    expect(outcome({ role: 'administrator', lockoutLevel: 'device' })).toBe('review.clinician_decides');
  });
});

describe('the next step of a row', () => {
  const row = { level: 'due', why: '', sessionId: null, lockoutId: null } as const;

  it('is the review for whatever locks out, a device hold too', () => {
    expect(nextStep({ ...row, level: 'device', why: 'lost_contact_twice', lockoutId: 'l' })).toBe('review');
    expect(nextStep({ ...row, level: 'safety', why: 'seizure' })).toBe('review');
  });

  it('is reading and signing for a second signature', () => {
    expect(nextStep({ ...row, why: 'second_signature' })).toBe('sign');
  });

  it('is a call for missed sessions, the equipment for a device, the session for a report', () => {
    expect(nextStep({ ...row, level: 'flag', why: 'missed_three' })).toBe('call');
    expect(nextStep({ ...row, level: 'device', why: 'battery_worn' })).toBe('device');
    expect(nextStep({ ...row, level: 'look', why: 'stopped_early', sessionId: 's' })).toBe('open_session');
    expect(nextStep({ ...row, why: 'something_new' })).toBe('look');
  });
});

describe('a page that is given back', () => {
  it('goes on to the next contact after half an hour, and other rows to nobody', () => {
    expect(escalatesAgainAt('safety', '2026-05-12T16:00:00.000Z')).toBe('2026-05-12T16:30:00Z');
    expect(escalatesAgainAt('review', '2026-05-12T16:00:00.000Z')).toBeNull();
  });
});

describe('a course', () => {
  const course = { sessionsTotal: 20, sessionsDone: 19, sessionsOpen: 0, makesUpMissed: true };

  it('ends with its last session, not before', () => {
    expect(courseHasEnded({ ...course, sessionsDone: 20, sessionsOpen: 1 })).toBe(true);
    expect(courseHasEnded(course)).toBe(false);
  });

  it('that makes up nothing ends when nothing is to come', () => {
    expect(courseHasEnded({ ...course, makesUpMissed: false })).toBe(true);
    expect(courseHasEnded({ ...course, makesUpMissed: false, sessionsOpen: 1 })).toBe(false);
  });
});
