// A file of worked cases, read strictly: every field that is not known is named, and none is passed over. Runs nothing.

import { z } from 'zod';
import { kindNames } from '../worked-cases';
import { mergePatch } from '../worked-cases/form';
import { isRecord, type PassRule, type Tolerance } from './compare';

/** One case, ready to be asked. */
export interface AskedCase {
  readonly id: string;
  readonly form: 'rules' | 'numbers';
  readonly kind: string;
  readonly given: unknown;
  readonly now: string | undefined;
  readonly expected: Readonly<Record<string, unknown>>;
  readonly passRule: PassRule;
}
export interface UnreadCase {
  readonly id: string;
  readonly expected: unknown;
  readonly problems: readonly string[];
}
export type ReadCase = AskedCase | UnreadCase;
export type CaseFile =
  | { readonly read: true; readonly cases: readonly ReadCase[] }
  | { readonly read: false; readonly problems: readonly string[] };

/** The form's own name (reference page of the cases). */
const numberSchema = 'rampwell-reference/1';

/** Numbers of `rules.json` are rounded to 6 places. */
const ruleTolerance: Tolerance = { abs: 1e-6, rel: 0 };

const text = z.string().optional();
const remark = z.unknown().optional();

const FileShape = z.strictObject({
  schema: z.literal(numberSchema).optional(),
  area: text,
  about: text,
  passRule: text,
  properties: remark,
  format: z.union([z.number(), z.string()]).optional(),
  baseline: z.record(z.string(), z.unknown()).optional(),
  scales: z.record(z.string(), z.unknown()).optional(),
  cases: z.array(z.unknown()).min(1),
});

const expected = z.record(z.string(), z.unknown());
const remarks = { title: text, source: text, tag: text, note: text };
const RuleCase = z.strictObject({
  ...{ ...remarks, id: z.string().min(1), kind: z.string(), now: text },
  ...{ given: z.record(z.string(), z.unknown()), expect: expected, if_hold_only: remark },
});
const ScaleCase = z.strictObject({
  ...{ ...remarks, id: z.string().min(1), scale: z.string() },
  ...{ answers: remark, before: remark, after: remark, expect: expected },
});
const Bounds = z.strictObject({ abs: z.number().min(0).default(0), rel: z.number().min(0).default(0) });
const NumberCase = z.strictObject({
  ...{ ...remarks, id: z.string().min(1), kind: z.string(), method: text },
  input: z.record(z.string(), z.unknown()),
  expected,
  tolerance: Bounds.extend({ per: z.record(z.string(), Bounds).optional() }).optional(),
});

function problemsOf(error: z.ZodError): string[] {
  return error.issues.map(({ path, message }) =>
    path.length > 0 ? `${path.map(String).join('.')}: ${message}` : message,
  );
}

/** A case is named by its id, or by its place where it has none. */
function nameOf(value: unknown, index: number): string {
  return isRecord(value) && typeof value.id === 'string' && value.id !== '' ? value.id : `cases[${index}]`;
}

function readRuleCase(
  value: unknown,
  baseline: Readonly<Record<string, unknown>>,
  unread: Omit<UnreadCase, 'problems'>,
): ReadCase {
  const read = RuleCase.safeParse(value);
  if (!read.success) return { ...unread, problems: problemsOf(read.error) };
  const { id, kind, now, given, expect } = read.data;
  const base = Object.hasOwn(baseline, kind) ? baseline[kind] : undefined;
  const passRule: PassRule = { form: 'rules', tolerance: ruleTolerance };
  return { id, form: 'rules', kind, now, given: mergePatch(base, given), expected: expect, passRule };
}

function readScaleCase(value: unknown, unread: Omit<UnreadCase, 'problems'>): ReadCase {
  const read = ScaleCase.safeParse(value);
  if (!read.success) return { ...unread, problems: problemsOf(read.error) };
  const { id, scale, answers, before, after, expect } = read.data;
  const given = answers === undefined ? { scale, before, after } : { scale, answers };
  const passRule: PassRule = { form: 'rules', tolerance: ruleTolerance };
  return { id, form: 'rules', kind: 'scale', now: undefined, given, expected: expect, passRule };
}

function readNumberCase(value: unknown, unread: Omit<UnreadCase, 'problems'>): ReadCase {
  const read = NumberCase.safeParse(value);
  if (!read.success) return { ...unread, problems: problemsOf(read.error) };
  const { id, kind, input, tolerance } = read.data;
  const { abs, rel, per } = tolerance ?? { abs: 0, rel: 0, per: undefined };
  const passRule: PassRule = { form: 'numbers', tolerance: { abs, rel }, per };
  return { id, form: 'numbers', kind, now: undefined, given: input, expected: read.data.expected, passRule };
}

function readCase(value: unknown, index: number, baseline: Readonly<Record<string, unknown>>): ReadCase {
  const id = nameOf(value, index);
  if (!isRecord(value)) return { id, expected: null, problems: ['a case is an object'] };
  const unread = { id, expected: value.expect ?? value.expected ?? null };
  const form = 'input' in value || 'expected' in value ? 'numbers' : 'rules';
  if (typeof value.kind === 'string' && !kindNames[form].includes(value.kind)) {
    return { ...unread, problems: [`kind: ${value.kind} is not known; known are ${kindNames[form].join(', ')}`] };
  }
  if (form === 'numbers') return readNumberCase(value, unread);
  return 'scale' in value ? readScaleCase(value, unread) : readRuleCase(value, baseline, unread);
}

/** What was parsed from JSON. */
export function readCaseFile(content: unknown): CaseFile {
  const file = FileShape.safeParse(content);
  if (!file.success) return { read: false, problems: problemsOf(file.error) };
  const { cases, baseline = {} } = file.data;
  const strange = Object.keys(baseline).filter((kind) => !kindNames.rules.includes(kind));
  if (strange.length > 0)
    return { read: false, problems: strange.map((kind) => `baseline.${kind}: kind is not known`) };
  return { read: true, cases: cases.map((each, index) => readCase(each, index, baseline)) };
}
