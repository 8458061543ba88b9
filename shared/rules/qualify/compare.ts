// Whether an outcome is the one that a worked case expects, by the pass rules of its form. Compares; runs nothing.

export interface Tolerance {
  readonly abs: number;
  readonly rel: number;
}

/**
 * How a form is compared.
 * - `rules`: lists are sets, instants are equal when they are the same instant, of `computed` only the keys that stand in the case.
 * - `numbers`: lists are in order, whole numbers are equal unless a tolerance names their key.
 */
export interface PassRule {
  readonly form: 'rules' | 'numbers';
  readonly tolerance: Tolerance;
  /** Numbers form: overrides by top-level key of `expected`. */
  readonly per?: Readonly<Record<string, Tolerance>> | undefined;
}

export function isRecord(value: unknown): value is Readonly<Record<string, unknown>> {
  return typeof value === 'object' && value !== null && !Array.isArray(value);
}

/** Objects of which only the expected keys are compared: the outcome itself, and what `rules.json` says so of. */
const partial: Readonly<Record<PassRule['form'], readonly string[]>> = { rules: ['', '.computed'], numbers: [''] };

const instant = /^\d{4}-\d{2}-\d{2}T\d{2}:\d{2}:\d{2}(\.\d+)?Z$/;
const zeroFraction = /\.0+Z$/;

function isSameText(got: unknown, wanted: string): boolean {
  if (typeof got !== 'string') return false;
  if (got === wanted) return true;
  return (
    instant.test(got) && instant.test(wanted) && got.replace(zeroFraction, 'Z') === wanted.replace(zeroFraction, 'Z')
  );
}

function isSameNumber(got: unknown, wanted: number, rule: PassRule, topKey: string): boolean {
  if (typeof got !== 'number' || !Number.isFinite(got)) return false;
  const own = rule.per && Object.hasOwn(rule.per, topKey) ? rule.per[topKey] : undefined;
  if (rule.form === 'numbers' && own === undefined && Number.isInteger(got) && Number.isInteger(wanted))
    return got === wanted;
  const { abs, rel } = own ?? rule.tolerance;
  return Math.abs(got - wanted) <= abs + rel * Math.abs(wanted);
}

function isSameList(got: unknown, wanted: readonly unknown[], rule: PassRule, path: string, topKey: string): boolean {
  if (!Array.isArray(got) || got.length !== wanted.length) return false;
  // A list of numbers is an interval or a series, in order in both forms; all other lists of `rules` are sets.
  if (rule.form === 'numbers' || wanted.every((each) => typeof each === 'number')) {
    return wanted.every((each, index) => isSame(got[index], each, rule, `${path}[]`, topKey));
  }
  const rest: unknown[] = [...got];
  return wanted.every((each) => {
    const at = rest.findIndex((candidate) => isSame(candidate, each, rule, `${path}[]`, topKey));
    if (at >= 0) rest.splice(at, 1);
    return at >= 0;
  });
}

function isSame(got: unknown, wanted: unknown, rule: PassRule, path: string, topKey: string): boolean {
  if (typeof wanted === 'number') return isSameNumber(got, wanted, rule, topKey);
  if (typeof wanted === 'string') return rule.form === 'rules' ? isSameText(got, wanted) : got === wanted;
  if (Array.isArray(wanted)) return isSameList(got, wanted, rule, path, topKey);
  if (!isRecord(wanted)) return got === wanted;
  if (!isRecord(got)) return false;
  const isPartial = partial[rule.form].includes(path);
  if (!isPartial && Object.keys(got).some((key) => !Object.hasOwn(wanted, key))) return false;
  return Object.entries(wanted).every(
    ([key, each]) =>
      Object.hasOwn(got, key) && isSame(got[key], each, rule, `${path}.${key}`, path === '' ? key : topKey),
  );
}

export function isAsExpected(actual: unknown, expected: unknown, rule: PassRule): boolean {
  return isSame(actual, expected, rule, '', '');
}
