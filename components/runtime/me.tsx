// Who is signed in, read once and shared. It shows nothing and decides nothing: what a role may do, the server checks at each door.

import { useQueryClient } from '@tanstack/react-query';
import { useCallback } from 'react';
import { readMe, type Me } from '@/shared/contracts/account';
import type { Role } from '@/shared/values/roles';
import { useRead } from './api';
import { keepMe, useKeptMe } from './kept-me';

/** First page of each role. */
const firstPages: Readonly<Record<Role, '/today' | '/shared' | '/worklist' | '/site'>> = {
  participant: '/today',
  caregiver: '/shared',
  coordinator: '/worklist',
  clinician: '/worklist',
  monitor: '/worklist',
  administrator: '/site',
};

export function firstPageOf(role: Role) {
  return firstPages[role];
}

export type MeState =
  | { state: 'loading' }
  | { state: 'signed_out' }
  | { state: 'second_factor' }
  | { state: 'failed'; isOffline: boolean; retry(): void }
  | { state: 'signed_in'; me: Me };

/** What is known of the person at this browser. */
export function useMeState(): MeState {
  const read = useRead(readMe);
  const kept = useKeptMe(!read.data && (read.failureReason?.offline ?? false));
  if (read.data) return { state: 'signed_in', me: read.data };
  if (kept) return { state: 'signed_in', me: kept };
  if (read.isPending || kept === undefined) return { state: 'loading' };
  const code = read.error?.problem.code;
  if (code === 'not_signed_in') return { state: 'signed_out' };
  if (code === 'second_factor.required') return { state: 'second_factor' };
  return { state: 'failed', isOffline: read.error?.offline ?? false, retry: () => void read.refetch() };
}

/** The person signed in, or null while that is not known. */
export function useMe(): Me | null {
  const state = useMeState();
  return state.state === 'signed_in' ? state.me : null;
}

/** The server's clock as it answered after this page opened; null until it has. A day kept from before midnight would be yesterday. */
export function useNowOfServer(): string | null {
  const read = useRead(readMe, { isFresh: true });
  return read.isFetchedAfterMount ? (read.data?.now ?? null) : null;
}

/** Signs out here and forgets everything that was read; what is unsent stays on the phone. */
export function useSignOut(): () => Promise<void> {
  const queries = useQueryClient();
  return useCallback(async () => {
    await fetch('/api/auth/sign-out', { method: 'POST', credentials: 'same-origin', headers: { 'content-type': 'application/json' }, body: '{}' });
    await keepMe(null);
    queries.clear();
  }, [queries]);
}
