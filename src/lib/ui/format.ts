/**
 * Numbers as people read them: true minus, grouped thousands, a standard error to two significant figures and its value
 * to the same decimals. Pure text; the components set it.
 */

/** A number and its standard error as text, with the decimals they share. */
export interface QuantityText {
  value: string;
  /** Without the sign ±; null where the value is exact. */
  se: string | null;
  /** Places after the point; negative where the error rounds to tens or more. */
  decimals: number;
}

const superscripts: Record<string, string> = {
  '-': '⁻',
  '0': '⁰',
  '1': '¹',
  '2': '²',
  '3': '³',
  '4': '⁴',
  '5': '⁵',
  '6': '⁶',
  '7': '⁷',
  '8': '⁸',
  '9': '⁹'
};

const raised = (exponent: number): string => [...String(exponent)].map((c) => superscripts[c] ?? c).join('');

/**
 * A finite number with a fixed count of decimals, a true minus and commas between the thousands.
 * @param decimals places after the point; a negative count rounds to tens, hundreds …
 */
export function formatNumber(value: number, decimals: number): string {
  if (!Number.isFinite(value)) return '–';
  const step = decimals < 0 ? 10 ** -decimals : 1;
  const rounded = decimals < 0 ? Math.round(value / step) * step : value;
  const fixed = Math.abs(rounded).toFixed(Math.max(0, Math.min(decimals, 20)));
  const [whole = '0', part] = fixed.split('.');
  const grouped = whole.replace(/\B(?=(\d{3})+$)/g, ',');
  const sign = value < 0 && /[1-9]/.test(fixed) ? '−' : '';
  return sign + grouped + (part ? `.${part}` : '');
}

/** Decimals that leave a positive number with `figures` significant figures, after rounding (0.0996 counts as 0.10). */
export function decimalsFor(size: number, figures = 2): number {
  const rounded = Number(Math.abs(size).toPrecision(figures));
  return figures - 1 - Math.floor(Math.log10(rounded));
}

const withoutTrailingZeros = (text: string): string => (text.includes('.') ? text.replace(/\.?0+$/, '') : text);

/** Outside this span a number is set as mantissa and power of ten. */
const plainFrom = 1e-4;
const plainTo = 1e7;

/** A number by itself, to `figures` significant figures with trailing zeros dropped: 0.22, 178, −0.05, 3.1 × 10⁻⁷. */
export function formatExact(value: number, figures = 4): string {
  if (!Number.isFinite(value)) return '–';
  if (value === 0) return '0';
  const size = Math.abs(value);
  if (size < plainFrom || size >= plainTo) {
    const [mantissa = '0', exponent = '0'] = value.toExponential(Math.min(figures, 3) - 1).split('e');
    return `${withoutTrailingZeros(mantissa.replace('-', '−'))} × 10${raised(Number(exponent))}`;
  }
  const decimals = Math.max(0, decimalsFor(size, figures));
  return withoutTrailingZeros(formatNumber(value, decimals));
}

/**
 * A value with its standard error: the error to two significant figures, the value to the same decimals.
 * @param se null, undefined, zero or not finite: the value is set by itself, as exact.
 * @param decimals overrides the decimals of an exact value.
 */
export function formatQuantity(value: number, se?: number | null, decimals?: number): QuantityText {
  if (se === null || se === undefined || !Number.isFinite(se) || se <= 0) {
    const text = decimals === undefined ? formatExact(value) : formatNumber(value, decimals);
    return { value: text, se: null, decimals: decimalsOf(text) };
  }
  if (se < plainFrom / 10 || se >= plainTo) {
    return { value: formatExact(value), se: formatExact(se, 2), decimals: 0 };
  }
  const shared = decimalsFor(se);
  return { value: formatNumber(value, shared), se: formatNumber(se, shared), decimals: shared };
}

/** Decimals a formatted number shows. */
export function decimalsOf(text: string): number {
  const plain = text.split(' ')[0] ?? '';
  const point = plain.indexOf('.');
  return point < 0 ? 0 : plain.length - point - 1;
}

/** What has to follow a number, unseen, so that a column of them stands on the decimal point. */
export function pointPadding(text: string, columnDecimals: number): string {
  const own = decimalsOf(text);
  if (columnDecimals <= own) return '';
  return (own === 0 ? '.' : '') + '0'.repeat(columnDecimals - own);
}

/** A share of one as a natural frequency: "56 in 100", "under 1 in 100", "all 800". */
export function formatShare(share: number, outOf = 100): string {
  if (!Number.isFinite(share)) return '–';
  if (share >= 1) return `all ${formatNumber(outOf, 0)}`;
  if (share <= 0) return `none in ${formatNumber(outOf, 0)}`;
  const count = Math.round(share * outOf);
  if (count === 0) return `under 1 in ${formatNumber(outOf, 0)}`;
  if (count === outOf) return `over ${formatNumber(outOf - 1, 0)} in ${formatNumber(outOf, 0)}`;
  return `${formatNumber(count, 0)} in ${formatNumber(outOf, 0)}`;
}

/** A unit split into plain and raised pieces. */
export interface UnitPiece {
  text: string;
  raised: boolean;
}

/**
 * Raises the exponents of a unit: "yr-1", "yr^-1", "yr⁻¹" and "km2" all read as the same typed unit would.
 * A hyphen inside words ("moor-grass") stays a hyphen.
 */
export function unitPieces(unit: string): UnitPiece[] {
  const plain = unit.replace(/[⁻⁰¹²³⁴⁵⁶⁷⁸⁹]+/g, (run) =>
    [...run].map((c) => (c === '⁻' ? '-' : String('⁰¹²³⁴⁵⁶⁷⁸⁹'.indexOf(c)))).join('')
  );
  const pieces: UnitPiece[] = [];
  let from = 0;
  for (const match of plain.matchAll(/(?<=[A-Za-zµ)])(?:\^?([-−]\d+)|\^(\d+)|([23])(?![\dA-Za-z]))/g)) {
    if (match.index > from) pieces.push({ text: plain.slice(from, match.index), raised: false });
    pieces.push({ text: (match[1] ?? match[2] ?? match[3] ?? '').replace('-', '−'), raised: true });
    from = match.index + match[0].length;
  }
  if (from < plain.length) pieces.push({ text: plain.slice(from), raised: false });
  return pieces;
}

/** A unit as plain text for option lists and accessible names: "yr⁻¹", "km²". */
export function unitText(unit: string): string {
  return unitPieces(unit)
    .map((piece) => (piece.raised ? raised(Number(piece.text.replace('−', '-'))) : piece.text))
    .join('');
}

const dayFormat = new Intl.DateTimeFormat('en-GB', { day: 'numeric', month: 'long', year: 'numeric', timeZone: 'UTC' });
const timeFormat = new Intl.DateTimeFormat('en-GB', { hour: '2-digit', minute: '2-digit', timeZone: 'UTC' });

/** "3 March 2026", in UTC, so that server and browser agree. */
export function formatDate(at: Date | string | number): string {
  return dayFormat.format(new Date(at));
}

/** "3 March 2026, 14:32", in UTC. */
export function formatDateTime(at: Date | string | number): string {
  return `${formatDate(at)}, ${timeFormat.format(new Date(at))}`;
}
