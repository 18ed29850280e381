/** A small expression tree: what formulas on the screen and exporters read, and what is differentiated for them. */

export type Expression =
  | { kind: 'number'; value: number }
  | { kind: 'parameter'; symbol: string; value: number }
  | { kind: 'state'; which: 'first' | 'second' }
  | { kind: 'sum'; terms: readonly Expression[] }
  | { kind: 'product'; factors: readonly Expression[] }
  | { kind: 'quotient'; top: Expression; bottom: Expression }
  | { kind: 'power'; base: Expression; exponent: number }
  | { kind: 'negative'; of: Expression };

export const X: Expression = { kind: 'state', which: 'first' };
export const Y: Expression = { kind: 'state', which: 'second' };
const NOTHING: Expression = { kind: 'number', value: 0 };
export const ONE: Expression = { kind: 'number', value: 1 };

export function number(value: number): Expression {
  return value < 0 ? { kind: 'negative', of: { kind: 'number', value: -value } } : { kind: 'number', value };
}

export function parameter(symbol: string, value: number): Expression {
  return { kind: 'parameter', symbol, value };
}

export function isNothing(e: Expression): boolean {
  return e.kind === 'number' && e.value === 0;
}

const isOne = (e: Expression) => e.kind === 'number' && e.value === 1;

export function negative(of: Expression): Expression {
  if (isNothing(of)) return of;
  if (of.kind === 'sum') return sum(...of.terms.map(negative));
  return of.kind === 'negative' ? of.of : { kind: 'negative', of };
}

/** Sum without zeros and without sums inside; equal terms are not collected. */
export function sum(...terms: Expression[]): Expression {
  const flat = terms.flatMap((term) => (term.kind === 'sum' ? term.terms : [term])).filter((term) => !isNothing(term));
  if (flat.length === 0) return NOTHING;
  return flat.length === 1 ? flat[0]! : { kind: 'sum', terms: flat };
}

/** Order in which factors are written: parameters, x, y, brackets. */
function rank(factor: Expression): number {
  if (factor.kind === 'power') return rank(factor.base);
  if (factor.kind === 'parameter') return 0;
  if (factor.kind === 'state') return factor.which === 'first' ? 1 : 2;
  return 3;
}

/** Product with one number in front, signs pulled out, equal factors as powers. */
export function product(...factors: Expression[]): Expression {
  let coefficient = 1;
  const rest: Expression[] = [];
  const take = (factor: Expression): void => {
    if (factor.kind === 'product') factor.factors.forEach(take);
    else if (factor.kind === 'negative') {
      coefficient = -coefficient;
      take(factor.of);
    } else if (factor.kind === 'number') coefficient *= factor.value;
    else {
      const [base, exponent] = factor.kind === 'power' ? [factor.base, factor.exponent] : [factor, 1];
      const at = rest.findIndex((known) => same(known.kind === 'power' ? known.base : known, base));
      if (at < 0) rest.push(factor);
      else {
        const known = rest[at]!;
        rest[at] = power(base, (known.kind === 'power' ? known.exponent : 1) + exponent);
      }
    }
  };
  factors.forEach(take);
  if (coefficient === 0) return NOTHING;
  const size = Math.abs(coefficient);
  rest.sort((p, q) => rank(p) - rank(q));
  const all = size === 1 && rest.length > 0 ? rest : [{ kind: 'number', value: size } as const, ...rest];
  const positive: Expression = all.length === 1 ? all[0]! : { kind: 'product', factors: all };
  return coefficient < 0 ? negative(positive) : positive;
}

export function quotient(top: Expression, bottom: Expression): Expression {
  if (isNothing(top) || isOne(bottom)) return top;
  if (top.kind === 'negative') return negative(quotient(top.of, bottom));
  return { kind: 'quotient', top, bottom };
}

export function power(base: Expression, exponent: number): Expression {
  if (exponent === 0) return ONE;
  return exponent === 1 ? base : { kind: 'power', base, exponent };
}

function same(a: Expression, b: Expression): boolean {
  return a === b || JSON.stringify(a) === JSON.stringify(b);
}

/** Value at a state, abundances x and y. Never throws. */
export function evaluate(e: Expression, x: number, y: number): number {
  switch (e.kind) {
    case 'number':
    case 'parameter':
      return e.value;
    case 'state':
      return e.which === 'first' ? x : y;
    case 'sum':
      return e.terms.reduce((total, term) => total + evaluate(term, x, y), 0);
    case 'product':
      return e.factors.reduce((total, factor) => total * evaluate(factor, x, y), 1);
    case 'quotient':
      return evaluate(e.top, x, y) / evaluate(e.bottom, x, y);
    case 'power':
      return evaluate(e.base, x, y) ** e.exponent;
    case 'negative':
      return -evaluate(e.of, x, y);
  }
}

