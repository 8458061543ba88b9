// The diary's word for the skin as a number for charts: 0 is well, each step is worse. It orders; what follows is lockout.ts'.

import { skinChoices } from '@/shared/values/diary-answers';

/** null for no answer, and for a word that is not one of the diary's. */
export function skinRank(skin: string | null): number | null {
  const rank = skinChoices.findIndex((choice) => choice === skin);
  return rank < 0 ? null : rank;
}
