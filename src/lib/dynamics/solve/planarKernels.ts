/**
 * Planar integrators, one a family of models, with the state, the stages and the tableau in local numbers. Written by
 * `node scripts/planarKernels.mjs` from `scripts/lib/planarTemplate.mjs`, which is the place to change; a test holds
 * the two together.
 *
 * `advance` makes up to `attempts` tries of a step and can be called again: the engine keeps optimised code for a short
 * loop that it enters often, not for one long loop, and the caller may stop in between.
 * @source dormandPrince1980, hairer1993 §II.4–6, gustafsson1991
 */

/** 0: more to do; 1: the end was reached; 2: the step became too small. */
export type PlanarStatus = 0 | 1 | 2;

export interface PlanarKernel {
  readonly family: PlanarFamily;
  /**
   * @param s state, PLANAR_STATE long. @param k rates. @param times output times in order, then Infinity.
   * @param out pairs of abundances, those of times[i] at base + 2 i.
   */
  advance(
    s: Float64Array,
    k: Float64Array,
    times: Float64Array,
    out: Float64Array,
    base: number,
    attempts: number
  ): PlanarStatus;
  slopes(x: number, y: number, k: Float64Array, out: Float64Array): void;
}

export type PlanarFamily =
  | 'classical'
  | 'linear'
  | 'cubic'
  | 'saturating'
  | 'sigmoid'
  | 'full-saturating'
  | 'ceiling-saturating'
  | 'full-sigmoid'
  | 'ceiling-sigmoid';

/** Places in the state of an integration. */
export const T = 0;
export const SIZE = 1;
export const X = 2;
export const Y = 3;
export const F = 4;
export const G = 5;
/** Binary logarithm of the last accepted squared error. */
export const BEFORE = 6;
/** Binary logarithm of the largest factor for the next step: 0 right after a rejection. */
export const MOST = 7;
export const ACCEPTED = 8;
/** Index of the next output time. */
export const NEXT = 9;
export const END = 10;
export const RTOL = 11;
export const ATOL = 12;
export const LONGEST = 13;
export const SHORTEST = 14;
/** Squared |h lambda| at the last step of the last call, an estimate. */
export const EDGE = 15;
/** Tries not used by the last call, and one more when it ended. */
export const LEFT = 16;
export const PLANAR_STATE = 17;

/** An error is read from its exponent and mantissa: a logarithm linear between powers of two is near enough for a step size. */
const BITS = new Float64Array(1);
const HALVES = new Int32Array(BITS.buffer);
const HIGH = new Uint8Array(new Uint32Array([1]).buffer)[0] === 1 ? 1 : 0;
/** What a fresh integration starts with in BEFORE and MOST. */
export const LOG_MEMORY = -26.575424759098897;
export const LOG_GROW = 3.321928094887362;

/** x (p0 - c y), y (q0 - d x) */
function advanceClassical(
  s: Float64Array,
  k: Float64Array,
  times: Float64Array,
  out: Float64Array,
  base: number,
  attempts: number
): PlanarStatus {
  const p0 = k[0]!;
  const q0 = k[3]!;
  const c = k[6]!;
  const d = k[7]!;
  const rtol = s[RTOL]!;
  const atol = s[ATOL]!;
  const end = s[END]!;
  const longest = s[LONGEST]!;
  let t = s[T]!;
  let size = s[SIZE]!;
  let x = s[X]!;
  let y = s[Y]!;
  let f = s[F]!;
  let g = s[G]!;
  let before = s[BEFORE]!;
  let most = s[MOST]!;
  let accepted = s[ACCEPTED]!;
  let next = s[NEXT]! | 0;
  let due = times[next]!;
  let status: PlanarStatus = 0;
  let edge = s[EDGE]!;
  const bits = BITS;
  const halves = HALVES;
  const high = HIGH;
  let left = attempts;
  for (; left > 0; left--) {
    const isLast = t + 1.01 * size >= end;
    const h = isLast ? end - t : size;
    const x2 = x + h * (0.2 * f);
    const y2 = y + h * (0.2 * g);
    const f2 = x2 * (p0 - c * y2);
    const g2 = y2 * (q0 - d * x2);
    const x3 = x + h * (0.075 * f + 0.225 * f2);
    const y3 = y + h * (0.075 * g + 0.225 * g2);
    const f3 = x3 * (p0 - c * y3);
    const g3 = y3 * (q0 - d * x3);
    const x4 = x + h * (0.9777777777777777 * f - 3.7333333333333334 * f2 + 3.5555555555555554 * f3);
    const y4 = y + h * (0.9777777777777777 * g - 3.7333333333333334 * g2 + 3.5555555555555554 * g3);
    const f4 = x4 * (p0 - c * y4);
    const g4 = y4 * (q0 - d * x4);
    const x5 =
      x + h * (2.9525986892242035 * f - 11.595793324188385 * f2 + 9.822892851699436 * f3 - 0.2908093278463649 * f4);
    const y5 =
      y + h * (2.9525986892242035 * g - 11.595793324188385 * g2 + 9.822892851699436 * g3 - 0.2908093278463649 * g4);
    const f5 = x5 * (p0 - c * y5);
    const g5 = y5 * (q0 - d * x5);
    const x6 =
      x +
      h *
        (2.8462752525252526 * f -
          10.757575757575758 * f2 +
          8.906422717743473 * f3 +
          0.2784090909090909 * f4 -
          0.2735313036020583 * f5);
    const y6 =
      y +
      h *
        (2.8462752525252526 * g -
          10.757575757575758 * g2 +
          8.906422717743473 * g3 +
          0.2784090909090909 * g4 -
          0.2735313036020583 * g5);
    const f6 = x6 * (p0 - c * y6);
    const g6 = y6 * (q0 - d * x6);
    const x1 =
      x +
      h *
        (0.09114583333333333 * f +
          0.44923629829290207 * f3 +
          0.6510416666666666 * f4 -
          0.322376179245283 * f5 +
          0.13095238095238096 * f6);
    const y1 =
      y +
      h *
        (0.09114583333333333 * g +
          0.44923629829290207 * g3 +
          0.6510416666666666 * g4 -
          0.322376179245283 * g5 +
          0.13095238095238096 * g6);
    const f7 = x1 * (p0 - c * y1);
    const g7 = y1 * (q0 - d * x1);
    const ex =
      (h *
        (0.0012326388888888888 * f -
          0.0042527702905061394 * f3 +
          0.03697916666666667 * f4 -
          0.05086379716981132 * f5 +
          0.0419047619047619 * f6 -
          0.025 * f7)) /
      (atol + rtol * (x1 > x ? x1 : x));
    const ey =
      (h *
        (0.0012326388888888888 * g -
          0.0042527702905061394 * g3 +
          0.03697916666666667 * g4 -
          0.05086379716981132 * g5 +
          0.0419047619047619 * g6 -
          0.025 * g7)) /
      (atol + rtol * (y1 > y ? y1 : y));
    const error = 0.5 * (ex * ex + ey * ey);
    bits[0] = error > 1e-24 ? error : 1e-24;
    const log = halves[high]! * 9.5367431640625e-7 - 1023;
    if (error <= 1 && x1 >= 0 && y1 >= 0) {
      const tNext = isLast ? end : t + h;
      if (due <= tNext) {
        const riseX = x1 - x;
        const riseY = y1 - y;
        const bulgeX = h * f - riseX;
        const bulgeY = h * g - riseY;
        const cubicX = riseX - h * f7 - bulgeX;
        const cubicY = riseY - h * g7 - bulgeY;
        const quarticX =
          h *
          (-1.1270175653862835 * f +
            2.675424484351598 * f3 -
            5.685526961588504 * f4 +
            3.5219323679207912 * f5 -
            1.7672812570757455 * f6 +
            2.382468931778144 * f7);
        const quarticY =
          h *
          (-1.1270175653862835 * g +
            2.675424484351598 * g3 -
            5.685526961588504 * g4 +
            3.5219323679207912 * g5 -
            1.7672812570757455 * g6 +
            2.382468931778144 * g7);
        const perH = 1 / h;
        do {
          const theta = (due - t) * perH;
          const rest = 1 - theta;
          const at = base + 2 * next;
          out[at] = x + theta * (riseX + rest * (bulgeX + theta * (cubicX + rest * quarticX)));
          out[at + 1] = y + theta * (riseY + rest * (bulgeY + theta * (cubicY + rest * quarticY)));
          next = (next + 1) | 0;
          due = times[next]!;
        } while (due <= tNext);
      }
      if (left === 1) {
        const dx = x1 - x6;
        const dy = y1 - y6;
        edge = (h * h * ((f7 - f6) * (f7 - f6) + (g7 - g6) * (g7 - g6))) / (dx * dx + dy * dy);
      }
      accepted += 1;
      t = tNext;
      x = x1;
      y = y1;
      f = f7;
      g = g7;
      if (isLast) {
        status = 1;
        break;
      }
      let v = -0.15200309344504995 - 0.085 * log + 0.02 * before;
      v = v > most ? most : v < -2.321928094887362 ? -2.321928094887362 : v;
      most = 3.321928094887362;
      before = log > -26.575424759098897 ? log : -26.575424759098897;
      v *= 0.25;
      const root = 1 + v * (0.69314718 + v * (0.2402265 + v * 0.0555041));
      const square = root * root;
      size = h * square * square;
      size = size > longest ? longest : size;
    } else {
      let v = error > 1 ? -0.15200309344504995 - 0.085 * log : -2.321928094887362;
      v = (v < -2.321928094887362 ? -2.321928094887362 : v) * 0.25;
      const root = 1 + v * (0.69314718 + v * (0.2402265 + v * 0.0555041));
      const square = root * root;
      size = h * square * square;
      most = 0;
      if (!(size > s[SHORTEST]!)) {
        status = 2;
        break;
      }
    }
  }
  s[T] = t;
  s[SIZE] = size;
  s[X] = x;
  s[Y] = y;
  s[F] = f;
  s[G] = g;
  s[BEFORE] = before;
  s[MOST] = most;
  s[ACCEPTED] = accepted;
  s[NEXT] = next;
  s[EDGE] = edge;
  s[LEFT] = left;
  return status;
}

function slopesClassical(x: number, y: number, k: Float64Array, out: Float64Array): void {
  const p0 = k[0]!;
  const q0 = k[3]!;
  const c = k[6]!;
  const d = k[7]!;
  const f1 = x * (p0 - c * y);
  const g1 = y * (q0 - d * x);
  out[0] = f1;
  out[1] = g1;
}

