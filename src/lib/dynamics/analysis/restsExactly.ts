import { coefficientsOf } from '../model/coefficients';
import type { ModelSpec, System } from '../model/spec';
import { FRACTION } from '../numeric/fraction';
import { rates } from './elimination';

/** Beyond this share of its terms a rate is no rounding. */
const ROUNDING = 1e-12;

/**
 * Whether nothing changes at a state, in exact arithmetic on the decimal numbers of the document. A path from such a state
 * stays for ever, also where the smallest rounding would grow to a departure.
 * @param system the compiled model, for a quick no. @param x, y abundances >= 0
 * @returns false at x = 0 under leslie growth, where the rates have no value. Never throws.
 */
export function restsExactly(spec: ModelSpec, system: System, x: number, y: number): boolean {
  const [rate, size] = [new Float64Array(2), new Float64Array(2)];
  system.rhs(x, y, rate);
  system.magnitude(x, y, size);
  if (![0, 1].every((i) => Math.abs(rate[i]!) <= ROUNDING * size[i]!)) return false;
  const k = coefficientsOf(FRACTION, spec);
  if (!FRACTION.isZero(k.leslie) && x === 0) return false;
  return rates(FRACTION, k, FRACTION.of(x), FRACTION.of(y)).every((value) => FRACTION.isZero(value));
}
