/** What an integration hands out: states at the output times, or at every step, and the dense solution when asked. */
import type { StepMethod } from './step';

interface Piece {
  t: number;
  h: number;
  at: (theta: number, out: Float64Array) => void;
}

export interface Recorder {
  begin(t: number, y: Float64Array): void;
  /** Whether a step that ends at `t` needs the interpolant. */
  needs(t: number): boolean;
  /** A step from t of size h of which the part up to `tEnd`, with state `yEnd`, counts. */
  step(t: number, h: number, tEnd: number, yEnd: Float64Array, method: StepMethod): void;
  result(): { t: Float64Array; y: Float64Array; at?: (t: number, out: Float64Array) => void };
}

/**
 * @param n components. @param direction 1 or -1. @param times output times, monotone in the direction; undefined keeps
 * every step. @param dense keep the interpolant of every step (the only mode that allocates in the loop).
 * @throws RangeError when the times are not monotone in the direction of integration.
 */
export function makeRecorder(
  n: number,
  direction: number,
  times: ArrayLike<number> | undefined,
  dense: boolean
): Recorder {
  for (let i = 1; times && i < times.length; i++) {
    if (!(direction * (times[i]! - times[i - 1]!) >= 0)) throw new RangeError('output times must be in order');
  }
  let t = new Float64Array(times ? times.length : 256);
  let y = new Float64Array(t.length * n);
  let count = 0;
  const state = new Float64Array(n);
  const pieces: Piece[] = [];
  let start = 0;
  let end = 0;

  const push = (time: number, values: Float64Array): void => {
    if (count === t.length) {
      const longer = new Float64Array(2 * count);
      longer.set(t);
      t = longer;
      const wider = new Float64Array(2 * count * n);
      wider.set(y);
      y = wider;
    }
    t[count] = time;
    for (let i = 0; i < n; i++) y[count * n + i] = values[i]!;
    count += 1;
  };
  const due = (limit: number): boolean =>
    times !== undefined && count < times.length && direction * (limit - times[count]!) >= 0;

  return {
    begin(time, values) {
      start = time;
      end = time;
      if (times && times.length > 0 && direction * (times[0]! - time) < 0) {
        throw new RangeError('output times must not lie before the start');
      }
      if (!times) push(time, values);
      else while (due(time)) push(times[count]!, values);
    },
    needs(limit) {
      return dense || due(limit);
    },
    step(from, h, tEnd, yEnd, method) {
      end = tEnd;
      if (dense) pieces.push({ t: from, h, at: method.keep() });
      if (!times) push(tEnd, yEnd);
      else {
        while (due(tEnd)) {
          const time = times[count]!;
          if (time === tEnd) push(time, yEnd);
          else {
            method.interpolate((time - from) / h, state);
            push(time, state);
          }
        }
      }
    },
    result() {
      const found = { t: t.slice(0, count), y: y.slice(0, count * n) };
      if (!dense || pieces.length === 0) return found;
      const at = (time: number, out: Float64Array): void => {
        if (!(direction * (time - start) >= 0) || !(direction * (end - time) >= 0)) {
          throw new RangeError(`the solution is known from ${start} to ${end} only`);
        }
        let low = 0;
        let high = pieces.length - 1;
        while (low < high) {
          const middle = (low + high + 1) >> 1;
          if (direction * (time - pieces[middle]!.t) >= 0) low = middle;
          else high = middle - 1;
        }
        const piece = pieces[low]!;
        piece.at((time - piece.t) / piece.h, out);
      };
      return { ...found, at };
    }
  };
}
