// What: a good body spoilt in one place at a time. Must not: say what a door answers to it; tests do.
type Path = readonly (string | number)[];

export interface Spoilt {
  what: string;
  /** As the door's answer names it. */
  path: string;
  body: unknown;
}

const isPlain = (value: unknown): value is Record<string, unknown> =>
  typeof value === 'object' && value !== null && !Array.isArray(value);

/** An object that is filled item by item, all alike: the first three stand for the others. */
function membersOf(value: Record<string, unknown>, whole: boolean): [string, unknown][] {
  const members = Object.entries(value);
  const isAlike = new Set(members.map(([, member]) => JSON.stringify(member))).size === 1;
  return isAlike && !whole ? members.slice(0, 3) : members;
}

/** Every place in a body; of a list the first member. */
function placesOf(value: unknown, whole = false, path: Path = []): { path: Path; value: unknown }[] {
  const inside = Array.isArray(value)
    ? value.slice(0, 1).flatMap((member, index) => placesOf(member, whole, [...path, index]))
    : isPlain(value)
      ? membersOf(value, whole).flatMap(([key, member]) => placesOf(member, whole, [...path, key]))
      : [];
  return path.length === 0 ? inside : [{ path, value }, ...inside];
}

const absent = Symbol('absent');

/** The same with one place set anew, or taken out. */
function withPlace(value: unknown, [key, ...rest]: Path, set: unknown): unknown {
  if (key === undefined) return set;
  if (Array.isArray(value))
    return value.map((member: unknown, index) => (index === key ? withPlace(member, rest, set) : member));
  if (!isPlain(value)) throw new Error(`there is no ${String(key)}`);
  if (rest.length === 0 && set === absent)
    return Object.fromEntries(Object.entries(value).filter(([name]) => name !== key));
  return { ...value, [key]: withPlace(value[key], rest, set) };
}

function otherType(value: unknown): unknown {
  if (typeof value === 'string') return 12_345;
  if (value === null) return [];
  if (typeof value === 'number') return 'twelve';
  return 'neither';
}

const isUuid = (value: unknown) => typeof value === 'string' && /^[0-9a-f]{8}-[0-9a-f-]{27}$/.test(value);

/** In JSON a number can be said that JSON.stringify never says. */
export const negativeZero = '<<-0>>';
export const textOf = (body: unknown) => JSON.stringify(body).replaceAll(`"${negativeZero}"`, '-0');

export function spoilt(body: unknown): Spoilt[] {
  const root = isPlain(body) ? [{ path: [] as Path, value: body as unknown }] : [];
  const places = placesOf(body);
  const one = (what: string, path: Path, set: unknown, named: Path = path): Spoilt => ({
    ...{ what, path: named.join('.') },
    body: path.length === 0 ? set : withPlace(body, path, set),
  });
  return [
    ...[...root, ...places].flatMap(({ path, value }) =>
      isPlain(value) ? [one('unknown field', path, { ...value, unheardOf: 1 }, [...path, 'unheardOf'])] : [],
    ),
    ...places.flatMap(({ path, value }) => [
      ...(typeof path.at(-1) === 'string' ? [one('missing', path, absent)] : []),
      ...(value === null ? [] : [one('null', path, null)]),
      one('wrong type', path, otherType(value)),
      ...(typeof value === 'string'
        ? [one('NUL', path, `${value}\u0000`), one('lone surrogate', path, `${value}\ud83d`)]
        : []),
      ...(typeof value === 'string' ? [one('far too long', path, 'x'.repeat(30_000))] : []),
      ...(typeof value === 'number'
        ? [one('1e308', path, 1e308), one('a fraction of nothing', path, Number.MIN_VALUE)]
        : []),
      ...(typeof value === 'number' ? [one('-1e308', path, -1e308)] : []),
      ...(isUuid(value)
        ? [one('not a UUID', path, '17'), one('a UUID cut off', path, String(value).slice(0, -1))]
        : []),
    ]),
  ];
}

/** Each number of a body as the zero below zero. */
export function withNegativeZero(body: unknown): Spoilt[] {
  return placesOf(body, true).flatMap(({ path, value }) =>
    typeof value === 'number' ? [{ what: '-0', path: path.join('.'), body: withPlace(body, path, negativeZero) }] : [],
  );
}

/** A body that says something else and is as good, by whatever judges it; undefined when nothing can be changed. */
export function another(
  body: Record<string, unknown>,
  isGood: (body: unknown) => boolean,
): Record<string, unknown> | undefined {
  for (const { path, value } of placesOf(body, true)) {
    const changed =
      typeof value === 'string'
        ? [`${value} too`, `x${value}`]
        : typeof value === 'boolean'
          ? [!value]
          : typeof value === 'number'
            ? [value + 1, value - 1]
            : [];
    for (const set of changed) {
      const candidate = withPlace(body, path, set);
      if (path[0] !== 'password' && isPlain(candidate) && isGood(candidate)) return candidate;
    }
  }
  return undefined;
}
