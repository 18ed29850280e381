import type { TimeUnit } from '$lib/contracts/study';

/**
 * Ways of saying a rate that a factor cannot turn into one: yearly shares, multipliers, doubling times.
 * A share f lost in a time T is the rate −ln(1 − f)/T; a multiplier λ is ln λ/T.
 */

/** How the number in a unit is read. All but `plain` are turned by a formula rather than a factor. */
export type UnitKind =
  | 'plain'
  | 'share lost'
  | 'share surviving'
  | 'growth per cent'
  | 'multiplier'
  | 'doubling time'
  | 'halving time'
  | 'most eaten';
/** One way of saying a rate, and its formula. */
export interface Transform {
  kind: UnitKind;
  /** Typed number and unit of time (years in it) to a rate per year; null outside the domain. */
  to: (value: number, years: number) => number | null;
  from: (rate: number, years: number) => number | null;
  slope: (value: number, years: number) => number;
  refusal: (value: number, unit: string) => string;
}

const transforms: Record<string, Transform> = {
  '%/': {
    kind: 'share lost',
    to: (v, years) => (v >= 0 && v < 100 ? -Math.log1p(-v / 100) / years : null),
    from: (rate, years) => (rate >= 0 ? -100 * Math.expm1(-rate * years) : null),
    slope: (v, years) => 1 / (100 - v) / years,
    refusal: (v, unit) =>
      v >= 100
        ? `A loss of 100 % or more ${unit} leaves nothing: give less than 100 %, or a rate.`
        : 'A share that is lost is 0 % or more.'
  },
  '%{kept}/': {
    kind: 'share surviving',
    to: (v, years) => (v > 0 && v <= 100 ? -Math.log(v / 100) / years : null),
    from: (rate, years) => (rate >= 0 ? 100 * Math.exp(-rate * years) : null),
    slope: (v, years) => -1 / v / years,
    refusal: () => 'A share that survives is above 0 % and at most 100 %.'
  },
  '%+/': {
    kind: 'growth per cent',
    to: (v, years) => (v > -100 ? Math.log1p(v / 100) / years : null),
    from: (rate, years) => 100 * Math.expm1(rate * years),
    slope: (v, years) => 1 / (100 + v) / years,
    refusal: () => 'A decline of 100 % or more leaves nothing: give more than −100 %, or a rate.'
  },
  '{lambda}/': {
    kind: 'multiplier',
    to: (v, years) => (v > 0 ? Math.log(v) / years : null),
    from: (rate, years) => Math.exp(rate * years),
    slope: (v, years) => 1 / v / years,
    refusal: () => 'A multiplier is above 0: 1 is no change, 2 is a doubling.'
  },
  '{doubling}.': {
    kind: 'doubling time',
    to: (v, years) => (v > 0 ? Math.LN2 / (v * years) : null),
    from: (rate, years) => (rate > 0 ? Math.LN2 / (rate * years) : null),
    slope: (v, years) => -Math.LN2 / (v * v * years),
    refusal: () => 'A doubling time is above 0; for a decline give a negative rate.'
  },
  '{halving}.': {
    kind: 'halving time',
    to: (v, years) => (v > 0 ? Math.LN2 / (v * years) : null),
    from: (rate, years) => (rate > 0 ? Math.LN2 / (rate * years) : null),
    slope: (v, years) => -Math.LN2 / (v * v * years),
    refusal: () => 'A time to halve is above 0.'
  }
};

/** The formula behind the first part of a code, `%/`. */
export function transformFor(lead: string): Transform | undefined {
  return Object.hasOwn(transforms, lead) ? transforms[lead] : undefined;
}

/** The formula behind a code such as `%/a`; null for a plain unit. */
export function transformOf(code: string): { transform: Transform; unit: TimeUnit; lead: string } | null {
  const match = /^(%\/|%\{kept\}\/|%\+\/|\{lambda\}\/|\{doubling\}\.|\{halving\}\.)(a|mo|wk|d)$/.exec(code);
  const lead = match?.[1] ?? '';
  const transform = transformFor(lead);
  return match && transform ? { transform, unit: match[2] as TimeUnit, lead } : null;
}
