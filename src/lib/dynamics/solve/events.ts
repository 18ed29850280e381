/**
 * Sign changes of event functions inside a step, located on the dense output.
 *
 * What counts: an event happens where its function passes from one strict sign to the other. A function that is zero at
 * t0 has not crossed anything yet: its first non-zero sign is its starting side. A function that touches zero and turns
 * back (a tangency) is no event. Both crossings of a dip inside one step are found.
 */
import { bracketedRoot } from './bracket';
import type { EventSpec } from './problem';

export interface FoundEvent {
  event: number;
  t: number;
  y: Float64Array;
}

/** Where the functions are read inside a step. The outer pair shows the slope at the ends, so no dip hides there. */
const THETAS = [0.01, 0.25, 0.5, 0.75, 0.99, 1] as const;
/** Width of the bracket in units of the step; the error of the time is below this times the step. */
const THETA_TOLERANCE = 1e-14;
const GOLDEN = 0.381966011250105;

export interface EventTracker {
  begin(t: number, y: Float64Array): void;
  /**
   * Events inside the step from t to (t + h, y1), in the order they happen, ending with the first terminal one.
   * `prepare` readies `interpolate`; it is called only when the inside of the step matters.
   */
  scan(
    t: number,
    h: number,
    y1: Float64Array,
    interpolate: (theta: number, out: Float64Array) => void,
    prepare: () => void
  ): FoundEvent[];
  /** Functions that stand exactly at zero at the end of the integration, having come from a side. */
  finish(): FoundEvent[];
}

interface Watch {
  spec: EventSpec;
  index: number;
  /** Last strict sign seen; 0 before any. */
  side: number;
  /** Value at the start of the step. */
  last: number;
  /** A sample that was exactly zero, waiting for the next sign. */
  pending: FoundEvent | null;
}

const NONE: FoundEvent[] = [];
const ENDS = [0, 1] as const;

/** Watches `events` from step to step. @param n number of components of the state. @source hairer1993 §II.6 */
export function makeEventTracker(events: readonly EventSpec[], n: number): EventTracker {
  const state = new Float64Array(n);
  const states = THETAS.map(() => new Float64Array(n));
  const samples = new Float64Array(THETAS.length + 1);
  const hasFine = events.some((e) => !e.betweenSteps);
  const watches: Watch[] = events.map((spec, index) => ({ spec, index, side: 0, last: 0, pending: null }));

  /** The crossings of one function inside the step whose samples have just been taken. */
  const locate = (
    watch: Watch,
    nodes: readonly number[],
    values: number[],
    t: number,
    h: number,
    interpolate: (theta: number, out: Float64Array) => void
  ): FoundEvent[] => {
    const value = (theta: number): number => {
      interpolate(theta, state);
      return watch.spec.value(t + theta * h, state);
    };
    const at = (theta: number): FoundEvent => {
      const y = new Float64Array(n);
      interpolate(theta, y);
      return { event: watch.index, t: t + theta * h, y };
    };
    const thetas = [...nodes];
    revealDips(thetas, values, value);
    const found: FoundEvent[] = [];
    for (let j = 1; j < thetas.length; j++) {
      const sign = Math.sign(values[j]!);
      if (sign === 0) {
        if (watch.side !== 0 && watch.pending === null) watch.pending = at(thetas[j]!);
        continue;
      }
      if (sign === -watch.side && (watch.spec.direction === 0 || watch.spec.direction === sign)) {
        const [a, b] = [thetas[j - 1]!, thetas[j]!];
        found.push(watch.pending ?? at(bracketedRoot(value, a, b, values[j - 1]!, values[j]!, THETA_TOLERANCE)));
      }
      if (sign === 1 || sign === -1) watch.side = sign;
      watch.pending = null;
    }
    return found;
  };

  return {
    begin(t, y) {
      for (const watch of watches) {
        watch.last = watch.spec.value(t, y);
        watch.side = Math.sign(watch.last) || 0;
        watch.pending = null;
      }
    },
    scan(t, h, y1, interpolate, prepare) {
      let found = NONE;
      let isPrepared = false;
      if (hasFine) {
        prepare();
        isPrepared = true;
        for (let j = 0; j < THETAS.length; j++) interpolate(THETAS[j]!, states[j]!);
      }
      for (let k = 0; k < watches.length; k++) {
        const watch = watches[k]!;
        if (watch.spec.betweenSteps) {
          const before = watch.last;
          watch.last = watch.spec.value(t + h, y1);
          if (watch.pending === null && watch.side * watch.last > 0) continue;
          if (!isPrepared) prepare();
          isPrepared = true;
          const here = locate(watch, ENDS, [before, watch.last], t, h, interpolate);
          if (here.length > 0) found = [...found, ...here];
          continue;
        }
        samples[0] = watch.last;
        for (let j = 0; j < THETAS.length; j++) samples[j + 1] = watch.spec.value(t + THETAS[j]! * h, states[j]!);
        watch.last = samples[THETAS.length]!;
        if (watch.pending === null && staysOnSide(samples, watch.side)) continue;
        const here = locate(watch, [0, ...THETAS], Array.from(samples), t, h, interpolate);
        if (here.length > 0) found = [...found, ...here];
      }
      if (found.length > 1) found.sort((p, q) => (h > 0 ? p.t - q.t : q.t - p.t) || p.event - q.event);
      const stop = found.findIndex((f) => events[f.event]?.terminal);
      return stop < 0 ? found : found.slice(0, stop + 1);
    },
    finish() {
      return watches.flatMap((watch) => {
        const fits = watch.spec.direction === 0 || watch.spec.direction === -watch.side;
        return watch.pending && fits ? [watch.pending] : [];
      });
    }
  };
}

