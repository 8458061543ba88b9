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

/** Permits given out in an hour, counted by issue (safety rules §10): more is a device or an app gone wrong. */
export const mostPermitsPerHour = 10;

/** An event from further ahead than this cannot be: two monotonic clocks and a network drift by less. Own choice. */
export const eventAheadSeconds = 5;

/** Numbers of missing events told at once; the phone asks again. Own choice. */
export const mostMissingTold = 1000;

/**
 * Numbers that one session's events may have: 40 min with all pauses at one event a second for samples and one for each of four pads are
 * fewer. A device or an app that says more has gone wrong, and would make every batch slower for all. Own choice.
 */
export const mostEventsPerSession = 20_000;

/**
 * Worked cases in one qualification: several times the published ones. So many are run before others get their turn: a case takes well
 * under a millisecond. Own choices.
 */
export const qualificationLimits = { mostCases: 2000, casesAtOnce: 20, mostFailuresShown: 50 } as const;

/** Points of a stored curve: one a pixel on the widest picture. */
export const mostCurvePoints = 400;

/** Without a final record a session counts as running this long past its planned end and all its pauses. Own choice. */
export const recordGraceSeconds = 120;

/** The next day's questions are asked on the following local days, this long after the session. Own choice. */
export const nextDayAskedDays = 3;

/** Skin photos: enough of one session, sharp enough to see redness, small enough for a phone's network. Own choices. */
export const photoLimits = {
  mostPerSession: 5,
  mostPixels: 40_000_000,
  longestSidePixels: 1600,
  mostBytes: 8_000_000,
  jpegQuality: 82,
  signatureBytes: 12,
} as const;

/** Notices to a person wait for the morning between these local hours (guidance R70). */
export const quietHours = { from: '21:00', to: '08:00' } as const;

/** A nudge about a missed session is stale after this. Own choice. */
export const nudgeLifeHours = 24;

/** Two sessions running that ended by lost contact hold the device (safety rules §7). */
export const lostContactLooksBack = 2;

/** People whose state is judged in one go while a list looks for one state: few statements, still little memory. Own choice. */
export const peopleJudgedAtOnce = 1000;

/** Rows of an export that are read in one go: each slice is turned into text before the next one is read. Own choice. */
export const exportSliceRows = 1000;

/** Earlier reports that the diary rules look at: moderate in 3 of 5 asks for most (safety rules §7). */
export const reportsLookBack = 5;

/** Pieces of one kind of scheduled work that are taken at once. Own choice. */
export const jobBatch = 200;
