// The invented people of the demo and what becomes of each. Names and addresses are made up; telephone numbers come from the ranges that
// Ofcom keeps for fiction. Data only: what they do, story.ts does by the real actions.

/** What becomes of a person by the time the demo opens. */
export type Fate =
  | 'invited'
  | 'training'
  | 'smooth'
  | 'drifting'
  | 'headaches'
  | 'skin'
  | 'blister'
  | 'amended'
  | 'finished'
  | 'withdrawn'
  | 'paused'
  | 'weak_contact'
  | 'second_signature'
  | 'done_today';

export interface CastMember {
  name: string;
  site: 'LS' | 'MR';
  fate: Fate;
  /** How many days ago the course began; for those without a course, when they were enrolled. */
  sinceDays: number;
  born: string;
  /** A helper by this name joins, and the prescription is assisted when said. */
  caregiver?: { name: string; email: string };
  assisted?: true;
  montage?: readonly [anode: string, cathode: string];
}

const weeks = 20;

export const cast: readonly CastMember[] = [
  // Weeks of history.
  { name: 'Ines Marlow', site: 'LS', fate: 'smooth', sinceDays: weeks, born: '1984-03-02', caregiver: { name: 'Tam Marlow', email: 'caregiver@harrowmere.example' } },
  { name: 'Wren Asquith', site: 'LS', fate: 'headaches', sinceDays: weeks - 2, born: '1991-07-19' },
  { name: 'Halden Brisk', site: 'LS', fate: 'drifting', sinceDays: weeks, born: '1969-11-30', caregiver: { name: 'Nessa Brisk', email: 'nessa.brisk@harrowmere.example' } },
  { name: 'Maud Ferring', site: 'LS', fate: 'finished', sinceDays: weeks + 4, born: '1955-01-14' },
  { name: 'Oriel Tamsin', site: 'LS', fate: 'amended', sinceDays: weeks - 1, born: '1978-05-23' },
  { name: 'Bram Ellory', site: 'LS', fate: 'smooth', sinceDays: weeks - 3, born: '1988-12-08' },
  { name: 'Linnet Crane', site: 'LS', fate: 'done_today', sinceDays: weeks - 4, born: '1973-09-27' },
  { name: 'Sefton Quay', site: 'MR', fate: 'smooth', sinceDays: weeks, born: '1981-02-11', montage: ['F4', 'F3'] },
  { name: 'Ottilie Marsh', site: 'MR', fate: 'drifting', sinceDays: weeks - 2, born: '1966-06-05', montage: ['F4', 'F3'] },
  { name: 'Corby Lanthorn', site: 'MR', fate: 'amended', sinceDays: weeks - 3, born: '1994-10-16', montage: ['F4', 'F3'] },
  { name: 'Isaura Venn', site: 'MR', fate: 'finished', sinceDays: weeks + 3, born: '1959-04-21', montage: ['F4', 'F3'] },
  { name: 'Jory Penhale', site: 'MR', fate: 'done_today', sinceDays: weeks - 5, born: '1986-08-03', montage: ['F4', 'F3'], assisted: true, caregiver: { name: 'Elowen Penhale', email: 'elowen.penhale@harrowmere.example' } },
  // Days of history.
  { name: 'Tobiah Renn', site: 'LS', fate: 'blister', sinceDays: 5, born: '1990-03-29' },
  { name: 'Pell Okoro', site: 'LS', fate: 'second_signature', sinceDays: 2, born: '1976-12-12' },
  { name: 'Sunniva Ashdown', site: 'LS', fate: 'weak_contact', sinceDays: 4, born: '1983-07-07' },
  { name: 'Emrys Vane', site: 'LS', fate: 'skin', sinceDays: 5, born: '1971-01-25' },
  { name: 'Isolde Farrow', site: 'LS', fate: 'smooth', sinceDays: 4, born: '1992-11-02' },
  { name: 'Gethin Moor', site: 'LS', fate: 'smooth', sinceDays: 3, born: '1968-05-18' },
  { name: 'Petra Lowell', site: 'LS', fate: 'paused', sinceDays: 6, born: '1980-09-09' },
  { name: 'Anselm Drey', site: 'LS', fate: 'withdrawn', sinceDays: 7, born: '1963-02-28' },
  { name: 'Cressida Holt', site: 'LS', fate: 'done_today', sinceDays: 3, born: '1995-06-30' },
  { name: 'Ferris Oakhurst', site: 'LS', fate: 'headaches', sinceDays: 4, born: '1987-04-04' },
  { name: 'Mabyn Tregarth', site: 'MR', fate: 'smooth', sinceDays: 4, born: '1979-10-10', montage: ['F4', 'F3'] },
  { name: 'Rafe Sturmer', site: 'MR', fate: 'skin', sinceDays: 5, born: '1985-03-15', montage: ['F4', 'F3'] },
  { name: 'Delphine Rook', site: 'MR', fate: 'withdrawn', sinceDays: 6, born: '1974-08-22', montage: ['F4', 'F3'] },
  { name: 'Osric Fallow', site: 'MR', fate: 'paused', sinceDays: 5, born: '1961-12-01', montage: ['F4', 'F3'] },
  { name: 'Thea Wilding', site: 'MR', fate: 'smooth', sinceDays: 3, born: '1998-01-19', montage: ['F4', 'F3'] },
  { name: 'Lorcan Ashby', site: 'MR', fate: 'done_today', sinceDays: 3, born: '1970-05-06', montage: ['F4', 'F3'] },
  { name: 'Nerys Coldwell', site: 'LS', fate: 'smooth', sinceDays: 2, born: '1989-09-14' },
  { name: 'Barnaby Sloe', site: 'LS', fate: 'smooth', sinceDays: 2, born: '1965-07-27' },
  // Not there yet.
  { name: 'Corin Vale', site: 'LS', fate: 'training', sinceDays: 3, born: '1982-02-17' },
  { name: 'Ada Thornby', site: 'LS', fate: 'training', sinceDays: 2, born: '1957-10-31' },
  { name: 'Hugo Merrin', site: 'MR', fate: 'training', sinceDays: 4, born: '1993-06-12' },
  { name: 'Saskia Brough', site: 'MR', fate: 'training', sinceDays: 1, born: '1977-03-08' },
  { name: 'Evander Pike', site: 'LS', fate: 'training', sinceDays: 1, born: '1996-11-23' },
  { name: 'Linus Carrow', site: 'LS', fate: 'invited', sinceDays: 2, born: '1972-04-26' },
  { name: 'Merle Stanhope', site: 'LS', fate: 'invited', sinceDays: 1, born: '1990-12-30' },
  { name: 'Yorick Dale', site: 'MR', fate: 'invited', sinceDays: 1, born: '1984-08-11' },
  { name: 'Philippa Gorse', site: 'MR', fate: 'invited', sinceDays: 1, born: '1967-01-09' },
  { name: 'Tamsin Ludlow', site: 'LS', fate: 'smooth', sinceDays: 6, born: '1975-02-03' },
  { name: 'Rowan Achter', site: 'LS', fate: 'drifting', sinceDays: 9, born: '1981-09-21' },
  { name: 'Clemence Dyer', site: 'MR', fate: 'smooth', sinceDays: 5, born: '1969-06-17', montage: ['F4', 'F3'] },
];

/** Days that the demo's story is long: the longest course and the day before it. */
export const storyDays = Math.max(...cast.map(({ sinceDays }) => sinceDays)) + 1;

/** `Ines Marlow` → `ines.marlow@harrowmere.example` */
export function addressOf({ name }: { name: string }): string {
  return `${name.toLowerCase().replace(/[^a-z]+/g, '.')}@harrowmere.example`;
}

/** A number of its own for each, from the range that Ofcom keeps for fiction (020 7946 0000 to 0999). */
export function phoneOf(index: number): string {
  return `020 7946 0${String(300 + index).padStart(3, '0')}`;
}