/** x (p0 + p1 x - c y), y (q0 + q1 y - d x) */
function advanceLinear(
  s: Float64Array,
  k: Float64Array,
  times: Float64Array,
  out: Float64Array,
  base: number,
  attempts: number
): PlanarStatus {
  const p0 = k[0]!;
  const p1 = k[1]!;
  const q0 = k[3]!;
  const q1 = k[4]!;
  const c = k[6]!;
  const d = k[7]!;
  const rtol = s[RTOL]!;
  const atol = s[ATOL]!;
  const end = s[END]!;
  const longest = s[LONGEST]!;
  let t = s[T]!;
  let size = s[SIZE]!;
  let x = s[X]!;
  let y = s[Y]!;
  let f = s[F]!;
  let g = s[G]!;
  let before = s[BEFORE]!;
  let most = s[MOST]!;
  let accepted = s[ACCEPTED]!;
  let next = s[NEXT]! | 0;
  let due = times[next]!;
  let status: PlanarStatus = 0;
  let edge = s[EDGE]!;
  const bits = BITS;
  const halves = HALVES;
  const high = HIGH;
  let left = attempts;
  for (; left > 0; left--) {
    const isLast = t + 1.01 * size >= end;
    const h = isLast ? end - t : size;
    const x2 = x + h * (0.2 * f);
    const y2 = y + h * (0.2 * g);
    const f2 = x2 * (p0 + p1 * x2 - c * y2);
    const g2 = y2 * (q0 + q1 * y2 - d * x2);
    const x3 = x + h * (0.075 * f + 0.225 * f2);
    const y3 = y + h * (0.075 * g + 0.225 * g2);
    const f3 = x3 * (p0 + p1 * x3 - c * y3);
    const g3 = y3 * (q0 + q1 * y3 - d * x3);
    const x4 = x + h * (0.9777777777777777 * f - 3.7333333333333334 * f2 + 3.5555555555555554 * f3);
    const y4 = y + h * (0.9777777777777777 * g - 3.7333333333333334 * g2 + 3.5555555555555554 * g3);
    const f4 = x4 * (p0 + p1 * x4 - c * y4);
    const g4 = y4 * (q0 + q1 * y4 - d * x4);
    const x5 =
      x + h * (2.9525986892242035 * f - 11.595793324188385 * f2 + 9.822892851699436 * f3 - 0.2908093278463649 * f4);
    const y5 =
      y + h * (2.9525986892242035 * g - 11.595793324188385 * g2 + 9.822892851699436 * g3 - 0.2908093278463649 * g4);
    const f5 = x5 * (p0 + p1 * x5 - c * y5);
    const g5 = y5 * (q0 + q1 * y5 - d * x5);
    const x6 =
      x +
      h *
        (2.8462752525252526 * f -
          10.757575757575758 * f2 +
          8.906422717743473 * f3 +
          0.2784090909090909 * f4 -
          0.2735313036020583 * f5);
    const y6 =
      y +
      h *
        (2.8462752525252526 * g -
          10.757575757575758 * g2 +
          8.906422717743473 * g3 +
          0.2784090909090909 * g4 -
          0.2735313036020583 * g5);
    const f6 = x6 * (p0 + p1 * x6 - c * y6);
    const g6 = y6 * (q0 + q1 * y6 - d * x6);
    const x1 =
      x +
      h *
        (0.09114583333333333 * f +
          0.44923629829290207 * f3 +
          0.6510416666666666 * f4 -
          0.322376179245283 * f5 +
          0.13095238095238096 * f6);
    const y1 =
      y +
      h *
        (0.09114583333333333 * g +
          0.44923629829290207 * g3 +
          0.6510416666666666 * g4 -
          0.322376179245283 * g5 +
          0.13095238095238096 * g6);
    const f7 = x1 * (p0 + p1 * x1 - c * y1);
    const g7 = y1 * (q0 + q1 * y1 - d * x1);
    const ex =
      (h *
        (0.0012326388888888888 * f -
          0.0042527702905061394 * f3 +
          0.03697916666666667 * f4 -
          0.05086379716981132 * f5 +
          0.0419047619047619 * f6 -
          0.025 * f7)) /
      (atol + rtol * (x1 > x ? x1 : x));
    const ey =
      (h *
        (0.0012326388888888888 * g -
          0.0042527702905061394 * g3 +
          0.03697916666666667 * g4 -
          0.05086379716981132 * g5 +
          0.0419047619047619 * g6 -
          0.025 * g7)) /
      (atol + rtol * (y1 > y ? y1 : y));
    const error = 0.5 * (ex * ex + ey * ey);
    bits[0] = error > 1e-24 ? error : 1e-24;
    const log = halves[high]! * 9.5367431640625e-7 - 1023;
    if (error <= 1 && x1 >= 0 && y1 >= 0) {
      const tNext = isLast ? end : t + h;
      if (due <= tNext) {
        const riseX = x1 - x;
        const riseY = y1 - y;
        const bulgeX = h * f - riseX;
        const bulgeY = h * g - riseY;
        const cubicX = riseX - h * f7 - bulgeX;
        const cubicY = riseY - h * g7 - bulgeY;
        const quarticX =
          h *
          (-1.1270175653862835 * f +
            2.675424484351598 * f3 -
            5.685526961588504 * f4 +
            3.5219323679207912 * f5 -
            1.7672812570757455 * f6 +
            2.382468931778144 * f7);
        const quarticY =
          h *
          (-1.1270175653862835 * g +
            2.675424484351598 * g3 -
            5.685526961588504 * g4 +
            3.5219323679207912 * g5 -
            1.7672812570757455 * g6 +
            2.382468931778144 * g7);
        const perH = 1 / h;
        do {
          const theta = (due - t) * perH;
          const rest = 1 - theta;
          const at = base + 2 * next;
          out[at] = x + theta * (riseX + rest * (bulgeX + theta * (cubicX + rest * quarticX)));
          out[at + 1] = y + theta * (riseY + rest * (bulgeY + theta * (cubicY + rest * quarticY)));
          next = (next + 1) | 0;
          due = times[next]!;
        } while (due <= tNext);
      }
      if (left === 1) {
        const dx = x1 - x6;
        const dy = y1 - y6;
        edge = (h * h * ((f7 - f6) * (f7 - f6) + (g7 - g6) * (g7 - g6))) / (dx * dx + dy * dy);
      }
      accepted += 1;
      t = tNext;
      x = x1;
      y = y1;
      f = f7;
      g = g7;
      if (isLast) {
        status = 1;
        break;
      }
      let v = -0.15200309344504995 - 0.085 * log + 0.02 * before;
      v = v > most ? most : v < -2.321928094887362 ? -2.321928094887362 : v;
      most = 3.321928094887362;
      before = log > -26.575424759098897 ? log : -26.575424759098897;
      v *= 0.25;
      const root = 1 + v * (0.69314718 + v * (0.2402265 + v * 0.0555041));
      const square = root * root;
      size = h * square * square;
      size = size > longest ? longest : size;
    } else {
      let v = error > 1 ? -0.15200309344504995 - 0.085 * log : -2.321928094887362;
      v = (v < -2.321928094887362 ? -2.321928094887362 : v) * 0.25;
      const root = 1 + v * (0.69314718 + v * (0.2402265 + v * 0.0555041));
      const square = root * root;
      size = h * square * square;
      most = 0;
      if (!(size > s[SHORTEST]!)) {
        status = 2;
        break;
      }
    }
  }
  s[T] = t;
  s[SIZE] = size;
  s[X] = x;
  s[Y] = y;
  s[F] = f;
  s[G] = g;
  s[BEFORE] = before;
  s[MOST] = most;
  s[ACCEPTED] = accepted;
  s[NEXT] = next;
  s[EDGE] = edge;
  s[LEFT] = left;
  return status;
}

function slopesLinear(x: number, y: number, k: Float64Array, out: Float64Array): void {
  const p0 = k[0]!;
  const p1 = k[1]!;
  const q0 = k[3]!;
  const q1 = k[4]!;
  const c = k[6]!;
  const d = k[7]!;
  const f1 = x * (p0 + p1 * x - c * y);
  const g1 = y * (q0 + q1 * y - d * x);
  out[0] = f1;
  out[1] = g1;
}

