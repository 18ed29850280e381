/**
 * Exact simulation of births, deaths and meals one by one: waiting times are exponential in the sum of all rates, and the
 * event is chosen in proportion to its own. Resumable, so that the compiler keeps its optimised code and the caller may
 * stop in between; chance is written out in the loop for the same reason.
 * @source gillespie1977 (the direct method)
 */
import { EXPONENTIAL_EDGE, EXPONENTIAL_ZIGGURAT } from '../numeric/random';
import { A, AH, B, B1, CHANCE, D, D1, D2, IS_SIGMOID, Q, R, S, SPECIES_WIDTH, W, WHOLE, X } from './eventRates';

/** Places in the state of a run. */
export const TIME = 0;
export const FIRST = 1;
export const SECOND = 2;
export const END = 3;
/** Index of the next output time. */
export const NEXT = 4;
/** When each species was first at 0; Infinity until then. */
export const LOST_FIRST = 5;
export const LOST_SECOND = 6;
export const EVENTS = 7;
/** 1 to stop when the first species is lost. */
export const STOPS = 8;
export const RUN_STATE = 9;

/** 0: more to do; 1: the end of the time; 2: nothing can happen any more; 3: stopped at a loss. */
export type EventStatus = 0 | 1 | 2 | 3;

/**
 * Up to `most` events. @param s state, RUN_STATE long. @param k event rates. @param rng four words of a stream's state.
 * @param times output times, closed by Infinity; @param out, base pairs of counts, those of times[i] at base + 2 i.
 */
