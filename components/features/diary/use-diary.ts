// One diary as it is written: kept on the phone at each touch, handed over once, sent by itself when there is a network.

import { useLocalSearchParams, useRouter, type Href } from 'expo-router';
import { useEffect, useState } from 'react';
import { useRead } from '@/components/runtime/api';
import { useMe } from '@/components/runtime/me';
import { forgetDraft, keepDraft, readDraft } from '@/components/runtime/phone-store';
import { handOverDiary, refusalOf } from '@/components/runtime/unsent';
import { readSession } from '@/shared/contracts/session';
import { bodyOf, DiaryDraft, freshDraft, isPageAnswered, pagesOf, type DiaryKind } from './diary-draft';

export function useDiary() {
  const router = useRouter();
  const me = useMe();
  const params = useLocalSearchParams<{ sessionId: string; kind?: string }>();
  const { sessionId } = params;
  const kind: DiaryKind = params.kind === 'next_day' ? 'next_day' : 'after';
  const accountId = me?.account.id ?? null;
  const session = useRead(readSession, { params: { sessionId } });
  const name = `diary-${kind}-${sessionId}`;
  const [draft, setDraft] = useState<DiaryDraft | null>(null);
  const [photo, setPhoto] = useState<File | null>(null);
  const [isSending, setSending] = useState(false);
  const [failure, setFailure] = useState<string | null>(null);

  useEffect(() => {
    if (accountId === null) return;
    void readDraft(accountId, name, DiaryDraft).then((kept) => setDraft(kept ?? freshDraft()));
  }, [accountId, name]);

  const change = (next: DiaryDraft) => {
    setDraft(next);
    if (accountId !== null) void keepDraft(accountId, name, next);
  };

  async function send(whole: DiaryDraft): Promise<void> {
    const body = bodyOf(whole, kind, photo !== null);
    if (body === null || accountId === null || isSending) return;
    setSending(true);
    setFailure(null);
    try {
      const kept = photo === null ? null : { key: crypto.randomUUID(), sessionId, photo };
      await handOverDiary(accountId, { key: whole.key, sessionId, body }, kept);
      const refusal = await refusalOf(accountId, whole.key);
      if (refusal !== null) return setFailure(refusal);
      await forgetDraft(accountId, name);
      router.replace(`/receipt/${sessionId}` satisfies Href);
    } catch {
      // The phone can keep nothing: the answers stay on the page, and it says so.
      setFailure('unkept');
    } finally {
      setSending(false);
    }
  }

  const pages = pagesOf[kind];
  const place = draft === null ? 0 : Math.min(draft.page, pages.length - 1);
  const page = pages[place] ?? pages[0];
  return {
    kind,
    session,
    site: me?.sites[0] ?? null,
    draft,
    change,
    photo,
    setPhoto,
    page,
    pageNumber: place + 1,
    pageCount: pages.length,
    isAnswered: draft !== null && isPageAnswered(draft, page),
    isLast: place === pages.length - 1,
    isSending,
    failure,
    back: () => (draft !== null && place > 0 ? change({ ...draft, page: place - 1 }) : router.replace('/today')),
    next: () => {
      if (draft === null) return;
      if (place < pages.length - 1) change({ ...draft, page: place + 1 });
      else void send(draft);
    },
  };
}
export type Diary = ReturnType<typeof useDiary>;
