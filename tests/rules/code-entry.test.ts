import { codeEntryBounds, enterCode, freshEntry, type CodeEntry } from '@/shared/rules/code-entry';
import { counterOfCode, hotpCode } from '@/shared/rules/hotp';

const { digits, window, mostWrong } = codeEntryBounds;
/** The secret of RFC 4226, Appendix D. */
const secret = new TextEncoder().encode('12345678901234567890');
const codeOf = (counter: number) => hotpCode(secret, counter, digits);
const afterWrong = (entry: CodeEntry, now: number) => enterCode(secret, '00000000', entry, now);

it('takes the next code once, and never again', () => {
  const first = enterCode(secret, codeOf(5), freshEntry(5), 0);
  expect(first).toEqual({ accepted: true, counter: 5, entry: freshEntry(6) });
  expect(enterCode(secret, codeOf(5), first.entry, 0)).toMatchObject({ accepted: false, why: 'code_wrong' });
});

it('takes it with a space in it, and no other length', () => {
  expect(enterCode(secret, `${codeOf(5).slice(0, 4)} ${codeOf(5).slice(4)}`, freshEntry(5), 0).accepted).toBe(true);
  expect(enterCode(secret, codeOf(5).slice(2), freshEntry(5), 0).accepted).toBe(false);
  expect(enterCode(secret, `${codeOf(5)}0`, freshEntry(5), 0).accepted).toBe(false);
  expect(enterCode(secret, '', freshEntry(5), 0).accepted).toBe(false);
});

it('looks ahead over codes that were given and not typed, and those are over then', () => {
  const last = enterCode(secret, codeOf(5 + window - 1), freshEntry(5), 0);
  expect(last).toMatchObject({ accepted: true, counter: 5 + window - 1 });
  expect(enterCode(secret, codeOf(5), last.entry, 0).accepted).toBe(false);
  expect(enterCode(secret, codeOf(5 + window), freshEntry(5), 0).accepted).toBe(false);
  expect(enterCode(secret, codeOf(4), freshEntry(5), 0).accepted).toBe(false);
});

it('makes a guesser wait longer after each wrong code, and takes the right one only after the wait', () => {
  const one = afterWrong(freshEntry(5), 100);
  expect(one).toMatchObject({ why: 'code_wrong', waitSeconds: 5 });
  expect(enterCode(secret, codeOf(5), one.entry, 104.9)).toMatchObject({ why: 'code_wait', entry: one.entry });
  const two = afterWrong(one.entry, 105);
  expect(two).toMatchObject({ why: 'code_wrong', waitSeconds: 10 });
  expect(enterCode(secret, codeOf(5), two.entry, 115)).toMatchObject({ accepted: true });
  expect(enterCode(secret, codeOf(5), two.entry, Number.NaN)).toMatchObject({ why: 'code_wait' });
});

it('takes no code any more after so many wrong ones in a row, however long somebody waits', () => {
  let entry = freshEntry(5);
  for (let time = 1; time <= mostWrong; time += 1) {
    const answer = afterWrong(entry, time * 1000);
    expect(answer).toMatchObject({ accepted: false, why: time < mostWrong ? 'code_wrong' : 'code_locked' });
    entry = answer.entry;
  }
  expect(enterCode(secret, codeOf(5), entry, 1_000_000)).toMatchObject({ why: 'code_locked', entry });
});

it('forgets wrong codes after a right one', () => {
  const wrong = afterWrong(freshEntry(5), 0);
  expect(enterCode(secret, codeOf(5), wrong.entry, 5).entry).toEqual(freshEntry(6));
});

it('names no counter for a code outside the window', () => {
  const look = { firstCounter: 0, window: 3, digits: 6 };
  expect(counterOfCode(secret, '359152', look)).toBe(2);
  expect(counterOfCode(secret, '969429', look)).toBeNull();
});
