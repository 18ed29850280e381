import type { Ring } from './ring';

/** An exact fraction, d > 0, not necessarily in lowest terms. */
export interface Fraction {
  n: bigint;
  d: bigint;
}

const ZERO: Fraction = { n: 0n, d: 1n };

/** The decimal number that a person wrote: the shortest one that reads back as this double. */
export function decimalFraction(value: number): Fraction {
  const [mantissa = '0', exponent = '0'] = String(value).split('e');
  const [whole = '0', decimals = ''] = mantissa.split('.');
  const power = Number(exponent) - decimals.length;
  const n = BigInt(whole + decimals);
  return power >= 0 ? { n: n * 10n ** BigInt(power), d: 1n } : { n, d: 10n ** BigInt(-power) };
}

function combine(a: Fraction, b: Fraction, sign: 1n | -1n): Fraction {
  if (b.n === 0n) return a;
  if (a.d === b.d) return { n: a.n + sign * b.n, d: a.d };
  return { n: a.n * b.d + sign * b.n * a.d, d: a.d * b.d };
}

/** Exact arithmetic on the decimal numbers of a document: slow, and asked only where intervals cannot decide. */
export const FRACTION: Ring<Fraction> = {
  zero: ZERO,
  one: { n: 1n, d: 1n },
  of: decimalFraction,
  add: (a, b) => combine(a, b, 1n),
  sub: (a, b) => combine(a, b, -1n),
  mul: (a, b) => (a.n === 0n || b.n === 0n ? ZERO : { n: a.n * b.n, d: a.d * b.d }),
  div: (a, b) => (b.n < 0n ? { n: -a.n * b.d, d: -a.d * b.n } : { n: a.n * b.d, d: a.d * b.n }),
  neg: (a) => ({ n: -a.n, d: a.d }),
  isZero: (a) => a.n === 0n
};
