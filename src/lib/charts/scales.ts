/** Scales, ticks and the numbers set beside them. */
import type { ScaleKind } from './types';

/** Maps a value of the domain to a position in pixels; the inverse maps it back. */
export interface Scale {
  (value: number): number;
  invert(position: number): number;
  kind: ScaleKind;
  domain: readonly [number, number];
  range: readonly [number, number];
}

const MINUS = '\u2212';
const THIN_SPACE = '\u2009';

/** @returns a scale taking `d0` to `r0` and `d1` to `r1` in proportion. A domain of no width maps to `r0`. */
export function linearScale(d0: number, d1: number, r0: number, r1: number): Scale {
  const slope = d1 === d0 ? 0 : (r1 - r0) / (d1 - d0);
  const map = (value: number) => r0 + (value - d0) * slope;
  const invert = (position: number) => (slope === 0 ? d0 : d0 + (position - r0) / slope);
  return Object.assign(map, { invert, kind: 'linear' as const, domain: [d0, d1] as const, range: [r0, r1] as const });
}

/** @returns a scale in equal ratios. Both ends must be positive; values at or below 0 map to the lower end. */
export function logScale(d0: number, d1: number, r0: number, r1: number): Scale {
  const inner = linearScale(Math.log(d0), Math.log(d1), r0, r1);
  const map = (value: number) => inner(Math.log(Math.max(value, d0)));
  const invert = (position: number) => Math.exp(inner.invert(position));
  return Object.assign(map, { invert, kind: 'log' as const, domain: [d0, d1] as const, range: [r0, r1] as const });
}

/** The step of 1, 2 or 5 times a power of ten that cuts `span` into about `count` parts. */
export function niceStep(span: number, count: number): number {
  const raw = span / Math.max(1, count);
  const power = 10 ** Math.floor(Math.log10(raw));
  const lead = raw / power;
  const factor = lead <= Math.SQRT2 ? 1 : lead <= Math.sqrt(10) ? 2 : lead <= Math.sqrt(50) ? 5 : 10;
  return factor * power;
}

/**
 * Round values inside [min, max], about `count` of them, in rising order.
 * Each is computed from an integer so that 0.1 + 0.2 never shows. Empty when the interval is not finite or has no width.
 */
export function niceTicks(min: number, max: number, count = 5): number[] {
  if (!(max > min) || !Number.isFinite(min) || !Number.isFinite(max)) return [];
  const step = niceStep(max - min, count);
  const slack = 1e-9;
  const from = Math.ceil(min / step - slack);
  const to = Math.floor(max / step + slack);
  const decimals = decimalsOfStep(step);
  return Array.from({ length: to - from + 1 }, (_, i) => Number(((from + i) * step).toFixed(decimals)) + 0);
}

/** Powers of ten inside [min, max]; with fewer than three, also 2 and 5 times each. */
export function logTicks(min: number, max: number): number[] {
  if (!(min > 0) || !(max > min)) return [];
  const pick = (leads: number[]) => {
    const out: number[] = [];
    for (let e = Math.floor(Math.log10(min)); e <= Math.ceil(Math.log10(max)); e += 1) {
      for (const lead of leads) {
        const value = Number(`${lead}e${e}`);
        if (value >= min * (1 - 1e-9) && value <= max * (1 + 1e-9)) out.push(value);
      }
    }
    return out;
  };
  const decades = pick([1]);
  if (decades.length > 6) {
    const stride = Math.ceil(decades.length / 5);
    return decades.filter((_, i) => i % stride === 0);
  }
  return decades.length >= 3 ? decades : pick([1, 2, 5]);
}

/** The end of an axis that starts at 0 and must show `max`: the next tick, or half of one where that is enough. */
export function niceCeiling(max: number, count = 5): number {
  if (!(max > 0) || !Number.isFinite(max)) return 1;
  const half = niceStep(max, count) / 2;
  return Number((Math.ceil(max / half - 1e-9) * half).toPrecision(12));
}

