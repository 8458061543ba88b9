// Own limits of the house that no protocol sets: how long a link lives, how many caregivers a person may invite, and the like. Each with
// its reason. What a site may set stands in protocol-defaults.ts, what is published in ceilings.ts.

/** An invitation's link ends after this: time enough for a holiday, short enough for a lost mail. Own choice. */
export const invitationValidDays = 14;

/** Somebody who says "I am watching now" watches this long: one session with set-up and diary, twice over. Own choice. */
export const watchingNowMinutes = 120;

/** More helpers than this make nobody responsible. Own choice. */
export const mostCaregivers = 5;

/** A page that waits is acknowledged or goes on after this (safety rules §7). */
export const escalationMinutes = 30;

/** A prescription is written anew at least once a year, as a screening is. Own choice. */
export const longestPrescriptionDays = 366;
