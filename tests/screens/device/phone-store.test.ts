// What a phone keeps lies sealed: nobody who opens the browser's storage reads what was felt or given, and the key stays in.
// Must not: repeat what the session run's tests show of sending and forgetting.
import 'fake-indexeddb/auto';
import { openDB } from 'idb';
import { keepMe } from '@/components/runtime/kept-me';
import { phoneStore, type RunRow } from '@/components/runtime/phone-store';
import { openVault } from '@/components/runtime/vault';
import type { SessionEvent } from '@/shared/contracts/permit';
import { freshRun } from '@/components/runtime/run-events';
import { permitView, site } from '../../support/device/run';
import { signer } from '../../support/device/permits';

const felt: SessionEvent = {
  id: 'b4a1f0a2-6f0f-4a68-9a0b-3a3a2a8f7c11',
  sequence: 0,
  kind: 'sensation',
  atSeconds: 12,
  sensation: 'tingling',
  strength: 3,
};

const aRun = async (): Promise<RunRow> => freshRun(await permitView(await signer()), site);

/** Every byte of every database of this origin, as text. */
async function everythingKept(): Promise<string> {
  const texts: string[] = [];
  const textOf = (value: unknown): string => {
    if (value instanceof ArrayBuffer || Object.prototype.toString.call(value) === '[object ArrayBuffer]')
      return Buffer.from(value as ArrayBuffer).toString('latin1');
    if (ArrayBuffer.isView(value))
      return Buffer.from(value.buffer, value.byteOffset, value.byteLength).toString('latin1');
    if (value !== null && typeof value === 'object') return Object.values(value).map(textOf).join(' ');
    return String(value);
  };
  for (const { name = '' } of await indexedDB.databases()) {
    const base = await openDB(name);
    for (const store of base.objectStoreNames) texts.push(...(await base.getAll(store)).map(textOf));
    base.close();
  }
  return texts.join('\n');
}

test('what was felt, written, photographed and drafted cannot be read in the storage, and is given back as it was', async () => {
  const store = await phoneStore('one');
  const run = await aRun();
  await store.addRun(run);
  await store.changeRun(run.permitId, (kept) => ({ run: { ...kept, nextSequence: 1 }, events: [felt] }));
  const diary = { key: 'd', sessionId: run.sessionId, body: { note: 'canary-in-the-note' } };
  await store.keepDraft('diary', diary);
  await store.keepPhoto({
    key: 'p',
    sessionId: run.sessionId,
    photo: new Blob(['canary-in-the-photo'], { type: 'image/jpeg' }),
  });
  await store.keepAside({ id: 'a', kind: 'event', sessionId: null, code: 'canary-code', content: felt });

  const kept = await everythingKept();
  expect(kept).toContain(run.permitId);
  expect(kept).not.toMatch(/canary|tingling|sensation|milliamp/i);

  expect(await store.run(run.permitId)).toEqual({ ...run, nextSequence: 1 });
  expect(await store.firstEvents(10)).toEqual([{ id: felt.id, permitId: run.permitId, sequence: 0, event: felt }]);
  expect(await store.draft('diary')).toEqual(diary);
  const [photo] = await store.photos();
  expect(photo).toMatchObject({ key: 'p', sessionId: run.sessionId });
  expect(photo?.photo.type).toBe('image/jpeg');
  expect(await store.aside('a')).toMatchObject({ code: 'canary-code', content: felt });
});

test('a changed bit is refused, another account has another key, and no key can be read out', async () => {
  const mine = await openVault('rampwell.mine');
  const sealed = await mine.seal({ strength: 4 });
  expect(await (await openVault('rampwell.mine')).open(sealed)).toEqual({ strength: 4 });
  await expect((await openVault('rampwell.theirs')).open(sealed)).rejects.toThrow();
  const bytes = new Uint8Array(sealed.bytes.slice(0));
  bytes[0] = (bytes[0] ?? 0) ^ 1;
  await expect(mine.open({ ...sealed, bytes: bytes.buffer })).rejects.toThrow();

  const base = await openDB('rampwell-keys');
  const key: unknown = await base.get('key', 'rampwell.mine');
  base.close();
  expect(key).toMatchObject({ extractable: false });
});

test('who was signed in when a session began cannot be read in the storage either', async () => {
  await keepMe({
    account: {
      id: 'a',
      email: 'canary-name@harrowmere.example',
      name: 'canary-name',
      role: 'participant',
      language: 'en',
    },
    sites: [],
    participant: null,
    secondFactor: { enabled: false, required: false },
    demo: false,
    now: '2026-03-02T09:00:00.000Z',
  });
  expect(await everythingKept()).not.toContain('canary-name');
});

test('two changes of one run at once both count, one after the other', async () => {
  const store = await phoneStore('two');
  const run = await aRun();
  await store.addRun(run);
  const add = () =>
    store.changeRun(run.permitId, (kept) => ({ run: { ...kept, nextSequence: kept.nextSequence + 1 }, events: [] }));
  await Promise.all([add(), add(), add()]);
  expect((await store.run(run.permitId))?.nextSequence).toBe(3);
});
