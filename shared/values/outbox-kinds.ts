// Every kind of mail. Facts of a mail are ids, names and links; words stand in locales/<lang>/mail.json.
// None of them names a treatment, a dose or a condition (guidance R70): a test reads them all.

export const outboxKinds = [
  /** A participant is invited by the site. Facts: name, siteName, path. */
  'participant_invitation',
  /** A member of staff is invited. Facts: name, siteName, invitedBy, path. */
  'staff_invitation',
  /** A caregiver is invited by a participant. Facts: name, participantName (the first name), path. */
  'caregiver_invitation',
  /** Somebody asked to choose a new password. Facts: name, path. */
  'password_reset',
  /** Participant: something is planned today. Facts: name, path. */
  'planned_reminder',
  /** Participant: something planned was not done, asked kindly. Facts: name, path. */
  'missed_nudge',
  /** Caregiver: something planned was not done; carries the "stop these mails" link. Facts: name, participantName (the first name), path, stopPath. */
  'caregiver_missed',
  /** Participant: there is something to read and confirm. Facts: name, path. */
  'something_to_confirm',
  /** Participant or site: there is a message. Facts: name, path. */
  'message_waiting',
  /** Staff: somebody needs to be looked at now; escalates until acknowledged. Facts: name, code (of the participant), path. */
  'page',
  /** Staff: a second signature is asked. Facts: name, code (of the participant), path. */
  'second_signature_asked',
] as const;

export type OutboxKind = (typeof outboxKinds)[number];
