// Arithmetic of local calendars in IANA zones on the platform's own Intl. Instants are milliseconds since 1970 UTC
// inside, ISO 8601 strings outside. No clock is read here, and no fixed offset is ever assumed.

export declare function parseInstant(iso: string | null | undefined): number | undefined;
export declare function isoOf(milliseconds: number): string;
export declare function isZone(zone: string): boolean;
/** `2026-05-12` and `18:30:00` of an instant in a zone; weekday 1 = Monday … 7 = Sunday. */
export type LocalMoment = { readonly date: string; readonly time: string; readonly weekday: number };
export declare function localMoment(milliseconds: number, zone: string): LocalMoment;
/** Earliest or latest instant with this local time; a time that a jump leaves out is the first instant after it. */
export declare function instantOf(date: string, time: string, zone: string, which?: 'first' | 'last'): number;
/** False for a local day that a zone left out (Apia, 30 December 2011). */
export declare function dayExists(date: string, zone: string): boolean;
export declare function startOfDay(date: string, zone: string): number;
export declare function nextMidnight(milliseconds: number, zone: string): number;
export declare function addDays(date: string, days: number): string;
export declare function weekdayOf(date: string): number;
