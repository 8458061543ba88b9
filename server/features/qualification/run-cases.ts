// Worked cases of a file, one slice after the other, so that other requests are answered between them. Judges nothing itself.

import { setImmediate as nextTurn } from 'node:timers/promises';
import { qualificationLimits } from '@/shared/rules/house-limits';
import { readCaseFile, runCase, type CaseResult } from '@/shared/rules/qualify';

export type RunCases =
  | { readonly ran: true; readonly results: readonly CaseResult[] }
  | { readonly ran: false; readonly why: 'unreadable'; readonly problem: string }
  | { readonly ran: false; readonly why: 'too_much'; readonly cases: number };

function parsed(content: string): unknown {
  try {
    return JSON.parse(content);
  } catch {
    return undefined;
  }
}

export async function runCases(content: string): Promise<RunCases> {
  const json = parsed(content);
  if (json === undefined) return { ran: false, why: 'unreadable', problem: 'JSON' };
  const file = readCaseFile(json);
  const [problem] = file.read ? [] : file.problems;
  if (!file.read) return { ran: false, why: 'unreadable', problem: problem ?? 'cases' };
  const { mostCases, casesAtOnce } = qualificationLimits;
  if (file.cases.length > mostCases) return { ran: false, why: 'too_much', cases: file.cases.length };
  const results: CaseResult[] = [];
  for (const [index, each] of file.cases.entries()) {
    results.push(runCase(each));
    if (index % casesAtOnce === casesAtOnce - 1) await nextTurn();
  }
  return { ran: true, results };
}
