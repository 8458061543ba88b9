// Every kind of mail. Facts of a mail are ids, names and links; words stand in locales/<lang>/mail.json.
// None of them names a treatment, a dose or a condition (guidance R70): a test reads them all.

export const outboxKinds = [
  /** A participant is invited by the site. */
  'participant_invitation',
  /** A member of staff is invited. */
  'staff_invitation',
  /** A caregiver is invited by a participant. */
  'caregiver_invitation',
  /** Somebody asked to choose a new password. */
  'password_reset',
  /** Participant: something is planned today. */
  'planned_reminder',
  /** Participant: something planned was not done, asked kindly. */
  'missed_nudge',
  /** Caregiver: something planned was not done; carries the "stop these mails" link. */
  'caregiver_missed',
  /** Participant: there is something to read and confirm. */
  'something_to_confirm',
  /** Participant or site: there is a message. */
  'message_waiting',
  /** Staff: somebody needs to be looked at now; escalates until acknowledged. */
  'page',
  /** Staff: a second signature is asked. */
  'second_signature_asked',
] as const;

export type OutboxKind = (typeof outboxKinds)[number];
