// Who may sign next, with which meaning, and when a version takes effect.

import { signing, type SigningFacts } from '@/shared/rules/prescription-signing';

const draft: SigningFacts = {
  isSigned: false,
  isClosed: false,
  amendsId: null,
  inForceId: null,
  isParticipantWithdrawn: false,
  isCourseClosed: false,
  isSameContent: true,
  tier: 'accept',
  signatures: [],
};
const byOona = [{ accountId: 'oona', meaning: 'prescribed' }];

function codeOf(change: Partial<SigningFacts>, asker: string, meaning: 'prescribed' | 'second_signature'): string {
  const answer = signing({ ...draft, ...change }, asker, meaning);
  return answer.allowed ? (answer.takesEffect ? 'takes effect' : 'waits') : answer.code;
}

describe('signing a prescription', () => {
  it('takes effect with one signature when one is enough', () => {
    expect(codeOf({}, 'oona', 'prescribed')).toBe('takes effect');
  });

  it('waits after the first of two signatures, and takes effect with the second', () => {
    expect(codeOf({ tier: 'second_signature' }, 'oona', 'prescribed')).toBe('waits');
    expect(codeOf({ tier: 'second_signature', signatures: byOona }, 'bram', 'second_signature')).toBe('takes effect');
  });

  it('refuses one person in two roles', () => {
    expect(codeOf({ tier: 'second_signature', signatures: byOona }, 'oona', 'second_signature')).toBe(
      'prescription.same_signer',
    );
  });

  it('refuses a second signature where nobody has prescribed', () => {
    expect(codeOf({ tier: 'second_signature' }, 'bram', 'second_signature')).toBe('prescription.not_awaiting');
  });

  it('lets a waiting one be signed when limits were loosened meanwhile', () => {
    expect(codeOf({ tier: 'accept', signatures: byOona }, 'bram', 'second_signature')).toBe('takes effect');
  });

  it('refuses to prescribe twice', () => {
    expect(codeOf({ tier: 'second_signature', signatures: byOona }, 'bram', 'prescribed')).toBe(
      'prescription.already_signed',
    );
    expect(codeOf({ isSigned: true }, 'bram', 'prescribed')).toBe('prescription.already_signed');
  });

  it('refuses what is stale: another content, another version in force, a closed draft, a course that is over', () => {
    expect(codeOf({ isSameContent: false }, 'oona', 'prescribed')).toBe('version.stale');
    expect(codeOf({ amendsId: 'one', inForceId: 'two' }, 'oona', 'prescribed')).toBe('version.stale');
    expect(codeOf({ inForceId: 'two' }, 'oona', 'prescribed')).toBe('version.stale');
    expect(codeOf({ isClosed: true }, 'oona', 'prescribed')).toBe('version.stale');
    expect(codeOf({ isCourseClosed: true }, 'oona', 'prescribed')).toBe('version.stale');
  });

  it('refuses for somebody who has withdrawn', () => {
    expect(codeOf({ isParticipantWithdrawn: true }, 'oona', 'prescribed')).toBe('participant.withdrawn');
  });
});