/** Nothing to look into: every sample is strictly on the side, and none is nearer to zero than both its neighbours. */
function staysOnSide(samples: Float64Array, side: number): boolean {
  for (let j = 0; j < samples.length; j++) {
    const v = side * samples[j]!;
    if (!(v > 0)) return false;
    if (j > 0 && j < samples.length - 1 && v < side * samples[j - 1]! && v < side * samples[j + 1]!) return false;
  }
  return true;
}

/**
 * Adds a point to the samples wherever the function dips through zero and back between them: a triple of one sign whose
 * middle is nearest to zero is searched for its extremum.
 */
function revealDips(thetas: number[], values: number[], value: (theta: number) => number): void {
  for (let j = 1; j < thetas.length - 1; j++) {
    const left = values[j - 1]!;
    const middle = values[j]!;
    const right = values[j + 1]!;
    const sign = Math.sign(middle);
    if (
      sign === 0 ||
      sign * left <= sign * middle ||
      sign * right <= sign * middle ||
      sign * left < 0 ||
      sign * right < 0
    )
      continue;
    // The rise on either side bounds how deep a smooth dip can go; a shallow one needs no search.
    if (Math.abs(middle) > 4 * Math.max(Math.abs(left - middle), Math.abs(right - middle))) continue;
    let a = thetas[j - 1]!;
    let b = thetas[j + 1]!;
    let p = thetas[j]!;
    let fp = sign * middle;
    for (let i = 0; i < 40 && fp > 0 && b - a > 1e-7; i++) {
      const q = b - p > p - a ? p + GOLDEN * (b - p) : p - GOLDEN * (p - a);
      const fq = sign * value(q);
      if (fq < fp) {
        if (q > p) a = p;
        else b = p;
        p = q;
        fp = fq;
      } else if (q > p) b = q;
      else a = q;
    }
    if (fp < 0) {
      const before = p < thetas[j]! ? j : j + 1;
      thetas.splice(before, 0, p);
      values.splice(before, 0, sign * fp);
      j += 1;
    }
  }
}
