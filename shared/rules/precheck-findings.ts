// From a judged pre-check to findings that are stored, shown to staff and paged. The judgement itself is precheck.ts.

import type { Finding } from './consequences';
import type { PrecheckJudgement } from './precheck';

/** Each lockout as a finding; a new medicine that stops nothing is for somebody to look at. */
export function findingsOfPrecheck(judged: PrecheckJudgement, precheckId: string): Finding[] {
  const codes = judged.findings.map(({ code }) => code);
  const locked = judged.lockouts.map(({ level, code, until }): Finding => ({
    code,
    level,
    until,
    isPaged: level === 'safety' && judged.pageStaff,
    facts: { findings: codes.join(',') },
  }));
  if (!codes.includes('new_medicine')) return locked;
  return [...locked, { code: 'precheck_new_medicine', level: 'look', matter: `new_medicine:${precheckId}` }];
}