/** x (p0 + p1 x + p2 x^2 - c y) + s1, y (q0 + q1 y + q2 y^2 - d x) + s2 */
function advanceCubic(
  s: Float64Array,
  k: Float64Array,
  times: Float64Array,
  out: Float64Array,
  base: number,
  attempts: number
): PlanarStatus {
  const p0 = k[0]!;
  const p1 = k[1]!;
  const p2 = k[2]!;
  const q0 = k[3]!;
  const q1 = k[4]!;
  const q2 = k[5]!;
  const c = k[6]!;
  const d = k[7]!;
  const s1 = k[13]!;
  const s2 = k[14]!;
  const rtol = s[RTOL]!;
  const atol = s[ATOL]!;
  const end = s[END]!;
  const longest = s[LONGEST]!;
  let t = s[T]!;
  let size = s[SIZE]!;
  let x = s[X]!;
  let y = s[Y]!;
  let f = s[F]!;
  let g = s[G]!;
  let before = s[BEFORE]!;
  let most = s[MOST]!;
  let accepted = s[ACCEPTED]!;
  let next = s[NEXT]! | 0;
  let due = times[next]!;
  let status: PlanarStatus = 0;
  let edge = s[EDGE]!;
  const bits = BITS;
  const halves = HALVES;
  const high = HIGH;
  let left = attempts;
  for (; left > 0; left--) {
    const isLast = t + 1.01 * size >= end;
    const h = isLast ? end - t : size;
    const x2 = x + h * (0.2 * f);
    const y2 = y + h * (0.2 * g);
    const f2 = x2 * (p0 + (p1 + p2 * x2) * x2 - c * y2) + s1;
    const g2 = y2 * (q0 + (q1 + q2 * y2) * y2 - d * x2) + s2;
    const x3 = x + h * (0.075 * f + 0.225 * f2);
    const y3 = y + h * (0.075 * g + 0.225 * g2);
    const f3 = x3 * (p0 + (p1 + p2 * x3) * x3 - c * y3) + s1;
    const g3 = y3 * (q0 + (q1 + q2 * y3) * y3 - d * x3) + s2;
    const x4 = x + h * (0.9777777777777777 * f - 3.7333333333333334 * f2 + 3.5555555555555554 * f3);
    const y4 = y + h * (0.9777777777777777 * g - 3.7333333333333334 * g2 + 3.5555555555555554 * g3);
    const f4 = x4 * (p0 + (p1 + p2 * x4) * x4 - c * y4) + s1;
    const g4 = y4 * (q0 + (q1 + q2 * y4) * y4 - d * x4) + s2;
    const x5 =
      x + h * (2.9525986892242035 * f - 11.595793324188385 * f2 + 9.822892851699436 * f3 - 0.2908093278463649 * f4);
    const y5 =
      y + h * (2.9525986892242035 * g - 11.595793324188385 * g2 + 9.822892851699436 * g3 - 0.2908093278463649 * g4);
    const f5 = x5 * (p0 + (p1 + p2 * x5) * x5 - c * y5) + s1;
    const g5 = y5 * (q0 + (q1 + q2 * y5) * y5 - d * x5) + s2;
    const x6 =
      x +
      h *
        (2.8462752525252526 * f -
          10.757575757575758 * f2 +
          8.906422717743473 * f3 +
          0.2784090909090909 * f4 -
          0.2735313036020583 * f5);
    const y6 =
      y +
      h *
        (2.8462752525252526 * g -
          10.757575757575758 * g2 +
          8.906422717743473 * g3 +
          0.2784090909090909 * g4 -
          0.2735313036020583 * g5);
    const f6 = x6 * (p0 + (p1 + p2 * x6) * x6 - c * y6) + s1;
    const g6 = y6 * (q0 + (q1 + q2 * y6) * y6 - d * x6) + s2;
    const x1 =
      x +
      h *
        (0.09114583333333333 * f +
          0.44923629829290207 * f3 +
          0.6510416666666666 * f4 -
          0.322376179245283 * f5 +
          0.13095238095238096 * f6);
    const y1 =
      y +
      h *
        (0.09114583333333333 * g +
          0.44923629829290207 * g3 +
          0.6510416666666666 * g4 -
          0.322376179245283 * g5 +
          0.13095238095238096 * g6);
    const f7 = x1 * (p0 + (p1 + p2 * x1) * x1 - c * y1) + s1;
    const g7 = y1 * (q0 + (q1 + q2 * y1) * y1 - d * x1) + s2;
    const ex =
      (h *
        (0.0012326388888888888 * f -
          0.0042527702905061394 * f3 +
          0.03697916666666667 * f4 -
          0.05086379716981132 * f5 +
          0.0419047619047619 * f6 -
          0.025 * f7)) /
      (atol + rtol * (x1 > x ? x1 : x));
    const ey =
      (h *
        (0.0012326388888888888 * g -
          0.0042527702905061394 * g3 +
          0.03697916666666667 * g4 -
          0.05086379716981132 * g5 +
          0.0419047619047619 * g6 -
          0.025 * g7)) /
      (atol + rtol * (y1 > y ? y1 : y));
    const error = 0.5 * (ex * ex + ey * ey);
    bits[0] = error > 1e-24 ? error : 1e-24;
    const log = halves[high]! * 9.5367431640625e-7 - 1023;
    if (error <= 1 && x1 >= 0 && y1 >= 0) {
      const tNext = isLast ? end : t + h;
      if (due <= tNext) {
        const riseX = x1 - x;
        const riseY = y1 - y;
        const bulgeX = h * f - riseX;
        const bulgeY = h * g - riseY;
        const cubicX = riseX - h * f7 - bulgeX;
        const cubicY = riseY - h * g7 - bulgeY;
        const quarticX =
          h *
          (-1.1270175653862835 * f +
            2.675424484351598 * f3 -
            5.685526961588504 * f4 +
            3.5219323679207912 * f5 -
            1.7672812570757455 * f6 +
            2.382468931778144 * f7);
        const quarticY =
          h *
          (-1.1270175653862835 * g +
            2.675424484351598 * g3 -
            5.685526961588504 * g4 +
            3.5219323679207912 * g5 -
            1.7672812570757455 * g6 +
            2.382468931778144 * g7);
        const perH = 1 / h;
        do {
          const theta = (due - t) * perH;
          const rest = 1 - theta;
          const at = base + 2 * next;
          out[at] = x + theta * (riseX + rest * (bulgeX + theta * (cubicX + rest * quarticX)));
          out[at + 1] = y + theta * (riseY + rest * (bulgeY + theta * (cubicY + rest * quarticY)));
          next = (next + 1) | 0;
          due = times[next]!;
        } while (due <= tNext);
      }
      if (left === 1) {
        const dx = x1 - x6;
        const dy = y1 - y6;
        edge = (h * h * ((f7 - f6) * (f7 - f6) + (g7 - g6) * (g7 - g6))) / (dx * dx + dy * dy);
      }
      accepted += 1;
      t = tNext;
      x = x1;
      y = y1;
      f = f7;
      g = g7;
      if (isLast) {
        status = 1;
        break;
      }
      let v = -0.15200309344504995 - 0.085 * log + 0.02 * before;
      v = v > most ? most : v < -2.321928094887362 ? -2.321928094887362 : v;
      most = 3.321928094887362;
      before = log > -26.575424759098897 ? log : -26.575424759098897;
      v *= 0.25;
      const root = 1 + v * (0.69314718 + v * (0.2402265 + v * 0.0555041));
      const square = root * root;
      size = h * square * square;
      size = size > longest ? longest : size;
    } else {
      let v = error > 1 ? -0.15200309344504995 - 0.085 * log : -2.321928094887362;
      v = (v < -2.321928094887362 ? -2.321928094887362 : v) * 0.25;
      const root = 1 + v * (0.69314718 + v * (0.2402265 + v * 0.0555041));
      const square = root * root;
      size = h * square * square;
      most = 0;
      if (!(size > s[SHORTEST]!)) {
        status = 2;
        break;
      }
    }
  }
  s[T] = t;
  s[SIZE] = size;
  s[X] = x;
  s[Y] = y;
  s[F] = f;
  s[G] = g;
  s[BEFORE] = before;
  s[MOST] = most;
  s[ACCEPTED] = accepted;
  s[NEXT] = next;
  s[EDGE] = edge;
  s[LEFT] = left;
  return status;
}

function slopesCubic(x: number, y: number, k: Float64Array, out: Float64Array): void {
  const p0 = k[0]!;
  const p1 = k[1]!;
  const p2 = k[2]!;
  const q0 = k[3]!;
  const q1 = k[4]!;
  const q2 = k[5]!;
  const c = k[6]!;
  const d = k[7]!;
  const s1 = k[13]!;
  const s2 = k[14]!;
  const f1 = x * (p0 + (p1 + p2 * x) * x - c * y) + s1;
  const g1 = y * (q0 + (q1 + q2 * y) * y - d * x) + s2;
  out[0] = f1;
  out[1] = g1;
}

/** x (p0 + p1 x - u y), y (q0 + e u x), u = a / (1 + a h x) */
function advanceSaturating(
  s: Float64Array,
  k: Float64Array,
  times: Float64Array,
  out: Float64Array,
  base: number,
  attempts: number
): PlanarStatus {
  const p0 = k[0]!;
  const p1 = k[1]!;
  const q0 = k[3]!;
  const a = k[8]!;
  const h = k[9]!;
  const e = k[11]!;
  const ah = a * h;
  const rtol = s[RTOL]!;
  const atol = s[ATOL]!;
  const end = s[END]!;
  const longest = s[LONGEST]!;
  let t = s[T]!;
  let size = s[SIZE]!;
  let x = s[X]!;
  let y = s[Y]!;
  let f = s[F]!;
  let g = s[G]!;
  let before = s[BEFORE]!;
  let most = s[MOST]!;
  let accepted = s[ACCEPTED]!;
  let next = s[NEXT]! | 0;
  let due = times[next]!;
  let status: PlanarStatus = 0;
  let edge = s[EDGE]!;
  const bits = BITS;
  const halves = HALVES;
  const high = HIGH;
  let left = attempts;
  for (; left > 0; left--) {
    const isLast = t + 1.01 * size >= end;
    const h = isLast ? end - t : size;
    const x2 = x + h * (0.2 * f);
    const y2 = y + h * (0.2 * g);
    const u2 = a / (1 + ah * x2);
    const f2 = x2 * (p0 + p1 * x2 - u2 * y2);
    const g2 = y2 * (q0 + e * u2 * x2);
    const x3 = x + h * (0.075 * f + 0.225 * f2);
    const y3 = y + h * (0.075 * g + 0.225 * g2);
    const u3 = a / (1 + ah * x3);
    const f3 = x3 * (p0 + p1 * x3 - u3 * y3);
    const g3 = y3 * (q0 + e * u3 * x3);
    const x4 = x + h * (0.9777777777777777 * f - 3.7333333333333334 * f2 + 3.5555555555555554 * f3);
    const y4 = y + h * (0.9777777777777777 * g - 3.7333333333333334 * g2 + 3.5555555555555554 * g3);
    const u4 = a / (1 + ah * x4);
    const f4 = x4 * (p0 + p1 * x4 - u4 * y4);
    const g4 = y4 * (q0 + e * u4 * x4);
    const x5 =
      x + h * (2.9525986892242035 * f - 11.595793324188385 * f2 + 9.822892851699436 * f3 - 0.2908093278463649 * f4);
    const y5 =
      y + h * (2.9525986892242035 * g - 11.595793324188385 * g2 + 9.822892851699436 * g3 - 0.2908093278463649 * g4);
    const u5 = a / (1 + ah * x5);
    const f5 = x5 * (p0 + p1 * x5 - u5 * y5);
    const g5 = y5 * (q0 + e * u5 * x5);
    const x6 =
      x +
      h *
        (2.8462752525252526 * f -
          10.757575757575758 * f2 +
          8.906422717743473 * f3 +
          0.2784090909090909 * f4 -
          0.2735313036020583 * f5);
    const y6 =
      y +
      h *
        (2.8462752525252526 * g -
          10.757575757575758 * g2 +
          8.906422717743473 * g3 +
          0.2784090909090909 * g4 -
          0.2735313036020583 * g5);
    const u6 = a / (1 + ah * x6);
    const f6 = x6 * (p0 + p1 * x6 - u6 * y6);
    const g6 = y6 * (q0 + e * u6 * x6);
    const x1 =
      x +
      h *
        (0.09114583333333333 * f +
          0.44923629829290207 * f3 +
          0.6510416666666666 * f4 -
          0.322376179245283 * f5 +
          0.13095238095238096 * f6);
    const y1 =
      y +
      h *
        (0.09114583333333333 * g +
          0.44923629829290207 * g3 +
          0.6510416666666666 * g4 -
          0.322376179245283 * g5 +
          0.13095238095238096 * g6);
    const u7 = a / (1 + ah * x1);
    const f7 = x1 * (p0 + p1 * x1 - u7 * y1);
    const g7 = y1 * (q0 + e * u7 * x1);
    const ex =
      (h *
        (0.0012326388888888888 * f -
          0.0042527702905061394 * f3 +
          0.03697916666666667 * f4 -
          0.05086379716981132 * f5 +
          0.0419047619047619 * f6 -
          0.025 * f7)) /
      (atol + rtol * (x1 > x ? x1 : x));
    const ey =
      (h *
        (0.0012326388888888888 * g -
          0.0042527702905061394 * g3 +
          0.03697916666666667 * g4 -
          0.05086379716981132 * g5 +
          0.0419047619047619 * g6 -
          0.025 * g7)) /
      (atol + rtol * (y1 > y ? y1 : y));
    const error = 0.5 * (ex * ex + ey * ey);
    bits[0] = error > 1e-24 ? error : 1e-24;
    const log = halves[high]! * 9.5367431640625e-7 - 1023;
    if (error <= 1 && x1 >= 0 && y1 >= 0) {
      const tNext = isLast ? end : t + h;
      if (due <= tNext) {
        const riseX = x1 - x;
        const riseY = y1 - y;
        const bulgeX = h * f - riseX;
        const bulgeY = h * g - riseY;
        const cubicX = riseX - h * f7 - bulgeX;
        const cubicY = riseY - h * g7 - bulgeY;
        const quarticX =
          h *
          (-1.1270175653862835 * f +
            2.675424484351598 * f3 -
            5.685526961588504 * f4 +
            3.5219323679207912 * f5 -
            1.7672812570757455 * f6 +
            2.382468931778144 * f7);
        const quarticY =
          h *
          (-1.1270175653862835 * g +
            2.675424484351598 * g3 -
            5.685526961588504 * g4 +
            3.5219323679207912 * g5 -
            1.7672812570757455 * g6 +
            2.382468931778144 * g7);
        const perH = 1 / h;
        do {
          const theta = (due - t) * perH;
          const rest = 1 - theta;
          const at = base + 2 * next;
          out[at] = x + theta * (riseX + rest * (bulgeX + theta * (cubicX + rest * quarticX)));
          out[at + 1] = y + theta * (riseY + rest * (bulgeY + theta * (cubicY + rest * quarticY)));
          next = (next + 1) | 0;
          due = times[next]!;
        } while (due <= tNext);
      }
      if (left === 1) {
        const dx = x1 - x6;
        const dy = y1 - y6;
        edge = (h * h * ((f7 - f6) * (f7 - f6) + (g7 - g6) * (g7 - g6))) / (dx * dx + dy * dy);
      }
      accepted += 1;
      t = tNext;
      x = x1;
      y = y1;
      f = f7;
      g = g7;
      if (isLast) {
        status = 1;
        break;
      }
      let v = -0.15200309344504995 - 0.085 * log + 0.02 * before;
      v = v > most ? most : v < -2.321928094887362 ? -2.321928094887362 : v;
      most = 3.321928094887362;
      before = log > -26.575424759098897 ? log : -26.575424759098897;
      v *= 0.25;
      const root = 1 + v * (0.69314718 + v * (0.2402265 + v * 0.0555041));
      const square = root * root;
      size = h * square * square;
      size = size > longest ? longest : size;
    } else {
      let v = error > 1 ? -0.15200309344504995 - 0.085 * log : -2.321928094887362;
      v = (v < -2.321928094887362 ? -2.321928094887362 : v) * 0.25;
      const root = 1 + v * (0.69314718 + v * (0.2402265 + v * 0.0555041));
      const square = root * root;
      size = h * square * square;
      most = 0;
      if (!(size > s[SHORTEST]!)) {
        status = 2;
        break;
      }
    }
  }
  s[T] = t;
  s[SIZE] = size;
  s[X] = x;
  s[Y] = y;
  s[F] = f;
  s[G] = g;
  s[BEFORE] = before;
  s[MOST] = most;
  s[ACCEPTED] = accepted;
  s[NEXT] = next;
  s[EDGE] = edge;
  s[LEFT] = left;
  return status;
}

