import { keyInUse, trustedKeys } from '@/shared/rules/permit-keys';

const first = { kid: 'first', createdAt: '2026-05-12T10:00:00.000Z', closedAt: null };
const second = { kid: 'second', createdAt: '2026-05-12T12:00:00.000Z', closedAt: null };
const third = { kid: 'third', createdAt: '2026-05-12T12:10:00.000Z', closedAt: null };
const withdrawn = '2026-05-12T12:05:00.000Z';
const kids = (now: string, ...keys: Parameters<typeof trustedKeys>[0][number][]) =>
  trustedKeys(keys, now).map(({ kid }) => kid);

it('signs with the newest key that was not withdrawn', () => {
  expect(keyInUse([first, second])).toBe(second);
  expect(keyInUse([first, { ...second, closedAt: withdrawn }])).toBe(first);
  expect(keyInUse([{ ...first, closedAt: withdrawn }])).toBeUndefined();
  expect(keyInUse([])).toBeUndefined();
});

it('trusts a key that was followed until the last permit under it is over, and not at that instant', () => {
  expect(kids('2026-05-12T12:29:59.999Z', first, second)).toEqual(['first', 'second']);
  expect(kids('2026-05-12T12:30:00.000Z', first, second)).toEqual(['second']);
  expect(kids('2026-05-12T12:20:00.000Z', first, second, third)).toEqual(['first', 'second', 'third']);
  expect(kids('2026-05-12T12:35:00.000Z', first, second, third)).toEqual(['second', 'third']);
});

it('trusts no withdrawn key, and no older one at a time that it cannot read', () => {
  expect(kids('2026-05-12T12:10:00.000Z', { ...first, closedAt: withdrawn }, second)).toEqual(['second']);
  expect(kids('soon', first, second)).toEqual(['second']);
});
