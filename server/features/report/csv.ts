// Rows as CSV (RFC 4180). A text that a spreadsheet would run as a formula is led by an apostrophe.

type Cell = string | number | boolean | null;

const lineEnd = '\r\n';
/** Signs that make a spreadsheet calculate (common practice, OWASP on CSV injection). */
const startsFormula = /^[=+\-@\t\r]/;

function cellOf(value: Cell): string {
  if (value === null) return '';
  if (typeof value !== 'string') return String(value);
  const text = startsFormula.test(value) ? `'${value}` : value;
  return /[",\r\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
}

/** One line, its end included. */
export function csvLine(cells: readonly Cell[]): string {
  return cells.map(cellOf).join(',') + lineEnd;
}