function slopesSaturating(x: number, y: number, k: Float64Array, out: Float64Array): void {
  const p0 = k[0]!;
  const p1 = k[1]!;
  const q0 = k[3]!;
  const a = k[8]!;
  const h = k[9]!;
  const e = k[11]!;
  const ah = a * h;
  const u1 = a / (1 + ah * x);
  const f1 = x * (p0 + p1 * x - u1 * y);
  const g1 = y * (q0 + e * u1 * x);
  out[0] = f1;
  out[1] = g1;
}

/** x (p0 + p1 x - u y), y (q0 + e u x), u = a x / (1 + a h x^2) */
function advanceSigmoid(
  s: Float64Array,
  k: Float64Array,
  times: Float64Array,
  out: Float64Array,
  base: number,
  attempts: number
): PlanarStatus {
  const p0 = k[0]!;
  const p1 = k[1]!;
  const q0 = k[3]!;
  const a = k[8]!;
  const h = k[9]!;
  const e = k[11]!;
  const ah = a * h;
  const rtol = s[RTOL]!;
  const atol = s[ATOL]!;
  const end = s[END]!;
  const longest = s[LONGEST]!;
  let t = s[T]!;
  let size = s[SIZE]!;
  let x = s[X]!;
  let y = s[Y]!;
  let f = s[F]!;
  let g = s[G]!;
  let before = s[BEFORE]!;
  let most = s[MOST]!;
  let accepted = s[ACCEPTED]!;
  let next = s[NEXT]! | 0;
  let due = times[next]!;
  let status: PlanarStatus = 0;
  let edge = s[EDGE]!;
  const bits = BITS;
  const halves = HALVES;
  const high = HIGH;
  let left = attempts;
  for (; left > 0; left--) {
    const isLast = t + 1.01 * size >= end;
    const h = isLast ? end - t : size;
    const x2 = x + h * (0.2 * f);
    const y2 = y + h * (0.2 * g);
    const u2 = (a * x2) / (1 + ah * x2 * x2);
    const f2 = x2 * (p0 + p1 * x2 - u2 * y2);
    const g2 = y2 * (q0 + e * u2 * x2);
    const x3 = x + h * (0.075 * f + 0.225 * f2);
    const y3 = y + h * (0.075 * g + 0.225 * g2);
    const u3 = (a * x3) / (1 + ah * x3 * x3);
    const f3 = x3 * (p0 + p1 * x3 - u3 * y3);
    const g3 = y3 * (q0 + e * u3 * x3);
    const x4 = x + h * (0.9777777777777777 * f - 3.7333333333333334 * f2 + 3.5555555555555554 * f3);
    const y4 = y + h * (0.9777777777777777 * g - 3.7333333333333334 * g2 + 3.5555555555555554 * g3);
    const u4 = (a * x4) / (1 + ah * x4 * x4);
    const f4 = x4 * (p0 + p1 * x4 - u4 * y4);
    const g4 = y4 * (q0 + e * u4 * x4);
    const x5 =
      x + h * (2.9525986892242035 * f - 11.595793324188385 * f2 + 9.822892851699436 * f3 - 0.2908093278463649 * f4);
    const y5 =
      y + h * (2.9525986892242035 * g - 11.595793324188385 * g2 + 9.822892851699436 * g3 - 0.2908093278463649 * g4);
    const u5 = (a * x5) / (1 + ah * x5 * x5);
    const f5 = x5 * (p0 + p1 * x5 - u5 * y5);
    const g5 = y5 * (q0 + e * u5 * x5);
    const x6 =
      x +
      h *
        (2.8462752525252526 * f -
          10.757575757575758 * f2 +
          8.906422717743473 * f3 +
          0.2784090909090909 * f4 -
          0.2735313036020583 * f5);
    const y6 =
      y +
      h *
        (2.8462752525252526 * g -
          10.757575757575758 * g2 +
          8.906422717743473 * g3 +
          0.2784090909090909 * g4 -
          0.2735313036020583 * g5);
    const u6 = (a * x6) / (1 + ah * x6 * x6);
    const f6 = x6 * (p0 + p1 * x6 - u6 * y6);
    const g6 = y6 * (q0 + e * u6 * x6);
    const x1 =
      x +
      h *
        (0.09114583333333333 * f +
          0.44923629829290207 * f3 +
          0.6510416666666666 * f4 -
          0.322376179245283 * f5 +
          0.13095238095238096 * f6);
    const y1 =
      y +
      h *
        (0.09114583333333333 * g +
          0.44923629829290207 * g3 +
          0.6510416666666666 * g4 -
          0.322376179245283 * g5 +
          0.13095238095238096 * g6);
    const u7 = (a * x1) / (1 + ah * x1 * x1);
    const f7 = x1 * (p0 + p1 * x1 - u7 * y1);
    const g7 = y1 * (q0 + e * u7 * x1);
    const ex =
      (h *
        (0.0012326388888888888 * f -
          0.0042527702905061394 * f3 +
          0.03697916666666667 * f4 -
          0.05086379716981132 * f5 +
          0.0419047619047619 * f6 -
          0.025 * f7)) /
      (atol + rtol * (x1 > x ? x1 : x));
    const ey =
      (h *
        (0.0012326388888888888 * g -
          0.0042527702905061394 * g3 +
          0.03697916666666667 * g4 -
          0.05086379716981132 * g5 +
          0.0419047619047619 * g6 -
          0.025 * g7)) /
      (atol + rtol * (y1 > y ? y1 : y));
    const error = 0.5 * (ex * ex + ey * ey);
    bits[0] = error > 1e-24 ? error : 1e-24;
    const log = halves[high]! * 9.5367431640625e-7 - 1023;
    if (error <= 1 && x1 >= 0 && y1 >= 0) {
      const tNext = isLast ? end : t + h;
      if (due <= tNext) {
        const riseX = x1 - x;
        const riseY = y1 - y;
        const bulgeX = h * f - riseX;
        const bulgeY = h * g - riseY;
        const cubicX = riseX - h * f7 - bulgeX;
        const cubicY = riseY - h * g7 - bulgeY;
        const quarticX =
          h *
          (-1.1270175653862835 * f +
            2.675424484351598 * f3 -
            5.685526961588504 * f4 +
            3.5219323679207912 * f5 -
            1.7672812570757455 * f6 +
            2.382468931778144 * f7);
        const quarticY =
          h *
          (-1.1270175653862835 * g +
            2.675424484351598 * g3 -
            5.685526961588504 * g4 +
            3.5219323679207912 * g5 -
            1.7672812570757455 * g6 +
            2.382468931778144 * g7);
        const perH = 1 / h;
        do {
          const theta = (due - t) * perH;
          const rest = 1 - theta;
          const at = base + 2 * next;
          out[at] = x + theta * (riseX + rest * (bulgeX + theta * (cubicX + rest * quarticX)));
          out[at + 1] = y + theta * (riseY + rest * (bulgeY + theta * (cubicY + rest * quarticY)));
          next = (next + 1) | 0;
          due = times[next]!;
        } while (due <= tNext);
      }
      if (left === 1) {
        const dx = x1 - x6;
        const dy = y1 - y6;
        edge = (h * h * ((f7 - f6) * (f7 - f6) + (g7 - g6) * (g7 - g6))) / (dx * dx + dy * dy);
      }
      accepted += 1;
      t = tNext;
      x = x1;
      y = y1;
      f = f7;
      g = g7;
      if (isLast) {
        status = 1;
        break;
      }
      let v = -0.15200309344504995 - 0.085 * log + 0.02 * before;
      v = v > most ? most : v < -2.321928094887362 ? -2.321928094887362 : v;
      most = 3.321928094887362;
      before = log > -26.575424759098897 ? log : -26.575424759098897;
      v *= 0.25;
      const root = 1 + v * (0.69314718 + v * (0.2402265 + v * 0.0555041));
      const square = root * root;
      size = h * square * square;
      size = size > longest ? longest : size;
    } else {
      let v = error > 1 ? -0.15200309344504995 - 0.085 * log : -2.321928094887362;
      v = (v < -2.321928094887362 ? -2.321928094887362 : v) * 0.25;
      const root = 1 + v * (0.69314718 + v * (0.2402265 + v * 0.0555041));
      const square = root * root;
      size = h * square * square;
      most = 0;
      if (!(size > s[SHORTEST]!)) {
        status = 2;
        break;
      }
    }
  }
  s[T] = t;
  s[SIZE] = size;
  s[X] = x;
  s[Y] = y;
  s[F] = f;
  s[G] = g;
  s[BEFORE] = before;
  s[MOST] = most;
  s[ACCEPTED] = accepted;
  s[NEXT] = next;
  s[EDGE] = edge;
  s[LEFT] = left;
  return status;
}

