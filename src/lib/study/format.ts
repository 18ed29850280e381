import type { TimeUnit } from '$lib/contracts/study';

/**
 * Numbers, shares, spans of time and dates as the product writes them: a true minus, digits in threes parted by a narrow
 * space, a standard error to two significant figures with its value to the same decimals.
 */

export const MINUS = '\u2212';
/** Narrow no-break space: parts thousands, and a value from its unit. */
export const NARROW = '\u202f';
/** No-break space, on both sides of ±. */
export const NBSP = '\u00a0';

const superscripts: Record<string, string> = {
  '0': '⁰',
  '1': '¹',
  '2': '²',
  '3': '³',
  '4': '⁴',
  '5': '⁵',
  '6': '⁶',
  '7': '⁷',
  '8': '⁸',
  '9': '⁹',
  '-': '⁻',
  [MINUS]: '⁻'
};

/** Digits and a minus as raised characters: `-12` → `⁻¹²`. */
export function raised(text: string | number): string {
  return [...String(text)].map((character) => superscripts[character] ?? character).join('');
}

/** Typographic dress for a plain decimal string such as `-12345.60`. */
function dress(plain: string): string {
  const negative = plain.startsWith('-');
  const [whole = '0', decimals] = plain.replace('-', '').split('.');
  const grouped = whole.replace(/\B(?=(\d{3})+(?!\d))/g, NARROW);
  const isZero = !/[1-9]/.test(plain);
  return (negative && !isZero ? MINUS : '') + grouped + (decimals === undefined ? '' : `.${decimals}`);
}

/** Rounds to `digits` significant figures, as a number. */
export function roundTo(value: number, digits: number): number {
  return value === 0 || !Number.isFinite(value) ? value : Number(value.toPrecision(digits));
}

/** A number with a fixed count of decimals, for columns aligned on the point. */
export function formatFixed(value: number, decimals: number): string {
  if (!Number.isFinite(value)) return formatNotFinite(value);
  // toFixed turns to exponents above 1e21; nothing on a page is that large except by accident.
  if (Math.abs(value) >= 1e15) return scientific(value, 3);
  return dress(value.toFixed(Math.max(0, Math.min(12, decimals))));
}

function formatNotFinite(value: number): string {
  return Number.isNaN(value) ? 'not a number' : value > 0 ? 'without limit' : `${MINUS}∞`;
}

function scientific(value: number, significant: number): string {
  const [mantissa = '0', exponent = '0'] = value.toExponential(significant - 1).split('e');
  const short = mantissa.includes('.') ? mantissa.replace(/\.?0+$/, '') : mantissa;
  return `${dress(short)}${NBSP}×${NBSP}10${raised(Number(exponent))}`;
}

/**
 * A number in a sentence: three significant figures (four from 1 000 up), trailing zeros dropped, powers of ten only for
 * what is below 0.0001 or from 10⁹ up.
 * @param significant overrides the number of figures.
 */
export function formatNumber(value: number, significant?: number): string {
  if (!Number.isFinite(value)) return formatNotFinite(value);
  if (value === 0) return '0';
  const size = Math.abs(value);
  const figures = significant ?? (size >= 1000 ? 4 : 3);
  if (size < 1e-4 || size >= 1e9) return scientific(value, figures);
  const rounded = roundTo(value, figures);
  const magnitude = Math.floor(Math.log10(Math.abs(rounded)));
  const plain = rounded.toFixed(Math.max(0, figures - 1 - magnitude));
  return dress(plain.includes('.') ? plain.replace(/\.?0+$/, '') : plain);
}

/** Decimals that show `significant` figures of a number: 0.0602 → 3 for two figures; 134 → 0. */
export function decimalsFor(value: number, significant = 2): number {
  if (value === 0 || !Number.isFinite(value)) return 0;
  const rounded = roundTo(Math.abs(value), significant);
  return Math.max(0, Math.min(12, significant - 1 - Math.floor(Math.log10(rounded))));
}

/**
 * A value and its standard error, the error to two significant figures and the value to the same place.
 * @returns `se` null for a value without one, which is then written to four significant figures.
 */
export function formatWithSE(value: number, se: number | null): { value: string; se: string | null; decimals: number } {
  if (se === null || !(se > 0) || !Number.isFinite(se)) {
    return {
      value: formatNumber(value, 4),
      se: se === 0 ? '0' : null,
      decimals: decimalsFor(value, 4)
    };
  }
  const decimals = decimalsFor(se, 2);
  // From 100 up, two figures of the error end left of the point: round both to that place.
  const place = se >= 99.5 ? 10 ** (Math.floor(Math.log10(roundTo(se, 2))) - 1) : 1;
  const round = (n: number) => Math.round(n / place) * place;
  const tiny = se < 1e-9;
  if (tiny) return { value: formatNumber(value, 6), se: scientific(se, 2), decimals };
  return {
    value: formatFixed(place > 1 ? round(value) : value, decimals),
    se: formatFixed(place > 1 ? round(se) : se, decimals),
    decimals
  };
}

