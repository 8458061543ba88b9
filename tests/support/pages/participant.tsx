// What: a page as one participant sees it: signed in, words, theme, and a server whose answers the test sets.
// Must not: know any screen.
import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { configure, render } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import type { ReactElement } from 'react';
import { I18nextProvider } from 'react-i18next';
import { i18n } from '@/components/runtime/i18n';
import type { ClearanceView } from '@/shared/contracts/clearance';

// How long a page may take to show what it should before that counts as never; two busy cores need it.
configure({ asyncUtilTimeout: 10_000 });
jest.setTimeout(60_000);

export const zone = 'Europe/London';
export const now = '2026-03-04T18:00:00.000Z';
export const site = {
  id: '5f0c4a1b-2c3d-4e5f-8a9b-0c1d2e3f4a5b',
  name: 'Lantern Street Clinic',
  code: 'LS',
  phone: '+44 1632 960100',
  emergencyNumber: '999',
  zone,
};
export const ids = {
  course: '8f5f2c3e-6f0b-4a62-8b6a-0e5d3c1b2a90',
  precheck: '2b7e4f0a-1c4d-4e8f-9a0b-6d5c4b3a2f10',
  participant: '3f0c4a1b-2c3d-4e5f-8a9b-0c1d2e3f4a5b',
  session: '9a53e5f0-c4a1-4b2c-8d3e-4f5a6b7c8d9e',
  device: '7d2a9e4c-3b5f-4d6e-8a1c-0f9e8d7c6b5a',
};
export const dose = {
  waveform: 'tDCS' as const,
  intensityMilliamp: 2,
  rampUpSeconds: 30,
  holdSeconds: 1200,
  rampDownSeconds: 30,
  chargeCoulomb: 2.46,
  minutes: 21,
  electrodes: [
    { position: 'F3', polarity: 'anode' as const, areaSquareCentimetre: 25, share: 1 },
    { position: 'Fp2', polarity: 'cathode' as const, areaSquareCentimetre: 25, share: 1 },
  ],
};

let people = 0;
/** A fresh account each time, so that no test finds another's drafts. */
export function meOf(accountId = `ines-${(people += 1)}`, demo = false) {
  return {
    account: {
      id: accountId,
      email: 'ines@harrowmere.example',
      name: 'Ines Marlow',
      role: 'participant',
      language: 'en',
    },
    sites: [site],
    participant: { id: ids.participant, code: 'LS-001', zone, courseId: ids.course, state: 'active' },
    secondFactor: { enabled: false, required: false },
    demo,
    now,
  };
}

export function clearanceOf(change: Partial<ClearanceView> = {}): ClearanceView {
  return {
    participantId: ids.participant,
    courseId: ids.course,
    asOf: now,
    zone,
    allowed: false,
    readyForPrecheck: true,
    reasons: [],
    earliestStartAt: null,
    nextSession: null,
    dose,
    assisted: false,
    precheckFacts: { excludesPregnancy: false, helperAsked: false },
    precheck: null,
    livePermitId: null,
    openSessionId: null,
    diaryDueSessionId: null,
    nextDayDueSessionId: null,
    prescriptionToAcknowledgeId: null,
    acknowledgedVersion: 1,
    site,
    ...change,
  };
}

export interface Call {
  method: string;
  path: string;
  key: string | null;
  body: unknown;
}
export interface Server {
  calls: Call[];
  isReachable: boolean;
  /** False: calls come in, their answers are lost. */
  answersArrive: boolean;
  /** By "GET /api/me": the answer, or what makes it of the call. A status other than 200 stands beside it. */
  answers: Record<string, unknown>;
  statuses: Record<string, number>;
  sent(method: string, path: string): Call[];
}

/** Puts a server in place of the network. */
export function serve(answers: Record<string, unknown>): Server {
  const server: Server = {
    calls: [],
    isReachable: true,
    answersArrive: true,
    answers,
    statuses: {},
    sent: (method, path) => server.calls.filter((call) => call.method === method && call.path === path),
  };
  globalThis.fetch = async (input, init) => {
    const method = init?.method ?? 'GET';
    const path = String(input).split('?')[0] ?? '';
    if (!server.isReachable) throw new TypeError('no network');
    const body: unknown = typeof init?.body === 'string' ? JSON.parse(init.body) : undefined;
    const call = { method, path, key: new Headers(init?.headers).get('idempotency-key'), body };
    server.calls.push(call);
    if (!server.answersArrive) throw new TypeError('the answer was lost');
    const name = `${method} ${path}`;
    const known = server.answers[name];
    const answer: unknown = typeof known === 'function' ? known(call) : known;
    const status = answer === undefined ? 404 : (server.statuses[name] ?? 200);
    return {
      ok: status < 400,
      status,
      json: async () =>
        answer ?? { type: 'about:blank', title: 'no', status: 404, detail: name, code: 'not_found', requestId: '1' },
    } as Response;
  };
  return server;
}

export function show(page: ReactElement) {
  const queries = new QueryClient({
    defaultOptions: { queries: { retry: false, networkMode: 'always' }, mutations: { networkMode: 'always' } },
  });
  const user = userEvent.setup();
  const shown = render(
    <QueryClientProvider client={queries}>
      <I18nextProvider i18n={i18n}>{page}</I18nextProvider>
    </QueryClientProvider>,
  );
  return { ...shown, user };
}
