// What this phone keeps and has not sent, for screens: how much, and handing over a diary or a photo. Sending goes by itself while
// any page is open. It must not say "sent" of anything that the server has not answered for.

import { useQueryClient } from '@tanstack/react-query';
import { useEffect, useSyncExternalStore } from 'react';
import { useMe } from './me';
import { findRun, phoneStore, type DiaryRow, type PhotoRow } from './phone-store';
import { nothingUnsent, senderOf, type Unsent } from './unsent-sender';

const none = () => () => undefined;

/** Counts what waits, and keeps the sending and a running session alive while the page that asks is open. */
export function useUnsent(): Unsent {
  const me = useMe();
  const queries = useQueryClient();
  const accountId = me?.account.role === 'participant' ? me.account.id : null;
  const sender = accountId === null ? null : senderOf(accountId);
  useEffect(() => {
    if (sender === null || accountId === null) return;
    const leave = sender.onSent((nouns) => {
      for (const noun of nouns) void queries.invalidateQueries({ queryKey: [noun] });
    });
    sender.now();
    void takeUpRun(accountId);
    return leave;
  }, [sender, accountId, queries]);
  return useSyncExternalStore(sender?.subscribe ?? none, sender?.read ?? (() => nothingUnsent), () => nothingUnsent);
}

/** A session that runs on this phone is found again from whatever page is open. Loaded only where there is one. */
async function takeUpRun(accountId: string): Promise<void> {
  try {
    const run = await findRun(await phoneStore(accountId));
    if (run === null || run.phase === 'ended') return;
    const { sessionRunOf } = await import('./session-run');
    await sessionRunOf(accountId).open('if_free');
  } catch {
    // A phone that cannot open its store holds no session; the run page says so.
  }
}

/** Keeps a diary and tries to send it. True once the server has it; false while it waits here. */
export async function handOverDiary(accountId: string, diary: DiaryRow, photo: PhotoRow | null): Promise<boolean> {
  const store = await phoneStore(accountId);
  await store.keepDiary(diary);
  if (photo) await store.keepPhoto(photo);
  const sender = senderOf(accountId);
  await sender.flush();
  return !(await store.holds('diary', diary.key));
}

/** Why the server refused what was handed over under this key; null if it did not. */
export async function refusalOf(accountId: string, key: string): Promise<string | null> {
  return (await (await phoneStore(accountId)).aside(key))?.code ?? null;
}
