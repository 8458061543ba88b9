// What PostgreSQL calls an error, for whoever must tell a clash from a fault. Opens nothing and decides nothing.

/** PostgreSQL's code of an error (`40001`), also where the query builder wrapped it; undefined for anything else. */
export function sqlStateOf(error: unknown): string | undefined {
  for (let cause = error, depth = 0; cause instanceof Error && depth < 5; cause = cause.cause, depth += 1) {
    if ('code' in cause && typeof cause.code === 'string') return cause.code;
  }
  return undefined;
}
