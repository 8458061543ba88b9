// Names of the places on the head where an electrode may sit: the 10-10 system (Oostenveld and Praamstra 2001), earlobes left
// out. Names only; where a place lies is the picture's and the estimate's business.

export const positions = [
  'Nz',
  ...['Fp1', 'Fpz', 'Fp2'],
  ...['AF9', 'AF7', 'AF5', 'AF3', 'AF1', 'AFz', 'AF2', 'AF4', 'AF6', 'AF8', 'AF10'],
  ...['F9', 'F7', 'F5', 'F3', 'F1', 'Fz', 'F2', 'F4', 'F6', 'F8', 'F10'],
  ...['FT9', 'FT7', 'FC5', 'FC3', 'FC1', 'FCz', 'FC2', 'FC4', 'FC6', 'FT8', 'FT10'],
  ...['T9', 'T7', 'C5', 'C3', 'C1', 'Cz', 'C2', 'C4', 'C6', 'T8', 'T10'],
  ...['TP9', 'TP7', 'CP5', 'CP3', 'CP1', 'CPz', 'CP2', 'CP4', 'CP6', 'TP8', 'TP10'],
  ...['P9', 'P7', 'P5', 'P3', 'P1', 'Pz', 'P2', 'P4', 'P6', 'P8', 'P10'],
  ...['PO9', 'PO7', 'PO5', 'PO3', 'PO1', 'POz', 'PO2', 'PO4', 'PO6', 'PO8', 'PO10'],
  ...['O9', 'O1', 'Oz', 'O2', 'O10'],
  'Iz',
] as const;
export type Position = (typeof positions)[number];

const known: ReadonlySet<string> = new Set(positions);

/** Spelt exactly so: `Fp1`, not `FP1`. */
export function isPosition(name: string): name is Position {
  return known.has(name);
}