function slopesSigmoid(x: number, y: number, k: Float64Array, out: Float64Array): void {
  const p0 = k[0]!;
  const p1 = k[1]!;
  const q0 = k[3]!;
  const a = k[8]!;
  const h = k[9]!;
  const e = k[11]!;
  const ah = a * h;
  const u1 = (a * x) / (1 + ah * x * x);
  const f1 = x * (p0 + p1 * x - u1 * y);
  const g1 = y * (q0 + e * u1 * x);
  out[0] = f1;
  out[1] = g1;
}

/** x (p0 + p1 x + p2 x^2 - u y) + s1, y (q0 + q1 y + e u x) + s2, u = a / (1 + a h x + w y) */
function advanceFullSaturating(
  s: Float64Array,
  k: Float64Array,
  times: Float64Array,
  out: Float64Array,
  base: number,
  attempts: number
): PlanarStatus {
  const p0 = k[0]!;
  const p1 = k[1]!;
  const p2 = k[2]!;
  const q0 = k[3]!;
  const q1 = k[4]!;
  const a = k[8]!;
  const h = k[9]!;
  const w = k[10]!;
  const e = k[11]!;
  const s1 = k[13]!;
  const s2 = k[14]!;
  const ah = a * h;
  const rtol = s[RTOL]!;
  const atol = s[ATOL]!;
  const end = s[END]!;
  const longest = s[LONGEST]!;
  let t = s[T]!;
  let size = s[SIZE]!;
  let x = s[X]!;
  let y = s[Y]!;
  let f = s[F]!;
  let g = s[G]!;
  let before = s[BEFORE]!;
  let most = s[MOST]!;
  let accepted = s[ACCEPTED]!;
  let next = s[NEXT]! | 0;
  let due = times[next]!;
  let status: PlanarStatus = 0;
  let edge = s[EDGE]!;
  const bits = BITS;
  const halves = HALVES;
  const high = HIGH;
  let left = attempts;
  for (; left > 0; left--) {
    const isLast = t + 1.01 * size >= end;
    const h = isLast ? end - t : size;
    const x2 = x + h * (0.2 * f);
    const y2 = y + h * (0.2 * g);
    const u2 = a / (1 + ah * x2 + w * y2);
    const f2 = x2 * (p0 + (p1 + p2 * x2) * x2 - u2 * y2) + s1;
    const g2 = y2 * (q0 + q1 * y2 + e * u2 * x2) + s2;
    const x3 = x + h * (0.075 * f + 0.225 * f2);
    const y3 = y + h * (0.075 * g + 0.225 * g2);
    const u3 = a / (1 + ah * x3 + w * y3);
    const f3 = x3 * (p0 + (p1 + p2 * x3) * x3 - u3 * y3) + s1;
    const g3 = y3 * (q0 + q1 * y3 + e * u3 * x3) + s2;
    const x4 = x + h * (0.9777777777777777 * f - 3.7333333333333334 * f2 + 3.5555555555555554 * f3);
    const y4 = y + h * (0.9777777777777777 * g - 3.7333333333333334 * g2 + 3.5555555555555554 * g3);
    const u4 = a / (1 + ah * x4 + w * y4);
    const f4 = x4 * (p0 + (p1 + p2 * x4) * x4 - u4 * y4) + s1;
    const g4 = y4 * (q0 + q1 * y4 + e * u4 * x4) + s2;
    const x5 =
      x + h * (2.9525986892242035 * f - 11.595793324188385 * f2 + 9.822892851699436 * f3 - 0.2908093278463649 * f4);
    const y5 =
      y + h * (2.9525986892242035 * g - 11.595793324188385 * g2 + 9.822892851699436 * g3 - 0.2908093278463649 * g4);
    const u5 = a / (1 + ah * x5 + w * y5);
    const f5 = x5 * (p0 + (p1 + p2 * x5) * x5 - u5 * y5) + s1;
    const g5 = y5 * (q0 + q1 * y5 + e * u5 * x5) + s2;
    const x6 =
      x +
      h *
        (2.8462752525252526 * f -
          10.757575757575758 * f2 +
          8.906422717743473 * f3 +
          0.2784090909090909 * f4 -
          0.2735313036020583 * f5);
    const y6 =
      y +
      h *
        (2.8462752525252526 * g -
          10.757575757575758 * g2 +
          8.906422717743473 * g3 +
          0.2784090909090909 * g4 -
          0.2735313036020583 * g5);
    const u6 = a / (1 + ah * x6 + w * y6);
    const f6 = x6 * (p0 + (p1 + p2 * x6) * x6 - u6 * y6) + s1;
    const g6 = y6 * (q0 + q1 * y6 + e * u6 * x6) + s2;
    const x1 =
      x +
      h *
        (0.09114583333333333 * f +
          0.44923629829290207 * f3 +
          0.6510416666666666 * f4 -
          0.322376179245283 * f5 +
          0.13095238095238096 * f6);
    const y1 =
      y +
      h *
        (0.09114583333333333 * g +
          0.44923629829290207 * g3 +
          0.6510416666666666 * g4 -
          0.322376179245283 * g5 +
          0.13095238095238096 * g6);
    const u7 = a / (1 + ah * x1 + w * y1);
    const f7 = x1 * (p0 + (p1 + p2 * x1) * x1 - u7 * y1) + s1;
    const g7 = y1 * (q0 + q1 * y1 + e * u7 * x1) + s2;
    const ex =
      (h *
        (0.0012326388888888888 * f -
          0.0042527702905061394 * f3 +
          0.03697916666666667 * f4 -
          0.05086379716981132 * f5 +
          0.0419047619047619 * f6 -
          0.025 * f7)) /
      (atol + rtol * (x1 > x ? x1 : x));
    const ey =
      (h *
        (0.0012326388888888888 * g -
          0.0042527702905061394 * g3 +
          0.03697916666666667 * g4 -
          0.05086379716981132 * g5 +
          0.0419047619047619 * g6 -
          0.025 * g7)) /
      (atol + rtol * (y1 > y ? y1 : y));
    const error = 0.5 * (ex * ex + ey * ey);
    bits[0] = error > 1e-24 ? error : 1e-24;
    const log = halves[high]! * 9.5367431640625e-7 - 1023;
    if (error <= 1 && x1 >= 0 && y1 >= 0) {
      const tNext = isLast ? end : t + h;
      if (due <= tNext) {
        const riseX = x1 - x;
        const riseY = y1 - y;
        const bulgeX = h * f - riseX;
        const bulgeY = h * g - riseY;
        const cubicX = riseX - h * f7 - bulgeX;
        const cubicY = riseY - h * g7 - bulgeY;
        const quarticX =
          h *
          (-1.1270175653862835 * f +
            2.675424484351598 * f3 -
            5.685526961588504 * f4 +
            3.5219323679207912 * f5 -
            1.7672812570757455 * f6 +
            2.382468931778144 * f7);
        const quarticY =
          h *
          (-1.1270175653862835 * g +
            2.675424484351598 * g3 -
            5.685526961588504 * g4 +
            3.5219323679207912 * g5 -
            1.7672812570757455 * g6 +
            2.382468931778144 * g7);
        const perH = 1 / h;
        do {
          const theta = (due - t) * perH;
          const rest = 1 - theta;
          const at = base + 2 * next;
          out[at] = x + theta * (riseX + rest * (bulgeX + theta * (cubicX + rest * quarticX)));
          out[at + 1] = y + theta * (riseY + rest * (bulgeY + theta * (cubicY + rest * quarticY)));
          next = (next + 1) | 0;
          due = times[next]!;
        } while (due <= tNext);
      }
      if (left === 1) {
        const dx = x1 - x6;
        const dy = y1 - y6;
        edge = (h * h * ((f7 - f6) * (f7 - f6) + (g7 - g6) * (g7 - g6))) / (dx * dx + dy * dy);
      }
      accepted += 1;
      t = tNext;
      x = x1;
      y = y1;
      f = f7;
      g = g7;
      if (isLast) {
        status = 1;
        break;
      }
      let v = -0.15200309344504995 - 0.085 * log + 0.02 * before;
      v = v > most ? most : v < -2.321928094887362 ? -2.321928094887362 : v;
      most = 3.321928094887362;
      before = log > -26.575424759098897 ? log : -26.575424759098897;
      v *= 0.25;
      const root = 1 + v * (0.69314718 + v * (0.2402265 + v * 0.0555041));
      const square = root * root;
      size = h * square * square;
      size = size > longest ? longest : size;
    } else {
      let v = error > 1 ? -0.15200309344504995 - 0.085 * log : -2.321928094887362;
      v = (v < -2.321928094887362 ? -2.321928094887362 : v) * 0.25;
      const root = 1 + v * (0.69314718 + v * (0.2402265 + v * 0.0555041));
      const square = root * root;
      size = h * square * square;
      most = 0;
      if (!(size > s[SHORTEST]!)) {
        status = 2;
        break;
      }
    }
  }
  s[T] = t;
  s[SIZE] = size;
  s[X] = x;
  s[Y] = y;
  s[F] = f;
  s[G] = g;
  s[BEFORE] = before;
  s[MOST] = most;
  s[ACCEPTED] = accepted;
  s[NEXT] = next;
  s[EDGE] = edge;
  s[LEFT] = left;
  return status;
}

