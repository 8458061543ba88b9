// The token of a caregiver's "stop these mails" link: made from the server's secret and the caregiver's id, so that every mail can carry
// it though only its hash is stored. Knows no mail and no database.

import { createHmac } from 'node:crypto';

/** The same secret and caregiver give the same token, and nobody without the secret can make one. */
export function stopTokenFor(secret: string, caregiverId: string): string {
  return createHmac('sha256', secret).update(`mail-stop:${caregiverId}`).digest('base64url');
}
