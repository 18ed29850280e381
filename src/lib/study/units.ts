import type { TimeUnit } from '$lib/contracts/study';
import { daysIn, MINUS, raised } from './format';

/**
 * Unit codes in the UCUM manner and what they mean. A code is a product of known atoms, `.` for times and `/` for per:
 * `har/{ind}/a`, `a.{ind}/kg`. Nothing outside the table below is understood, and counted things (individuals, pairs), mass
 * and cover are kinds of their own: no factor leads from one to another.
 */

/** Exponents of what a unit measures. */
export interface Dimensions {
  time: number;
  area: number;
  mass: number;
  individuals: number;
  pairs: number;
  cover: number;
}
export interface Unit {
  dimensions: Dimensions;
  /** Size of the unit in years, hectares, kilograms, individuals, pairs, per cent of cover. */
  factor: number;
}

interface Atom {
  dimension: keyof Dimensions;
  factor: number;
  /** As people write it; `power` is the exponent that is part of the sign, as in m². */
  sign: string;
  power: number;
  word: string;
}

const time = (unit: TimeUnit, sign: string, word: string): Atom => ({
  dimension: 'time',
  factor: daysIn[unit] / daysIn.a,
  sign,
  power: 1,
  word
});

const atoms: Record<string, Atom> = {
  a: time('a', 'yr', 'year'),
  mo: time('mo', 'mo', 'month'),
  wk: time('wk', 'wk', 'week'),
  d: time('d', 'd', 'day'),
  h: { dimension: 'time', factor: 1 / (24 * daysIn.a), sign: 'h', power: 1, word: 'hour' },
  har: { dimension: 'area', factor: 1, sign: 'ha', power: 1, word: 'hectare' },
  km2: { dimension: 'area', factor: 100, sign: 'km', power: 2, word: 'square kilometre' },
  m2: { dimension: 'area', factor: 1e-4, sign: 'm', power: 2, word: 'square metre' },
  kg: { dimension: 'mass', factor: 1, sign: 'kg', power: 1, word: 'kilogram' },
  g: { dimension: 'mass', factor: 1e-3, sign: 'g', power: 1, word: 'gram' },
  t: { dimension: 'mass', factor: 1e3, sign: 't', power: 1, word: 'tonne' },
  '{ind}': { dimension: 'individuals', factor: 1, sign: 'ind', power: 1, word: 'individual' },
  '{pair}': { dimension: 'pairs', factor: 1, sign: 'pair', power: 1, word: 'pair' },
  '%': { dimension: 'cover', factor: 1, sign: '%', power: 1, word: 'per cent of cover' }
};

export const dimensionless: Dimensions = { time: 0, area: 0, mass: 0, individuals: 0, pairs: 0, cover: 0 };
const kinds = Object.keys(dimensionless) as (keyof Dimensions)[];

interface Term {
  atom: Atom;
  exponent: 1 | -1;
}

/** The atoms of a code in order, or null for a code outside the table. */
function termsOf(code: string): Term[] | null {
  if (code === '1') return [];
  const pieces = code.match(/[./]?[^./]+/g);
  if (!pieces || pieces.join('') !== code) return null;
  const terms: Term[] = [];
  for (const [index, piece] of pieces.entries()) {
    const operator = piece[0] === '/' || piece[0] === '.' ? piece[0] : '';
    if (index === 0 && operator === '.') return null;
    const name = operator ? piece.slice(1) : piece;
    if (name === '1' && index === 0 && operator === '') continue;
    const atom = Object.hasOwn(atoms, name) ? atoms[name] : undefined;
    if (!atom) return null;
    terms.push({ atom, exponent: operator === '/' ? -1 : 1 });
  }
  return terms;
}

/** Meaning of a code, or null when it is not one of ours. Yearly shares and multipliers (`%/a`) are not plain units. */
export function parseUnit(code: string): Unit | null {
  const terms = termsOf(code);
  if (!terms) return null;
  const unit: Unit = { dimensions: { ...dimensionless }, factor: 1 };
  for (const { atom, exponent } of terms) {
    unit.dimensions[atom.dimension] += exponent;
    unit.factor *= atom.factor ** exponent;
  }
  return unit;
}

/** Product of units raised to whole powers. */
export function combine(...factors: readonly (readonly [Unit, number])[]): Unit {
  const result: Unit = { dimensions: { ...dimensionless }, factor: 1 };
  for (const [unit, power] of factors) {
    for (const kind of kinds) result.dimensions[kind] += unit.dimensions[kind] * power;
    result.factor *= unit.factor ** power;
  }
  return result;
}

