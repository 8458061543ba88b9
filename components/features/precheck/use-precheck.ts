// The pre-check as it goes: answers and place, kept on the phone so that neither Back nor a reload forgets them, and the sending.

import { useEffect, useState } from 'react';
import { z } from 'zod';
import { useCall, useRead, type ApiProblem } from '@/components/runtime/api';
import { wallMilliseconds } from '@/components/runtime/clock';
import { useMe } from '@/components/runtime/me';
import { forgetDraft, keepDraft, readDraft } from '@/components/runtime/phone-store';
import { answerPrecheck, readClearance, type ClearanceView, type PrecheckView } from '@/shared/contracts/clearance';
import { precheckAnswersSchema, type PrecheckAnswers } from '@/shared/rules/precheck';
import {
  answersAsked,
  consequenceOfPage,
  isAnswered,
  pagesOf,
  type Consequence,
  type PrecheckFacts,
  type PrecheckPage,
} from './precheck-pages';

const Draft = z.object({ answers: precheckAnswersSchema, page: z.number().int().min(0), writtenAtMs: z.number() });
const draftName = 'precheck';
/** Answers about today's state are as stale after this as a sent pre-check is (30 min). */
const draftLifeMs = 30 * 60_000;

export interface Precheck {
  state: 'asking';
  clearance: ClearanceView;
  page: PrecheckPage;
  pageNumber: number;
  pageCount: number;
  answers: PrecheckAnswers;
  helperCode: string;
  consequence: Consequence;
  isPageAnswered: boolean;
  isLast: boolean;
  isSending: boolean;
  problem: ApiProblem | null;
  answer(change: PrecheckAnswers): void;
  setHelperCode(code: string): void;
  next(answers?: PrecheckAnswers): void;
  back: (() => void) | undefined;
}
export type PrecheckState =
  | { state: 'loading' }
  | { state: 'failed'; retry(): void }
  | { state: 'not_now'; clearance: ClearanceView }
  | { state: 'answered'; clearance: ClearanceView; view: PrecheckView; again(): void }
  | Precheck;

function useDraft(accountId: string | null) {
  const [answers, setAnswers] = useState<PrecheckAnswers>({});
  const [page, setPage] = useState(0);
  const [isRead, setRead] = useState(false);
  useEffect(() => {
    if (accountId === null) return;
    void readDraft(accountId, draftName, Draft).then((draft) => {
      if (draft && wallMilliseconds() - draft.writtenAtMs < draftLifeMs) {
        setAnswers(draft.answers);
        setPage(draft.page);
      }
      setRead(true);
    });
  }, [accountId]);
  const keep = (nextAnswers: PrecheckAnswers, nextPage: number) => {
    setAnswers(nextAnswers);
    setPage(nextPage);
    if (accountId !== null)
      void keepDraft(accountId, draftName, { answers: nextAnswers, page: nextPage, writtenAtMs: wallMilliseconds() });
  };
  const forget = () => {
    setAnswers({});
    setPage(0);
    if (accountId !== null) void forgetDraft(accountId, draftName);
  };
  return { answers, page, isRead, keep, forget };
}

/** The same wish sent again carries the same key; other answers are another wish. */
function useWishKey() {
  const [wish, setWish] = useState<{ text: string; key: string } | null>(null);
  return (body: unknown): string => {
    const text = JSON.stringify(body);
    if (wish?.text === text) return wish.key;
    const key = crypto.randomUUID();
    setWish({ text, key });
    return key;
  };
}

export function usePrecheck(): PrecheckState {
  const me = useMe();
  const clearance = useRead(readClearance, { query: {} });
  const call = useCall(answerPrecheck);
  const draft = useDraft(me?.account.id ?? null);
  const keyOf = useWishKey();
  const [helperCode, setHelperCode] = useState('');
  const [view, setView] = useState<PrecheckView | null>(null);

  if (clearance.data && view) {
    const again = () => {
      draft.forget();
      setView(null);
    };
    return { state: 'answered', clearance: clearance.data, view, again };
  }
  if (clearance.isError && !clearance.data) return { state: 'failed', retry: () => void clearance.refetch() };
  if (!clearance.data || !draft.isRead) return { state: 'loading' };
  const answer = clearance.data;
  if (!answer.readyForPrecheck) return { state: 'not_now', clearance: answer };

  const facts: PrecheckFacts = { ...answer.precheckFacts, waveform: answer.dose?.waveform, zone: answer.zone };
  const { answers } = draft;
  const pages = pagesOf(facts, answers);
  const place = Math.min(draft.page, pages.length - 1);
  const page = pages[place];
  if (!page) return { state: 'loading' };
  const consequence = consequenceOfPage(page, answers, facts);

  const send = async (given: PrecheckAnswers) => {
    const isHelped = given.helperPresent === true && helperCode !== '';
    const body = {
      answers: answersAsked(pagesOf(facts, given), given),
      ...(isHelped ? { helperCode } : {}),
      language: 'en' as const,
    };
    try {
      setView(await call.mutateAsync({ body, key: keyOf(body) }));
      draft.forget();
    } catch {
      // The call keeps its problem; the page shows it and the answers stay.
    }
  };
  const next = (given: PrecheckAnswers = answers) => {
    const now = pagesOf(facts, given);
    const here = now.findIndex(({ name }) => name === page.name);
    // An emergency waits for no further question.
    const isEmergency = consequenceOfPage(now[here] ?? page, given, facts).outcome === 'emergency';
    if (isEmergency || here === now.length - 1) {
      draft.keep(given, here);
      void send(given);
    } else draft.keep(given, here + 1);
  };

  return {
    state: 'asking',
    clearance: answer,
    page,
    pageNumber: place + 1,
    pageCount: pages.length,
    answers,
    helperCode,
    consequence,
    isPageAnswered: isAnswered(page, answers),
    isLast: place === pages.length - 1,
    isSending: call.isPending,
    problem: call.error,
    answer: (change) => draft.keep({ ...answers, ...change }, place),
    setHelperCode,
    next,
    back: place > 0 ? () => draft.keep(answers, place - 1) : undefined,
  };
}