function slopesFullSaturating(x: number, y: number, k: Float64Array, out: Float64Array): void {
  const p0 = k[0]!;
  const p1 = k[1]!;
  const p2 = k[2]!;
  const q0 = k[3]!;
  const q1 = k[4]!;
  const a = k[8]!;
  const h = k[9]!;
  const w = k[10]!;
  const e = k[11]!;
  const s1 = k[13]!;
  const s2 = k[14]!;
  const ah = a * h;
  const u1 = a / (1 + ah * x + w * y);
  const f1 = x * (p0 + (p1 + p2 * x) * x - u1 * y) + s1;
  const g1 = y * (q0 + q1 * y + e * u1 * x) + s2;
  out[0] = f1;
  out[1] = g1;
}

/** x (p0 + p1 x + p2 x^2 - u y) + s1, y (q0 + q1 y - l y/x + e u x) + s2, u = a / (1 + a h x + w y) */
function advanceCeilingSaturating(
  s: Float64Array,
  k: Float64Array,
  times: Float64Array,
  out: Float64Array,
  base: number,
  attempts: number
): PlanarStatus {
  const p0 = k[0]!;
  const p1 = k[1]!;
  const p2 = k[2]!;
  const q0 = k[3]!;
  const q1 = k[4]!;
  const a = k[8]!;
  const h = k[9]!;
  const w = k[10]!;
  const e = k[11]!;
  const l = k[12]!;
  const s1 = k[13]!;
  const s2 = k[14]!;
  const ah = a * h;
  const rtol = s[RTOL]!;
  const atol = s[ATOL]!;
  const end = s[END]!;
  const longest = s[LONGEST]!;
  let t = s[T]!;
  let size = s[SIZE]!;
  let x = s[X]!;
  let y = s[Y]!;
  let f = s[F]!;
  let g = s[G]!;
  let before = s[BEFORE]!;
  let most = s[MOST]!;
  let accepted = s[ACCEPTED]!;
  let next = s[NEXT]! | 0;
  let due = times[next]!;
  let status: PlanarStatus = 0;
  let edge = s[EDGE]!;
  const bits = BITS;
  const halves = HALVES;
  const high = HIGH;
  let left = attempts;
  for (; left > 0; left--) {
    const isLast = t + 1.01 * size >= end;
    const h = isLast ? end - t : size;
    const x2 = x + h * (0.2 * f);
    const y2 = y + h * (0.2 * g);
    const u2 = a / (1 + ah * x2 + w * y2);
    const f2 = x2 * (p0 + (p1 + p2 * x2) * x2 - u2 * y2) + s1;
    const g2 = y2 * (q0 + (q1 - l / x2) * y2 + e * u2 * x2) + s2;
    const x3 = x + h * (0.075 * f + 0.225 * f2);
    const y3 = y + h * (0.075 * g + 0.225 * g2);
    const u3 = a / (1 + ah * x3 + w * y3);
    const f3 = x3 * (p0 + (p1 + p2 * x3) * x3 - u3 * y3) + s1;
    const g3 = y3 * (q0 + (q1 - l / x3) * y3 + e * u3 * x3) + s2;
    const x4 = x + h * (0.9777777777777777 * f - 3.7333333333333334 * f2 + 3.5555555555555554 * f3);
    const y4 = y + h * (0.9777777777777777 * g - 3.7333333333333334 * g2 + 3.5555555555555554 * g3);
    const u4 = a / (1 + ah * x4 + w * y4);
    const f4 = x4 * (p0 + (p1 + p2 * x4) * x4 - u4 * y4) + s1;
    const g4 = y4 * (q0 + (q1 - l / x4) * y4 + e * u4 * x4) + s2;
    const x5 =
      x + h * (2.9525986892242035 * f - 11.595793324188385 * f2 + 9.822892851699436 * f3 - 0.2908093278463649 * f4);
    const y5 =
      y + h * (2.9525986892242035 * g - 11.595793324188385 * g2 + 9.822892851699436 * g3 - 0.2908093278463649 * g4);
    const u5 = a / (1 + ah * x5 + w * y5);
    const f5 = x5 * (p0 + (p1 + p2 * x5) * x5 - u5 * y5) + s1;
    const g5 = y5 * (q0 + (q1 - l / x5) * y5 + e * u5 * x5) + s2;
    const x6 =
      x +
      h *
        (2.8462752525252526 * f -
          10.757575757575758 * f2 +
          8.906422717743473 * f3 +
          0.2784090909090909 * f4 -
          0.2735313036020583 * f5);
    const y6 =
      y +
      h *
        (2.8462752525252526 * g -
          10.757575757575758 * g2 +
          8.906422717743473 * g3 +
          0.2784090909090909 * g4 -
          0.2735313036020583 * g5);
    const u6 = a / (1 + ah * x6 + w * y6);
    const f6 = x6 * (p0 + (p1 + p2 * x6) * x6 - u6 * y6) + s1;
    const g6 = y6 * (q0 + (q1 - l / x6) * y6 + e * u6 * x6) + s2;
    const x1 =
      x +
      h *
        (0.09114583333333333 * f +
          0.44923629829290207 * f3 +
          0.6510416666666666 * f4 -
          0.322376179245283 * f5 +
          0.13095238095238096 * f6);
    const y1 =
      y +
      h *
        (0.09114583333333333 * g +
          0.44923629829290207 * g3 +
          0.6510416666666666 * g4 -
          0.322376179245283 * g5 +
          0.13095238095238096 * g6);
    const u7 = a / (1 + ah * x1 + w * y1);
    const f7 = x1 * (p0 + (p1 + p2 * x1) * x1 - u7 * y1) + s1;
    const g7 = y1 * (q0 + (q1 - l / x1) * y1 + e * u7 * x1) + s2;
    const ex =
      (h *
        (0.0012326388888888888 * f -
          0.0042527702905061394 * f3 +
          0.03697916666666667 * f4 -
          0.05086379716981132 * f5 +
          0.0419047619047619 * f6 -
          0.025 * f7)) /
      (atol + rtol * (x1 > x ? x1 : x));
    const ey =
      (h *
        (0.0012326388888888888 * g -
          0.0042527702905061394 * g3 +
          0.03697916666666667 * g4 -
          0.05086379716981132 * g5 +
          0.0419047619047619 * g6 -
          0.025 * g7)) /
      (atol + rtol * (y1 > y ? y1 : y));
    const error = 0.5 * (ex * ex + ey * ey);
    bits[0] = error > 1e-24 ? error : 1e-24;
    const log = halves[high]! * 9.5367431640625e-7 - 1023;
    if (error <= 1 && x1 >= 0 && y1 >= 0) {
      const tNext = isLast ? end : t + h;
      if (due <= tNext) {
        const riseX = x1 - x;
        const riseY = y1 - y;
        const bulgeX = h * f - riseX;
        const bulgeY = h * g - riseY;
        const cubicX = riseX - h * f7 - bulgeX;
        const cubicY = riseY - h * g7 - bulgeY;
        const quarticX =
          h *
          (-1.1270175653862835 * f +
            2.675424484351598 * f3 -
            5.685526961588504 * f4 +
            3.5219323679207912 * f5 -
            1.7672812570757455 * f6 +
            2.382468931778144 * f7);
        const quarticY =
          h *
          (-1.1270175653862835 * g +
            2.675424484351598 * g3 -
            5.685526961588504 * g4 +
            3.5219323679207912 * g5 -
            1.7672812570757455 * g6 +
            2.382468931778144 * g7);
        const perH = 1 / h;
        do {
          const theta = (due - t) * perH;
          const rest = 1 - theta;
          const at = base + 2 * next;
          out[at] = x + theta * (riseX + rest * (bulgeX + theta * (cubicX + rest * quarticX)));
          out[at + 1] = y + theta * (riseY + rest * (bulgeY + theta * (cubicY + rest * quarticY)));
          next = (next + 1) | 0;
          due = times[next]!;
        } while (due <= tNext);
      }
      if (left === 1) {
        const dx = x1 - x6;
        const dy = y1 - y6;
        edge = (h * h * ((f7 - f6) * (f7 - f6) + (g7 - g6) * (g7 - g6))) / (dx * dx + dy * dy);
      }
      accepted += 1;
      t = tNext;
      x = x1;
      y = y1;
      f = f7;
      g = g7;
      if (isLast) {
        status = 1;
        break;
      }
      let v = -0.15200309344504995 - 0.085 * log + 0.02 * before;
      v = v > most ? most : v < -2.321928094887362 ? -2.321928094887362 : v;
      most = 3.321928094887362;
      before = log > -26.575424759098897 ? log : -26.575424759098897;
      v *= 0.25;
      const root = 1 + v * (0.69314718 + v * (0.2402265 + v * 0.0555041));
      const square = root * root;
      size = h * square * square;
      size = size > longest ? longest : size;
    } else {
      let v = error > 1 ? -0.15200309344504995 - 0.085 * log : -2.321928094887362;
      v = (v < -2.321928094887362 ? -2.321928094887362 : v) * 0.25;
      const root = 1 + v * (0.69314718 + v * (0.2402265 + v * 0.0555041));
      const square = root * root;
      size = h * square * square;
      most = 0;
      if (!(size > s[SHORTEST]!)) {
        status = 2;
        break;
      }
    }
  }
  s[T] = t;
  s[SIZE] = size;
  s[X] = x;
  s[Y] = y;
  s[F] = f;
  s[G] = g;
  s[BEFORE] = before;
  s[MOST] = most;
  s[ACCEPTED] = accepted;
  s[NEXT] = next;
  s[EDGE] = edge;
  s[LEFT] = left;
  return status;
}

