/** Tables as text by RFC 4180: CRLF after every row, quotes where a field needs them, a dot in decimals. */

export type Cell = string | number | boolean | null;

/** A field is quoted when it holds a comma, a quote, a line break, or space at an end that a reader might trim. */
function fieldOf(cell: Cell): string {
  if (cell === null) return '';
  if (typeof cell === 'number') return Number.isFinite(cell) ? String(cell) : '';
  const text = String(cell);
  return /[",\r\n]|^\s|\s$/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
}

/** Rows to CSV. Numbers are written with all their digits, so that reading them back gives the same numbers. */
export function toCsv(rows: Iterable<readonly Cell[]>): string {
  let text = '';
  for (const row of rows) text += `${row.map(fieldOf).join(',')}\r\n`;
  return text;
}

/** A file name of letters, digits, dots and hyphens only: `Goats & broom` → `goats-broom`. */
export function fileStem(words: string, longest = 60): string {
  const plain = words
    .normalize('NFKD')
    .replace(/[\u0300-\u036f]/g, '')
    .toLowerCase()
    .replace(/[^a-z0-9]+/g, '-')
    .replace(/^-+|-+$/g, '');
  return plain.slice(0, longest).replace(/-+$/, '') || 'study';
}