/** `1.06 ± 0.16` as one string. */
export function plusMinus(value: number, se: number | null): string {
  const shown = formatWithSE(value, se);
  return shown.se === null ? shown.value : `${shown.value}${NBSP}±${NBSP}${shown.se}`;
}

/** A share between 0 and 1 in natural frequencies: `56 in 100`; never `0 in 100` for what can happen. */
export function inHundred(share: number): string {
  if (share <= 0) return '0 in 100';
  if (share >= 1) return '100 in 100';
  if (share < 0.005) return 'fewer than 1 in 100';
  if (share >= 0.995) return 'more than 99 in 100';
  return `${Math.round(share * 100)} in 100`;
}

/** A share between 0 and 1 in per cent, three significant figures: `31.2 %`. */
export function formatPercent(share: number, significant = 3): string {
  return `${formatNumber(share * 100, significant)}${NARROW}%`;
}

export const timeNames: Record<TimeUnit, { one: string; many: string; per: string; adjective: string }> = {
  a: { one: 'year', many: 'years', per: 'a year', adjective: 'year' },
  mo: { one: 'month', many: 'months', per: 'a month', adjective: 'month' },
  wk: { one: 'week', many: 'weeks', per: 'a week', adjective: 'week' },
  d: { one: 'day', many: 'days', per: 'a day', adjective: 'day' }
};

/** Days in each unit: a Julian year, a twelfth of it, seven days. */
export const daysIn: Record<TimeUnit, number> = { a: 365.25, mo: 30.4375, wk: 7, d: 1 };

/**
 * A span of time in words. Keeps the study's own unit where the number is at least 1 and readable in it, else moves to a
 * smaller or larger unit: 0.73 years → `8.8 months`, 281 days stay `281 days`, 2 000 days → `5.5 years`.
 */
export function formatDuration(value: number, unit: TimeUnit): string {
  if (!Number.isFinite(value)) return 'for ever';
  const days = value * daysIn[unit];
  const size = Math.abs(days);
  let chosen: TimeUnit = unit;
  if (Math.abs(value) < 1) chosen = size >= daysIn.mo ? 'mo' : size >= 3 * daysIn.wk ? 'wk' : 'd';
  else if (unit !== 'a' && size > 1000) chosen = 'a';
  if (chosen === 'd' && size > 0 && size < 1) {
    const hours = size * 24;
    return hours < 1
      ? `${formatNumber(hours * 60, 2)} minutes`
      : `${formatNumber(hours, 2)} ${hours === 1 ? 'hour' : 'hours'}`;
  }
  const amount = days / daysIn[chosen];
  const text = formatNumber(amount, Math.abs(amount) >= 100 ? 3 : 2);
  return `${text} ${text === '1' ? timeNames[chosen].one : timeNames[chosen].many}`;
}

const months = [
  'January',
  'February',
  'March',
  'April',
  'May',
  'June',
  'July',
  'August',
  'September',
  'October',
  'November',
  'December'
];

/**
 * `3 March 2026`. A plain ISO date is never shifted by a zone; an instant is shown in UTC.
 * @param date `2026-03-03`, an ISO instant, or a Date.
 */
export function formatDate(date: string | Date): string {
  const iso = typeof date === 'string' ? date : date.toISOString();
  const match = /^(\d{4})-(\d{2})-(\d{2})/.exec(iso);
  const month = match ? months[Number(match[2]) - 1] : undefined;
  if (!match || month === undefined) return iso;
  return `${Number(match[3])} ${month} ${match[1]}`;
}

/** `a`, `a and b`, `a, b and c`. */
export function listWords(words: readonly string[], joiner = 'and'): string {
  if (words.length < 2) return words[0] ?? '';
  return `${words.slice(0, -1).join(', ')} ${joiner} ${words[words.length - 1]}`;
}

/** First letter raised, for a name that opens a sentence. */
export function sentenceCase(text: string): string {
  return text === '' ? text : text[0]?.toUpperCase() + text.slice(1);
}

/** Small numbers in words up to twelve. */
export function countWord(n: number): string {
  const words = 'no one two three four five six seven eight nine ten eleven twelve'.split(' ');
  return words[n] ?? formatNumber(n);
}
