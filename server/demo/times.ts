// Lengths of time that the demo's story counts in.

export const daySeconds = 86_400;
export const dayMilliseconds = daySeconds * 1000;
