// The sites that a report covers: the one asked for, or all own ones. Null: not one of the asker's own.

export function reachSites(siteIds: readonly string[], asked: string | undefined): readonly string[] | null {
  if (asked === undefined) return siteIds;
  return siteIds.includes(asked) ? [asked] : null;
}