function decimalsOfStep(step: number): number {
  return Math.min(100, Math.max(0, -Math.floor(Math.log10(step) + 1e-9)));
}

/** Digits in groups of three from five digits on, with a true minus: "−12 400" (thin space), "2025". */
export function groupDigits(plain: string): string {
  const sign = plain.startsWith('-') ? MINUS : '';
  const [whole = '', fraction] = plain.replace('-', '').split('.');
  const grouped = whole.length < 5 ? whole : whole.replace(/\B(?=(\d{3})+$)/g, THIN_SPACE);
  return sign + grouped + (fraction ? `.${fraction}` : '');
}

/** One decimals rule for a whole axis, so that its labels line up. Very large or small axes are set as powers of ten. */
export function tickFormat(ticks: readonly number[]): (value: number) => string {
  const largest = Math.max(...ticks.map(Math.abs), 0);
  const sorted = [...ticks].sort((a, b) => a - b);
  const gaps = sorted.slice(1).map((value, i) => value - (sorted[i] ?? 0));
  const step = Math.min(...gaps, largest || 1);
  if (largest >= 1e7 || (largest > 0 && largest < 1e-4)) return (value) => formatPower(value);
  const decimals = decimalsOfStep(step);
  return (value) => groupDigits(value.toFixed(decimals));
}

/** Log axes span decades: each label gets the decimals it needs itself. */
export function logTickFormat(value: number): string {
  if (value >= 1e7 || value < 1e-4) return formatPower(value);
  return groupDigits(value.toFixed(decimalsOfStep(value)));
}

/**
 * A value to `digits` significant figures, without an exponent where that stays readable: "0.00420", "1.2 × 10⁹". Whole
 * numbers are given whole, as a count is.
 */
export function formatValue(value: number, digits = 3): string {
  if (!Number.isFinite(value)) return value > 0 ? 'no limit' : 'not a number';
  if (value === 0) return '0';
  const size = Math.abs(value);
  if (size >= 1e7 || size < 1e-4) return formatPower(value, digits);
  if (Number.isInteger(value)) return groupDigits(String(value));
  const decimals = Math.max(0, digits - 1 - Math.floor(Math.log10(size)));
  return groupDigits(value.toFixed(Math.min(decimals, 12)));
}

const SUPERSCRIPT: Record<string, string> = {
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

function formatPower(value: number, digits = 3): string {
  if (value === 0) return '0';
  const [lead = '', exponent = '0'] = value.toExponential(digits - 1).split('e');
  const mantissa = lead.includes('.') ? lead.replace(/0+$/, '').replace(/\.$/, '') : lead;
  const raised = [...String(Number(exponent))].map((digit) => SUPERSCRIPT[digit] ?? digit).join('');
  return `${mantissa.replace('-', MINUS)}${THIN_SPACE}×${THIN_SPACE}10${raised}`;
}

/** "Noble crayfish per 100 m of bank", "Goats, head": a unit that is a phrase follows bare, any other after a comma. */
export function withUnit(label: string, unit: string): string {
  if (!unit) return label;
  return /^(per|in|of|a|an)\b/.test(unit) ? `${label} ${unit}` : `${label}, ${unit}`;
}

/** What must follow a number, invisibly, so that a column lines up on the decimal point: "", "0", ".00". */
export function decimalFill(text: string, decimals: number): string {
  const own = text.includes('.') ? text.length - text.indexOf('.') - 1 : 0;
  if (own >= decimals) return '';
  return (own === 0 ? '.' : '') + '0'.repeat(decimals - own);
}

/** Most decimals among the texts of a column. */
export function decimalsOf(texts: readonly string[]): number {
  return Math.max(
    0,
    ...texts.map((text) => (text.includes('.') && !text.includes('×') ? text.length - text.indexOf('.') - 1 : 0))
  );
}