function slopesCeilingSaturating(x: number, y: number, k: Float64Array, out: Float64Array): void {
  const p0 = k[0]!;
  const p1 = k[1]!;
  const p2 = k[2]!;
  const q0 = k[3]!;
  const q1 = k[4]!;
  const a = k[8]!;
  const h = k[9]!;
  const w = k[10]!;
  const e = k[11]!;
  const l = k[12]!;
  const s1 = k[13]!;
  const s2 = k[14]!;
  const ah = a * h;
  const u1 = a / (1 + ah * x + w * y);
  const f1 = x * (p0 + (p1 + p2 * x) * x - u1 * y) + s1;
  const g1 = y * (q0 + (q1 - l / x) * y + e * u1 * x) + s2;
  out[0] = f1;
  out[1] = g1;
}

/** x (p0 + p1 x + p2 x^2 - u y) + s1, y (q0 + q1 y + e u x) + s2, u = a x / (1 + a h x^2 + w y) */
function advanceFullSigmoid(
  s: Float64Array,
  k: Float64Array,
  times: Float64Array,
  out: Float64Array,
  base: number,
  attempts: number
): PlanarStatus {
  const p0 = k[0]!;
  const p1 = k[1]!;
  const p2 = k[2]!;
  const q0 = k[3]!;
  const q1 = k[4]!;
  const a = k[8]!;
  const h = k[9]!;
  const w = k[10]!;
  const e = k[11]!;
  const s1 = k[13]!;
  const s2 = k[14]!;
  const ah = a * h;
  const rtol = s[RTOL]!;
  const atol = s[ATOL]!;
  const end = s[END]!;
  const longest = s[LONGEST]!;
  let t = s[T]!;
  let size = s[SIZE]!;
  let x = s[X]!;
  let y = s[Y]!;
  let f = s[F]!;
  let g = s[G]!;
  let before = s[BEFORE]!;
  let most = s[MOST]!;
  let accepted = s[ACCEPTED]!;
  let next = s[NEXT]! | 0;
  let due = times[next]!;
  let status: PlanarStatus = 0;
  let edge = s[EDGE]!;
  const bits = BITS;
  const halves = HALVES;
  const high = HIGH;
  let left = attempts;
  for (; left > 0; left--) {
    const isLast = t + 1.01 * size >= end;
    const h = isLast ? end - t : size;
    const x2 = x + h * (0.2 * f);
    const y2 = y + h * (0.2 * g);
    const u2 = (a * x2) / (1 + ah * x2 * x2 + w * y2);
    const f2 = x2 * (p0 + (p1 + p2 * x2) * x2 - u2 * y2) + s1;
    const g2 = y2 * (q0 + q1 * y2 + e * u2 * x2) + s2;
    const x3 = x + h * (0.075 * f + 0.225 * f2);
    const y3 = y + h * (0.075 * g + 0.225 * g2);
    const u3 = (a * x3) / (1 + ah * x3 * x3 + w * y3);
    const f3 = x3 * (p0 + (p1 + p2 * x3) * x3 - u3 * y3) + s1;
    const g3 = y3 * (q0 + q1 * y3 + e * u3 * x3) + s2;
    const x4 = x + h * (0.9777777777777777 * f - 3.7333333333333334 * f2 + 3.5555555555555554 * f3);
    const y4 = y + h * (0.9777777777777777 * g - 3.7333333333333334 * g2 + 3.5555555555555554 * g3);
    const u4 = (a * x4) / (1 + ah * x4 * x4 + w * y4);
    const f4 = x4 * (p0 + (p1 + p2 * x4) * x4 - u4 * y4) + s1;
    const g4 = y4 * (q0 + q1 * y4 + e * u4 * x4) + s2;
    const x5 =
      x + h * (2.9525986892242035 * f - 11.595793324188385 * f2 + 9.822892851699436 * f3 - 0.2908093278463649 * f4);
    const y5 =
      y + h * (2.9525986892242035 * g - 11.595793324188385 * g2 + 9.822892851699436 * g3 - 0.2908093278463649 * g4);
    const u5 = (a * x5) / (1 + ah * x5 * x5 + w * y5);
    const f5 = x5 * (p0 + (p1 + p2 * x5) * x5 - u5 * y5) + s1;
    const g5 = y5 * (q0 + q1 * y5 + e * u5 * x5) + s2;
    const x6 =
      x +
      h *
        (2.8462752525252526 * f -
          10.757575757575758 * f2 +
          8.906422717743473 * f3 +
          0.2784090909090909 * f4 -
          0.2735313036020583 * f5);
    const y6 =
      y +
      h *
        (2.8462752525252526 * g -
          10.757575757575758 * g2 +
          8.906422717743473 * g3 +
          0.2784090909090909 * g4 -
          0.2735313036020583 * g5);
    const u6 = (a * x6) / (1 + ah * x6 * x6 + w * y6);
    const f6 = x6 * (p0 + (p1 + p2 * x6) * x6 - u6 * y6) + s1;
    const g6 = y6 * (q0 + q1 * y6 + e * u6 * x6) + s2;
    const x1 =
      x +
      h *
        (0.09114583333333333 * f +
          0.44923629829290207 * f3 +
          0.6510416666666666 * f4 -
          0.322376179245283 * f5 +
          0.13095238095238096 * f6);
    const y1 =
      y +
      h *
        (0.09114583333333333 * g +
          0.44923629829290207 * g3 +
          0.6510416666666666 * g4 -
          0.322376179245283 * g5 +
          0.13095238095238096 * g6);
    const u7 = (a * x1) / (1 + ah * x1 * x1 + w * y1);
    const f7 = x1 * (p0 + (p1 + p2 * x1) * x1 - u7 * y1) + s1;
    const g7 = y1 * (q0 + q1 * y1 + e * u7 * x1) + s2;
    const ex =
      (h *
        (0.0012326388888888888 * f -
          0.0042527702905061394 * f3 +
          0.03697916666666667 * f4 -
          0.05086379716981132 * f5 +
          0.0419047619047619 * f6 -
          0.025 * f7)) /
      (atol + rtol * (x1 > x ? x1 : x));
    const ey =
      (h *
        (0.0012326388888888888 * g -
          0.0042527702905061394 * g3 +
          0.03697916666666667 * g4 -
          0.05086379716981132 * g5 +
          0.0419047619047619 * g6 -
          0.025 * g7)) /
      (atol + rtol * (y1 > y ? y1 : y));
    const error = 0.5 * (ex * ex + ey * ey);
    bits[0] = error > 1e-24 ? error : 1e-24;
    const log = halves[high]! * 9.5367431640625e-7 - 1023;
    if (error <= 1 && x1 >= 0 && y1 >= 0) {
      const tNext = isLast ? end : t + h;
      if (due <= tNext) {
        const riseX = x1 - x;
        const riseY = y1 - y;
        const bulgeX = h * f - riseX;
        const bulgeY = h * g - riseY;
        const cubicX = riseX - h * f7 - bulgeX;
        const cubicY = riseY - h * g7 - bulgeY;
        const quarticX =
          h *
          (-1.1270175653862835 * f +
            2.675424484351598 * f3 -
            5.685526961588504 * f4 +
            3.5219323679207912 * f5 -
            1.7672812570757455 * f6 +
            2.382468931778144 * f7);
        const quarticY =
          h *
          (-1.1270175653862835 * g +
            2.675424484351598 * g3 -
            5.685526961588504 * g4 +
            3.5219323679207912 * g5 -
            1.7672812570757455 * g6 +
            2.382468931778144 * g7);
        const perH = 1 / h;
        do {
          const theta = (due - t) * perH;
          const rest = 1 - theta;
          const at = base + 2 * next;
          out[at] = x + theta * (riseX + rest * (bulgeX + theta * (cubicX + rest * quarticX)));
          out[at + 1] = y + theta * (riseY + rest * (bulgeY + theta * (cubicY + rest * quarticY)));
          next = (next + 1) | 0;
          due = times[next]!;
        } while (due <= tNext);
      }
      if (left === 1) {
        const dx = x1 - x6;
        const dy = y1 - y6;
        edge = (h * h * ((f7 - f6) * (f7 - f6) + (g7 - g6) * (g7 - g6))) / (dx * dx + dy * dy);
      }
      accepted += 1;
      t = tNext;
      x = x1;
      y = y1;
      f = f7;
      g = g7;
      if (isLast) {
        status = 1;
        break;
      }
      let v = -0.15200309344504995 - 0.085 * log + 0.02 * before;
      v = v > most ? most : v < -2.321928094887362 ? -2.321928094887362 : v;
      most = 3.321928094887362;
      before = log > -26.575424759098897 ? log : -26.575424759098897;
      v *= 0.25;
      const root = 1 + v * (0.69314718 + v * (0.2402265 + v * 0.0555041));
      const square = root * root;
      size = h * square * square;
      size = size > longest ? longest : size;
    } else {
      let v = error > 1 ? -0.15200309344504995 - 0.085 * log : -2.321928094887362;
      v = (v < -2.321928094887362 ? -2.321928094887362 : v) * 0.25;
      const root = 1 + v * (0.69314718 + v * (0.2402265 + v * 0.0555041));
      const square = root * root;
      size = h * square * square;
      most = 0;
      if (!(size > s[SHORTEST]!)) {
        status = 2;
        break;
      }
    }
  }
  s[T] = t;
  s[SIZE] = size;
  s[X] = x;
  s[Y] = y;
  s[F] = f;
  s[G] = g;
  s[BEFORE] = before;
  s[MOST] = most;
  s[ACCEPTED] = accepted;
  s[NEXT] = next;
  s[EDGE] = edge;
  s[LEFT] = left;
  return status;
}

function slopesFullSigmoid(x: number, y: number, k: Float64Array, out: Float64Array): void {
  const p0 = k[0]!;
  const p1 = k[1]!;
  const p2 = k[2]!;
  const q0 = k[3]!;
  const q1 = k[4]!;
  const a = k[8]!;
  const h = k[9]!;
  const w = k[10]!;
  const e = k[11]!;
  const s1 = k[13]!;
  const s2 = k[14]!;
  const ah = a * h;
  const u1 = (a * x) / (1 + ah * x * x + w * y);
  const f1 = x * (p0 + (p1 + p2 * x) * x - u1 * y) + s1;
  const g1 = y * (q0 + q1 * y + e * u1 * x) + s2;
  out[0] = f1;
  out[1] = g1;
}

