/**
 * Simulation of births, deaths and meals by leaps: within a leap rates are held, and each kind of event happens a Poisson
 * number of times. Leaps are short enough for no rate to change by more than a share of itself; where that makes them
 * hardly longer than single events, the events are simulated one by one.
 * @source caoGillespiePetzold2006
 */
import type { RandomStream } from '../numeric/random';
import { A, AH, B, B1, CHANCE, D, D1, D2, IS_SIGMOID, Q, R, S, SPECIES_WIDTH, W, WHOLE, X } from './eventRates';
import {
  advanceEvents,
  END,
  EVENTS,
  FIRST,
  LOST_FIRST,
  LOST_SECOND,
  NEXT,
  SECOND,
  STOPS,
  TIME,
  type EventStatus
} from './exactEvents';

/** A leap worth fewer events than this is not worth its five Poisson numbers. */
const FEWEST = 10;
/** Single events before leaping is tried again. */
const SINGLE = 100;

export interface Leap {
  /** Largest change of a rate within a leap, as a share of it, default 0.03. */
  epsilon?: number;
  /** Leaps of this length instead, whatever happens in them. */
  tau?: number;
}

/** Longest time in which the mean and the spread of a change in n individuals both stay below a share of it. */
function longestFor(n: number, drift: number, spread: number, share: number): number {
  if (n <= 0) return Infinity;
  const change = share * n > 1 ? share * n : 1;
  const byDrift = drift === 0 ? Infinity : change / Math.abs(drift);
  const bySpread = spread === 0 ? Infinity : (change * change) / spread;
  return byDrift < bySpread ? byDrift : bySpread;
}

/** Up to `most` leaps; arguments and status as in advanceEvents, whose state and rates it shares. */
export function advanceLeaps(
  s: Float64Array,
  k: Float64Array,
  stream: RandomStream,
  times: Float64Array,
  out: Float64Array,
  base: number,
  most: number,
  leap: Leap
): EventStatus {
  const { epsilon = 0.03, tau: fixed = 0 } = leap;
  const end = s[END]!;
  const whole = k[WHOLE]!;
  const chance = k[CHANCE]!;
  const perMeal = whole + chance;
  const squarePerMeal = whole * whole * (1 - chance) + (whole + 1) * (whole + 1) * chance;
  const share1 = epsilon / (k[D2]! === 0 && k[IS_SIGMOID]! === 0 ? 2 : 3);
  const share2 = epsilon / (k[SPECIES_WIDTH + D2]! === 0 && k[IS_SIGMOID]! === 0 ? 2 : 3);
  for (let left = most; left > 0; left--) {
    const t = s[TIME]!;
    const n = s[FIRST]!;
    const m = s[SECOND]!;
    const gain1 = n * (k[B]! + k[B1]! * n) + k[S]!;
    const loss1 = n > 0 ? n * (k[D]! + (k[D1]! + k[D2]! * n) * n + k[X]! * m) + k[Q]! : 0;
    const gain2 = m * (k[SPECIES_WIDTH + B]! + k[SPECIES_WIDTH + B1]! * m) + k[SPECIES_WIDTH + S]!;
    let loss2 =
      m > 0
        ? m *
            (k[SPECIES_WIDTH + D]! +
              (k[SPECIES_WIDTH + D1]! + k[SPECIES_WIDTH + D2]! * m) * m +
              k[SPECIES_WIDTH + X]! * n) +
          k[SPECIES_WIDTH + Q]!
        : 0;
    if (n > 0 && m > 0) loss2 += (k[R]! * m * m) / n;
    const eaten = k[IS_SIGMOID]! === 0 ? n : n * n;
    const meals = (k[A]! * eaten * m) / (1 + k[AH]! * eaten + k[W]! * m);
    const total = gain1 + loss1 + gain2 + loss2 + meals;
    let tau = fixed;
    if (fixed === 0) {
      const first = longestFor(n, gain1 - loss1 - meals, gain1 + loss1 + meals, share1);
      const second = longestFor(m, gain2 - loss2 + perMeal * meals, gain2 + loss2 + squarePerMeal * meals, share2);
      tau = first < second ? first : second;
      if (!(tau * total >= FEWEST)) {
        const status = advanceEvents(s, k, stream.state, times, out, base, SINGLE);
        if (status !== 0) return status;
        continue;
      }
    } else if (!(total > 0)) return 2;

    const due = times[s[NEXT]!]!;
    const goal = due < end ? due : end;
    for (;;) {
      const reaches = t + tau >= goal;
      const step = reaches ? goal - t : tau;
      const born1 = stream.poisson(gain1 * step);
      const died1 = stream.poisson(loss1 * step);
      const eatenNow = stream.poisson(meals * step);
      const born2 = stream.poisson(gain2 * step);
      const died2 = stream.poisson(loss2 * step);
      const n1 = n + born1 - died1 - eatenNow;
      const fed = whole * eatenNow + (chance > 0 ? stream.binomial(eatenNow, chance) : 0);
      let m1 = m + born2 - died2 + fed;
      if (n1 < 0 || m1 < 0) {
        // More were taken than there are: the leap was too long.
        tau = step / 2;
        continue;
      }
      const tNext = reaches ? goal : t + step;
      if (k[R]! !== 0 && n1 === 0) m1 = 0;
      s[TIME] = tNext;
      s[FIRST] = n1;
      s[SECOND] = m1;
      s[EVENTS] = s[EVENTS]! + born1 + died1 + eatenNow + born2 + died2;
      if (n1 === 0 && n > 0 && tNext < s[LOST_FIRST]!) s[LOST_FIRST] = tNext;
      if (m1 === 0 && m > 0 && tNext < s[LOST_SECOND]!) s[LOST_SECOND] = tNext;
      let next = s[NEXT]!;
      while (times[next]! <= tNext) {
        out[base + 2 * next] = n1;
        out[base + 2 * next + 1] = m1;
        next += 1;
      }
      s[NEXT] = next;
      if (s[STOPS]! !== 0 && ((n1 === 0 && n > 0) || (m1 === 0 && m > 0))) return 3;
      if (tNext >= end) return 1;
      break;
    }
  }
  return 0;
}
