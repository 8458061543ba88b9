// Names of worklist matters that more than one action opens or closes. Decides nothing.

/** A permit is over and the device has not said what became of it. */
export function noWordMatter(sessionId: string): string {
  return `permit_no_word:${sessionId}`;
}