/** x (p0 + p1 x + p2 x^2 - u y) + s1, y (q0 + q1 y - l y/x + e u x) + s2, u = a x / (1 + a h x^2 + w y) */
function advanceCeilingSigmoid(
  s: Float64Array,
  k: Float64Array,
  times: Float64Array,
  out: Float64Array,
  base: number,
  attempts: number
): PlanarStatus {
  const p0 = k[0]!;
  const p1 = k[1]!;
  const p2 = k[2]!;
  const q0 = k[3]!;
  const q1 = k[4]!;
  const a = k[8]!;
  const h = k[9]!;
  const w = k[10]!;
  const e = k[11]!;
  const l = k[12]!;
  const s1 = k[13]!;
  const s2 = k[14]!;
  const ah = a * h;
  const rtol = s[RTOL]!;
  const atol = s[ATOL]!;
  const end = s[END]!;
  const longest = s[LONGEST]!;
  let t = s[T]!;
  let size = s[SIZE]!;
  let x = s[X]!;
  let y = s[Y]!;
  let f = s[F]!;
  let g = s[G]!;
  let before = s[BEFORE]!;
  let most = s[MOST]!;
  let accepted = s[ACCEPTED]!;
  let next = s[NEXT]! | 0;
  let due = times[next]!;
  let status: PlanarStatus = 0;
  let edge = s[EDGE]!;
  const bits = BITS;
  const halves = HALVES;
  const high = HIGH;
  let left = attempts;
  for (; left > 0; left--) {
    const isLast = t + 1.01 * size >= end;
    const h = isLast ? end - t : size;
    const x2 = x + h * (0.2 * f);
    const y2 = y + h * (0.2 * g);
    const u2 = (a * x2) / (1 + ah * x2 * x2 + w * y2);
    const f2 = x2 * (p0 + (p1 + p2 * x2) * x2 - u2 * y2) + s1;
    const g2 = y2 * (q0 + (q1 - l / x2) * y2 + e * u2 * x2) + s2;
    const x3 = x + h * (0.075 * f + 0.225 * f2);
    const y3 = y + h * (0.075 * g + 0.225 * g2);
    const u3 = (a * x3) / (1 + ah * x3 * x3 + w * y3);
    const f3 = x3 * (p0 + (p1 + p2 * x3) * x3 - u3 * y3) + s1;
    const g3 = y3 * (q0 + (q1 - l / x3) * y3 + e * u3 * x3) + s2;
    const x4 = x + h * (0.9777777777777777 * f - 3.7333333333333334 * f2 + 3.5555555555555554 * f3);
    const y4 = y + h * (0.9777777777777777 * g - 3.7333333333333334 * g2 + 3.5555555555555554 * g3);
    const u4 = (a * x4) / (1 + ah * x4 * x4 + w * y4);
    const f4 = x4 * (p0 + (p1 + p2 * x4) * x4 - u4 * y4) + s1;
    const g4 = y4 * (q0 + (q1 - l / x4) * y4 + e * u4 * x4) + s2;
    const x5 =
      x + h * (2.9525986892242035 * f - 11.595793324188385 * f2 + 9.822892851699436 * f3 - 0.2908093278463649 * f4);
    const y5 =
      y + h * (2.9525986892242035 * g - 11.595793324188385 * g2 + 9.822892851699436 * g3 - 0.2908093278463649 * g4);
    const u5 = (a * x5) / (1 + ah * x5 * x5 + w * y5);
    const f5 = x5 * (p0 + (p1 + p2 * x5) * x5 - u5 * y5) + s1;
    const g5 = y5 * (q0 + (q1 - l / x5) * y5 + e * u5 * x5) + s2;
    const x6 =
      x +
      h *
        (2.8462752525252526 * f -
          10.757575757575758 * f2 +
          8.906422717743473 * f3 +
          0.2784090909090909 * f4 -
          0.2735313036020583 * f5);
    const y6 =
      y +
      h *
        (2.8462752525252526 * g -
          10.757575757575758 * g2 +
          8.906422717743473 * g3 +
          0.2784090909090909 * g4 -
          0.2735313036020583 * g5);
    const u6 = (a * x6) / (1 + ah * x6 * x6 + w * y6);
    const f6 = x6 * (p0 + (p1 + p2 * x6) * x6 - u6 * y6) + s1;
    const g6 = y6 * (q0 + (q1 - l / x6) * y6 + e * u6 * x6) + s2;
    const x1 =
      x +
      h *
        (0.09114583333333333 * f +
          0.44923629829290207 * f3 +
          0.6510416666666666 * f4 -
          0.322376179245283 * f5 +
          0.13095238095238096 * f6);
    const y1 =
      y +
      h *
        (0.09114583333333333 * g +
          0.44923629829290207 * g3 +
          0.6510416666666666 * g4 -
          0.322376179245283 * g5 +
          0.13095238095238096 * g6);
    const u7 = (a * x1) / (1 + ah * x1 * x1 + w * y1);
    const f7 = x1 * (p0 + (p1 + p2 * x1) * x1 - u7 * y1) + s1;
    const g7 = y1 * (q0 + (q1 - l / x1) * y1 + e * u7 * x1) + s2;
    const ex =
      (h *
        (0.0012326388888888888 * f -
          0.0042527702905061394 * f3 +
          0.03697916666666667 * f4 -
          0.05086379716981132 * f5 +
          0.0419047619047619 * f6 -
          0.025 * f7)) /
      (atol + rtol * (x1 > x ? x1 : x));
    const ey =
      (h *
        (0.0012326388888888888 * g -
          0.0042527702905061394 * g3 +
          0.03697916666666667 * g4 -
          0.05086379716981132 * g5 +
          0.0419047619047619 * g6 -
          0.025 * g7)) /
      (atol + rtol * (y1 > y ? y1 : y));
    const error = 0.5 * (ex * ex + ey * ey);
    bits[0] = error > 1e-24 ? error : 1e-24;
    const log = halves[high]! * 9.5367431640625e-7 - 1023;
    if (error <= 1 && x1 >= 0 && y1 >= 0) {
      const tNext = isLast ? end : t + h;
      if (due <= tNext) {
        const riseX = x1 - x;
        const riseY = y1 - y;
        const bulgeX = h * f - riseX;
        const bulgeY = h * g - riseY;
        const cubicX = riseX - h * f7 - bulgeX;
        const cubicY = riseY - h * g7 - bulgeY;
        const quarticX =
          h *
          (-1.1270175653862835 * f +
            2.675424484351598 * f3 -
            5.685526961588504 * f4 +
            3.5219323679207912 * f5 -
            1.7672812570757455 * f6 +
            2.382468931778144 * f7);
        const quarticY =
          h *
          (-1.1270175653862835 * g +
            2.675424484351598 * g3 -
            5.685526961588504 * g4 +
            3.5219323679207912 * g5 -
            1.7672812570757455 * g6 +
            2.382468931778144 * g7);
        const perH = 1 / h;
        do {
          const theta = (due - t) * perH;
          const rest = 1 - theta;
          const at = base + 2 * next;
          out[at] = x + theta * (riseX + rest * (bulgeX + theta * (cubicX + rest * quarticX)));
          out[at + 1] = y + theta * (riseY + rest * (bulgeY + theta * (cubicY + rest * quarticY)));
          next = (next + 1) | 0;
          due = times[next]!;
        } while (due <= tNext);
      }
      if (left === 1) {
        const dx = x1 - x6;
        const dy = y1 - y6;
        edge = (h * h * ((f7 - f6) * (f7 - f6) + (g7 - g6) * (g7 - g6))) / (dx * dx + dy * dy);
      }
      accepted += 1;
      t = tNext;
      x = x1;
      y = y1;
      f = f7;
      g = g7;
      if (isLast) {
        status = 1;
        break;
      }
      let v = -0.15200309344504995 - 0.085 * log + 0.02 * before;
      v = v > most ? most : v < -2.321928094887362 ? -2.321928094887362 : v;
      most = 3.321928094887362;
      before = log > -26.575424759098897 ? log : -26.575424759098897;
      v *= 0.25;
      const root = 1 + v * (0.69314718 + v * (0.2402265 + v * 0.0555041));
      const square = root * root;
      size = h * square * square;
      size = size > longest ? longest : size;
    } else {
      let v = error > 1 ? -0.15200309344504995 - 0.085 * log : -2.321928094887362;
      v = (v < -2.321928094887362 ? -2.321928094887362 : v) * 0.25;
      const root = 1 + v * (0.69314718 + v * (0.2402265 + v * 0.0555041));
      const square = root * root;
      size = h * square * square;
      most = 0;
      if (!(size > s[SHORTEST]!)) {
        status = 2;
        break;
      }
    }
  }
  s[T] = t;
  s[SIZE] = size;
  s[X] = x;
  s[Y] = y;
  s[F] = f;
  s[G] = g;
  s[BEFORE] = before;
  s[MOST] = most;
  s[ACCEPTED] = accepted;
  s[NEXT] = next;
  s[EDGE] = edge;
  s[LEFT] = left;
  return status;
}

function slopesCeilingSigmoid(x: number, y: number, k: Float64Array, out: Float64Array): void {
  const p0 = k[0]!;
  const p1 = k[1]!;
  const p2 = k[2]!;
  const q0 = k[3]!;
  const q1 = k[4]!;
  const a = k[8]!;
  const h = k[9]!;
  const w = k[10]!;
  const e = k[11]!;
  const l = k[12]!;
  const s1 = k[13]!;
  const s2 = k[14]!;
  const ah = a * h;
  const u1 = (a * x) / (1 + ah * x * x + w * y);
  const f1 = x * (p0 + (p1 + p2 * x) * x - u1 * y) + s1;
  const g1 = y * (q0 + (q1 - l / x) * y + e * u1 * x) + s2;
  out[0] = f1;
  out[1] = g1;
}

export const PLANAR_KERNELS: Readonly<Record<PlanarFamily, PlanarKernel>> = {
  classical: { family: 'classical', advance: advanceClassical, slopes: slopesClassical },
  linear: { family: 'linear', advance: advanceLinear, slopes: slopesLinear },
  cubic: { family: 'cubic', advance: advanceCubic, slopes: slopesCubic },
  saturating: { family: 'saturating', advance: advanceSaturating, slopes: slopesSaturating },
  sigmoid: { family: 'sigmoid', advance: advanceSigmoid, slopes: slopesSigmoid },
  'full-saturating': { family: 'full-saturating', advance: advanceFullSaturating, slopes: slopesFullSaturating },
  'ceiling-saturating': {
    family: 'ceiling-saturating',
    advance: advanceCeilingSaturating,
    slopes: slopesCeilingSaturating
  },
  'full-sigmoid': { family: 'full-sigmoid', advance: advanceFullSigmoid, slopes: slopesFullSigmoid },
  'ceiling-sigmoid': { family: 'ceiling-sigmoid', advance: advanceCeilingSigmoid, slopes: slopesCeilingSigmoid }
};
