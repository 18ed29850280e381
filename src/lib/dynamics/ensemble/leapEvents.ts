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

/** Means up to this are drawn by adding up probabilities, here; larger ones by the stream. */
const LOW = 12;
const RECIPROCALS = Float64Array.from({ length: 128 }, (_, i) => 1 / i);
/** exp(-i) and exp(-i/16): with a short series for the rest, good to 1e-14 and several times faster than a call. */
const BY_ONES = Float64Array.from({ length: LOW + 1 }, (_, i) => Math.exp(-i));
const BY_SIXTEENTHS = Float64Array.from({ length: 16 }, (_, i) => Math.exp(-i / 16));

/** Means of the numbers to be drawn, and the numbers. */
const means = new Float64Array(6);
const numbers = new Float64Array(6);

/** Draws all six Poisson numbers in one go, with the generator's words in local numbers. */
function drawNumbers(stream: RandomStream): void {
  const words = stream.state;
  let r0 = words[0]!;
  let r1 = words[1]!;
  let r2 = words[2]!;
  let r3 = words[3]!;
  for (let i = 0; i < 6; i++) {
    const mean = means[i]!;
    if (!(mean > 0)) {
      numbers[i] = 0;
      continue;
    }
    if (mean >= LOW) {
      words[0] = r0;
      words[1] = r1;
      words[2] = r2;
      words[3] = r3;
      numbers[i] = stream.poisson(mean);
      r0 = words[0]!;
      r1 = words[1]!;
      r2 = words[2]!;
      r3 = words[3]!;
      continue;
    }
    const sum = (r0 + r1 + r3) | 0;
    r3 = (r3 + 1) | 0;
    r0 = r1 ^ (r1 >>> 9);
    r1 = (r2 + (r2 << 3)) | 0;
    r2 = (((r2 << 21) | (r2 >>> 11)) + sum) | 0;
    const sum2 = (r0 + r1 + r3) | 0;
    r3 = (r3 + 1) | 0;
    r0 = r1 ^ (r1 >>> 9);
    r1 = (r2 + (r2 << 3)) | 0;
    r2 = (((r2 << 21) | (r2 >>> 11)) + sum2) | 0;
    let u = ((sum >>> 5) * 67108864 + (sum2 >>> 6)) * 1.1102230246251565e-16;
    const ones = mean | 0;
    const sixteenths = ((mean - ones) * 16) | 0;
    const x = ones + sixteenths * 0.0625 - mean;
    const series =
      1 + x * (1 + x * (0.5 + x * (1 / 6 + x * (1 / 24 + x * (1 / 120 + x * (1 / 720 + x * (1 / 5040)))))));
    let chance = BY_ONES[ones]! * BY_SIXTEENTHS[sixteenths]! * series;
    let k = 0;
    while (u >= chance && k < 127) {
      u -= chance;
      k += 1;
      chance *= mean * RECIPROCALS[k]!;
    }
    numbers[i] = k;
  }
  words[0] = r0;
  words[1] = r1;
  words[2] = r2;
  words[3] = r3;
}

/** A leap worth fewer events than this is not worth its six Poisson numbers. */
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
      means[0] = gain1 * step;
      means[1] = loss1 * step;
      // Meals that bring one consumer more and those that do not are independent of each other.
      means[2] = meals * chance * step;
      means[3] = meals * (1 - chance) * step;
      means[4] = gain2 * step;
      means[5] = loss2 * step;
      drawNumbers(stream);
      const eatenNow = numbers[2]! + numbers[3]!;
      const n1 = n + numbers[0]! - numbers[1]! - eatenNow;
      let m1 = m + numbers[4]! - numbers[5]! + whole * eatenNow + numbers[2]!;
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
      s[EVENTS] = s[EVENTS]! + numbers[0]! + numbers[1]! + eatenNow + numbers[4]! + numbers[5]!;
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