export function advanceEvents(
  s: Float64Array,
  k: Float64Array,
  rng: Int32Array,
  times: Float64Array,
  out: Float64Array,
  base: number,
  most: number
): EventStatus {
  const birth1 = k[B]!;
  const birth1n = k[B1]!;
  const stock1 = k[S]!;
  const death1 = k[D]!;
  const death1n = k[D1]!;
  const death1nn = k[D2]!;
  const rival1 = k[X]!;
  const quota1 = k[Q]!;
  const birth2 = k[SPECIES_WIDTH + B]!;
  const birth2n = k[SPECIES_WIDTH + B1]!;
  const stock2 = k[SPECIES_WIDTH + S]!;
  const death2 = k[SPECIES_WIDTH + D]!;
  const death2n = k[SPECIES_WIDTH + D1]!;
  const death2nn = k[SPECIES_WIDTH + D2]!;
  const rival2 = k[SPECIES_WIDTH + X]!;
  const quota2 = k[SPECIES_WIDTH + Q]!;
  const a = k[A]!;
  const ah = k[AH]!;
  const w = k[W]!;
  const whole = k[WHOLE]!;
  const chance = k[CHANCE]!;
  const follows = k[R]!;
  const isSigmoid = k[IS_SIGMOID]! !== 0;
  const saturates = ah !== 0 || w !== 0;
  const stops = s[STOPS]! !== 0;
  const end = s[END]!;
  const zx = EXPONENTIAL_ZIGGURAT.x;
  const zf = EXPONENTIAL_ZIGGURAT.f;
  let r0 = rng[0]!;
  let r1 = rng[1]!;
  let r2 = rng[2]!;
  let r3 = rng[3]!;
  let t = s[TIME]!;
  let n = s[FIRST]!;
  let m = s[SECOND]!;
  let next = s[NEXT]! | 0;
  let due = times[next]!;
  let status: EventStatus = 0;
  let left = most;
  for (; left > 0; left--) {
    const gain1 = n * (birth1 + birth1n * n) + stock1;
    let loss1 = n * (death1 + (death1n + death1nn * n) * n + rival1 * m);
    if (n > 0) loss1 += quota1;
    const gain2 = m * (birth2 + birth2n * m) + stock2;
    let loss2 = m * (death2 + (death2n + death2nn * m) * m + rival2 * n);
    if (m > 0) {
      loss2 += quota2;
      if (follows !== 0) loss2 += n > 0 ? (follows * m * m) / n : 0;
    }
    let meals = a * n * m;
    if (isSigmoid) meals *= n;
    if (saturates) meals /= 1 + (isSigmoid ? ah * n * n : ah * n) + w * m;
    const upTo1 = gain1 + loss1;
    const upToMeals = upTo1 + meals;
    const upTo2 = upToMeals + gain2;
    const total = upTo2 + loss2;
    if (!(total > 0)) {
      status = 2;
      break;
    }

    let waiting = 0;
    for (;;) {
      const sum = (r0 + r1 + r3) | 0;
      r3 = (r3 + 1) | 0;
      r0 = r1 ^ (r1 >>> 9);
      r1 = (r2 + (r2 << 3)) | 0;
      r2 = (((r2 << 21) | (r2 >>> 11)) + sum) | 0;
      const layer = sum & 255;
      const sum2 = (r0 + r1 + r3) | 0;
      r3 = (r3 + 1) | 0;
      r0 = r1 ^ (r1 >>> 9);
      r1 = (r2 + (r2 << 3)) | 0;
      r2 = (((r2 << 21) | (r2 >>> 11)) + sum2) | 0;
      const z = ((sum >>> 8) * 4294967296 + (sum2 >>> 0)) * 1.3877787807814457e-17 * zx[layer]!;
      if (z < zx[layer + 1]!) {
        waiting += z;
        break;
      }
      if (layer === 0) waiting += EXPONENTIAL_EDGE;
      else {
        const sum3 = (r0 + r1 + r3) | 0;
        r3 = (r3 + 1) | 0;
        r0 = r1 ^ (r1 >>> 9);
        r1 = (r2 + (r2 << 3)) | 0;
        r2 = (((r2 << 21) | (r2 >>> 11)) + sum3) | 0;
        if (zf[layer]! + (sum3 >>> 0) * 2.3283064365386963e-10 * (zf[layer + 1]! - zf[layer]!) < Math.exp(-z)) {
          waiting += z;
          break;
        }
      }
    }
    const tNext = t + waiting / total;
    if (due <= tNext) {
      const limit = tNext < end ? tNext : end;
      while (due <= limit) {
        out[base + 2 * next] = n;
        out[base + 2 * next + 1] = m;
        next = (next + 1) | 0;
        due = times[next]!;
      }
    }
    if (tNext >= end) {
      t = end;
      status = 1;
      break;
    }
    t = tNext;

    const sum = (r0 + r1 + r3) | 0;
    r3 = (r3 + 1) | 0;
    r0 = r1 ^ (r1 >>> 9);
    r1 = (r2 + (r2 << 3)) | 0;
    r2 = (((r2 << 21) | (r2 >>> 11)) + sum) | 0;
    const u = (sum >>> 0) * 2.3283064365386963e-10 * total;
    if (u < gain1) n += 1;
    else if (u < upToMeals) {
      n -= 1;
      if (u >= upTo1) {
        m += whole;
        // What is left of the choice within the meals is a uniform number of its own.
        if (u - upTo1 < chance * meals) m += 1;
      }
      if (n === 0) {
        if (t < s[LOST_FIRST]!) s[LOST_FIRST] = t;
        if (follows !== 0 && m > 0) {
          // The ceiling of the consumers is a multiple of nothing: they are gone in the same instant.
          m = 0;
          if (t < s[LOST_SECOND]!) s[LOST_SECOND] = t;
        }
        if (stops) {
          status = 3;
          left -= 1;
          break;
        }
      }
    } else if (u < upTo2) m += 1;
    else {
      m -= 1;
      if (m === 0) {
        if (t < s[LOST_SECOND]!) s[LOST_SECOND] = t;
        if (stops) {
          status = 3;
          left -= 1;
          break;
        }
      }
    }
  }
  rng[0] = r0;
  rng[1] = r1;
  rng[2] = r2;
  rng[3] = r3;
  s[TIME] = t;
  s[FIRST] = n;
  s[SECOND] = m;
  s[NEXT] = next;
  s[EVENTS] = s[EVENTS]! + most - left;
  return status;
}