/** True when two units measure the same thing; `ignoring` leaves one kind out of the comparison. */
export function sameDimensions(a: Dimensions, b: Dimensions, ignoring?: keyof Dimensions): boolean {
  return kinds.every((kind) => kind === ignoring || a[kind] === b[kind]);
}

/**
 * Writes a product of codes as one code with the atoms that cancel left out: `a` × `{ind}/har` ÷ `kg/har` → `a.{ind}/kg`.
 * @param factors code and power, in the order in which they should be read.
 */
export function composeCode(factors: readonly (readonly [string, 1 | -1])[]): string {
  const exponents = new Map<string, number>();
  for (const [code, power] of factors) {
    if (code === '1') continue;
    for (const piece of code.match(/[./]?[^./]+/g) ?? []) {
      const isDivided = piece.startsWith('/');
      const name = piece.replace(/^[./]/, '');
      exponents.set(name, (exponents.get(name) ?? 0) + (isDivided ? -power : power));
    }
  }
  const above: string[] = [];
  const below: string[] = [];
  for (const [name, exponent] of exponents) {
    for (let i = 0; i < Math.abs(exponent); i += 1) (exponent > 0 ? above : below).push(name);
  }
  const code = above.join('.') + below.map((name) => `/${name}`).join('');
  return code === '' ? '1' : code;
}

/** A piece of a unit as set on a page; `raised` pieces are exponents (`<sup>`). All text is safe to print as it is. */
export interface UnitPart {
  text: string;
  raised?: boolean;
}

const specialDisplays: Record<string, string> = {
  '%/': '% lost',
  '%+/': '% growth',
  '{lambda}/': 'times',
  '%{kept}/': '% surviving'
};

function specialDisplay(code: string): string | null {
  const match = /^(%\/|%\+\/|\{lambda\}\/|%\{kept\}\/|\{doubling\}\.|\{halving\}\.)(a|mo|wk|d)$/.exec(code);
  if (!match) return null;
  const atom = atoms[match[2] ?? ''];
  const lead = match[1] ?? '';
  if (!atom) return null;
  if (lead === '{doubling}.') return `${atom.word}s to double`;
  if (lead === '{halving}.') return `${atom.word}s to halve`;
  return `${specialDisplays[lead]} a ${atom.word}`;
}

/**
 * A unit code as people write it: `/a` → yr⁻¹, `{ind}/har` → ind/ha, `har/{ind}/a` → ha ind⁻¹ yr⁻¹, `%/a` → % lost a year.
 * @returns pieces for setting exponents, the same as plain text with raised characters, and nothing for `1`.
 */
export function displayUnit(code: string): { parts: UnitPart[]; text: string } {
  const special = specialDisplay(code);
  if (special !== null) return { parts: [{ text: special }], text: special };
  const terms = termsOf(code);
  if (!terms) return { parts: [{ text: code }], text: code };
  const above = terms.filter((term) => term.exponent === 1);
  const below = terms.filter((term) => term.exponent === -1);
  const parts: UnitPart[] = [];
  const push = (text: string, exponent: number) => {
    parts.push({ text });
    if (exponent !== 1) parts.push({ text: String(exponent).replace('-', MINUS), raised: true });
  };
  if (above.length <= 1 && below.length === 1 && above.length === 1) {
    const [top] = above;
    const [bottom] = below;
    if (top && bottom) {
      push(top.atom.sign, top.atom.power);
      push(`/${bottom.atom.sign}`, bottom.atom.power);
    }
  } else {
    for (const [index, { atom, exponent }] of [...above, ...below].entries()) {
      push((index > 0 ? ' ' : '') + atom.sign, atom.power * exponent);
    }
  }
  const merged = mergePlain(parts);
  return { parts: merged, text: merged.map((part) => (part.raised ? raised(part.text) : part.text)).join('') };
}

function mergePlain(parts: readonly UnitPart[]): UnitPart[] {
  const merged: UnitPart[] = [];
  for (const part of parts) {
    const last = merged[merged.length - 1];
    if (last && !last.raised && !part.raised) last.text += part.text;
    else merged.push({ ...part });
  }
  return merged;
}

/** What a unit counts or weighs, in a word, for refusals: `mass (kilograms)`, `individuals`, `pairs`, `cover`. */
export function measuredThing(dimensions: Dimensions): string {
  if (dimensions.mass !== 0) return 'mass';
  if (dimensions.individuals !== 0) return 'individuals';
  if (dimensions.pairs !== 0) return 'pairs';
  if (dimensions.cover !== 0) return 'per cent of cover';
  return 'no amount';
}