/** Partial derivative, simplified as it is built. */
export function differentiate(e: Expression, by: 'first' | 'second'): Expression {
  switch (e.kind) {
    case 'number':
    case 'parameter':
      return NOTHING;
    case 'state':
      return e.which === by ? ONE : NOTHING;
    case 'sum':
      return sum(...e.terms.map((term) => differentiate(term, by)));
    case 'product':
      return sum(
        ...e.factors.map((factor, i) => {
          const slope = differentiate(factor, by);
          if (isNothing(slope)) return NOTHING;
          // A slope that is a fraction goes last: "r x / K" rather than "r (1 / K) x".
          const others = e.factors.filter((_, j) => j !== i);
          return absorb(product(...others), slope);
        })
      );
    case 'quotient': {
      const top = quotient(differentiate(e.top, by), e.bottom);
      const slope = differentiate(e.bottom, by);
      if (isNothing(slope)) return top;
      return sum(top, negative(quotient(product(e.top, slope), power(e.bottom, 2))));
    }
    case 'power':
      return product(number(e.exponent), power(e.base, e.exponent - 1), differentiate(e.base, by));
    case 'negative':
      return negative(differentiate(e.of, by));
  }
}

/** Multiplies into the numerator of a fraction. */
function absorb(factor: Expression, by: Expression): Expression {
  if (by.kind === 'negative') return negative(absorb(factor, by.of));
  return by.kind === 'quotient' ? quotient(product(factor, by.top), by.bottom) : product(factor, by);
}

export interface PrintOptions {
  /** LaTeX names of the two abundances, default x and y. */
  first?: string;
  second?: string;
  /** Print values in place of parameter symbols. */
  numbers?: boolean;
}

/** Six significant digits, with a power of ten where zeros would hide them. */
function printNumber(value: number): string {
  const text = Number(value.toPrecision(6)).toString();
  const [mantissa = text, exponent] = text.split('e');
  const far = Math.abs(value) !== 0 && (Math.abs(value) < 1e-4 || Math.abs(value) >= 1e7);
  if (exponent === undefined && !far) return text;
  const [digits = mantissa, power = '0'] = Number(value.toPrecision(6)).toExponential().split('e');
  const times = `10^{${Number(power)}}`;
  return digits === '1' ? times : `${digits} \\times ${times}`;
}

function printFactor(e: Expression, options: PrintOptions): string {
  const text = toLatex(e, options);
  return e.kind === 'sum' || e.kind === 'negative' ? `\\left(${text}\\right)` : text;
}

const isNumeral = (e: Expression | undefined, options: PrintOptions) =>
  e?.kind === 'number' || (e?.kind === 'parameter' && options.numbers === true);

/**
 * LaTeX of an expression.
 * @returns a string without delimiters; factors are set apart by thin spaces, numbers by a dot. Never throws.
 */
export function toLatex(e: Expression, options: PrintOptions = {}): string {
  switch (e.kind) {
    case 'number':
      return printNumber(e.value);
    case 'parameter':
      if (!options.numbers) return e.symbol;
      return e.value < 0 ? `\\left(${printNumber(e.value)}\\right)` : printNumber(e.value);
    case 'state':
      return e.which === 'first' ? (options.first ?? 'x') : (options.second ?? 'y');
    case 'sum':
      return e.terms
        .map((term, i) => {
          if (term.kind === 'negative') return `${i === 0 ? '-' : ' - '}${printFactor(term.of, options)}`;
          return `${i === 0 ? '' : ' + '}${toLatex(term, options)}`;
        })
        .join('');
    case 'product': {
      // A rate of exactly 1 is not printed in front of other factors.
      const shown = e.factors.filter(
        (factor) => !(options.numbers && factor.kind === 'parameter' && factor.value === 1)
      );
      return (shown.length > 0 ? shown : [ONE])
        .map((factor, i) => {
          const text = printFactor(factor, options);
          if (i === 0) return text;
          return (isNumeral(factor, options) ? ' \\cdot ' : ' \\, ') + text;
        })
        .join('');
    }
    case 'quotient':
      return `\\frac{${toLatex(e.top, options)}}{${toLatex(e.bottom, options)}}`;
    case 'power': {
      const base = toLatex(e.base, options);
      const bare = e.base.kind === 'state' || (e.base.kind === 'parameter' && !options.numbers);
      return bare
        ? `${base.includes('^') ? `{${base}}` : base}^{${e.exponent}}`
        : `\\left(${base}\\right)^{${e.exponent}}`;
    }
    case 'negative':
      return `-${printFactor(e.of, options)}`;
  }
}
