/** One path of a model from one start, with the moments a manager asks about. */
import { compile } from '../model/compile';
import type { ModelSpec, SpeciesKey, System } from '../model/spec';
import { integratePlanar, isPlanar, planarModelOf } from '../solve/planar';
import { S1, S2 } from '../solve/planarRates';
import type { Outcome } from '../solve/problem';
import { ENGINE_VERSION } from '../version';
import type { Coordinates } from './coordinates';
import { followPath, levelOf, type Watched } from './path';
import { restsExactly } from './restsExactly';
import { seasonalSystem, type Season } from './seasonal';
import { simulateSchedule, type AppliedPulse, type Pulse } from './schedule';

export interface Threshold {
  species: SpeciesKey;
  /** Report every fall below this abundance. */
  below?: number;
  /** Report every rise above this abundance. */
  above?: number;
}

export interface TrajectoryOptions {
  /** Abundances at the first time, both >= 0. */
  start: { x: number; y: number };
  /** First and last time; backwards when the last is the smaller. */
  span: readonly [number, number];
  /** Number of equally spaced output times, both ends included, default 201. */
  samples?: number;
  /** Output times instead, in the order of integration. */
  times?: readonly number[];
  /** Wanted relative accuracy of the abundances, default 1e-8. */
  rtol?: number;
  /** Wanted absolute accuracy, default 1e-10; only a species under a quota makes use of it. */
  atol?: number;
  thresholds?: readonly Threshold[];
  /** Animals added or taken at set times inside the span; an output time at one shows the state after it. */
  schedule?: readonly Pulse[];
  /** Seasonal course of a growth rate or a capacity; both rest at their mean without one. */
  season?: Season;
  maxSteps?: number;
  shouldStop?: () => boolean;
}

export type TrajectoryEventKind = 'fell below' | 'rose above' | 'ran out';
export interface TrajectoryEvent {
  t: number;
  species: SpeciesKey;
  kind: TrajectoryEventKind;
  /** The level crossed; 0 for `ran out`. */
  value: number;
}

export interface TrajectoryResult {
  /** Output times reached, and the abundances there; never negative. */
  t: number[];
  x: number[];
  y: number[];
  /** In the order they happened. */
  events: TrajectoryEvent[];
  steps: { accepted: number; rejected: number; evaluations: number };
  /** `reached`, or `failed` with the reason and the time reached. */
  outcome: Outcome;
  /** What went wrong or what to keep in mind, in one sentence; null when there is nothing to say. */
  remark: string | null;
  stiff: boolean;
  /** What each act of a schedule came to, in order; absent without one. */
  pulses?: AppliedPulse[];
  engine: string;
}

/**
 * Errors made in each step add up along the way, so steps are held to a thousandth of the accuracy asked for: the answer,
 * and not merely each step, is then good to it unless the path itself is chaotic or very long.
 */
const STEP_SHARE = 1e-3;
/** Rounding makes tighter steps pointless. */
const TIGHTEST = 5e-14;
/** Equally spaced times, both ends exact. @param count at least 2. */
export function equallySpaced([t0, t1]: readonly [number, number], count: number): number[] {
  const times = new Array<number>(count);
  for (let i = 0; i < count; i++) times[i] = i === count - 1 ? t1 : t0 + ((t1 - t0) * i) / (count - 1);
  return times;
}

function requireValid(options: TrajectoryOptions): void {
  const { start, span, samples } = options;
  const good = (n: number): boolean => Number.isFinite(n) && n >= 0;
  if (!good(start.x) || !good(start.y)) throw new RangeError('the start must be two numbers that are not negative');
  if (!span.every(Number.isFinite)) throw new RangeError('the span must be two numbers');
  if (samples !== undefined && !(Number.isInteger(samples) && samples >= 2)) {
    throw new RangeError('samples must be a whole number, 2 or more');
  }
  for (const tolerance of [options.rtol, options.atol]) {
    if (tolerance !== undefined && !(tolerance > 0)) throw new RangeError('tolerances must be above 0');
  }
}

/** The thresholds as events in given coordinates. */
function thresholdsIn(c: Coordinates, thresholds: readonly Threshold[]): Watched<Omit<TrajectoryEvent, 't'>>[] {
  return thresholds.flatMap(({ species, below, above }) => {
    const i = species === 'first' ? 0 : 1;
    if (c.forms[i] === 'zero') return [];
    const list: Watched<Omit<TrajectoryEvent, 't'>>[] = [];
    const watch = (level: number, direction: -1 | 1, kind: TrajectoryEventKind): void => {
      const value = levelOf(c, i, level);
      list.push({ spec: { value, direction, terminal: false }, tag: { species, kind, value: level } });
    };
    if (below !== undefined && below > 0) watch(below, -1, 'fell below');
    if (above !== undefined && above > 0) watch(above, 1, 'rose above');
    return list;
  });
}

/** A start that stands exactly on a threshold and leaves it at once has crossed it at the first moment. */
function crossingsAtStart(system: System, options: TrajectoryOptions): TrajectoryEvent[] {
  const { start, span } = options;
  const slope = new Float64Array(2);
  system.moveTo?.(span[0]);
  system.rhs(start.x, start.y, slope);
  const forwards = span[1] >= span[0] ? 1 : -1;
  return (options.thresholds ?? []).flatMap(({ species, below, above }): TrajectoryEvent[] => {
    const n = species === 'first' ? start.x : start.y;
    const rate = forwards * (species === 'first' ? slope[0]! : slope[1]!);
    if (!(n > 0)) return [];
    if (below === n && rate < 0) return [{ t: span[0], species, kind: 'fell below', value: n }];
    if (above === n && rate > 0) return [{ t: span[0], species, kind: 'rose above', value: n }];
    return [];
  });
}

function remarkOn(outcome: Outcome, stiff: boolean): string | null {
  if (outcome.status === 'failed') {
    const until = `Results are given up to time ${Number(outcome.t.toPrecision(6))}`;
    switch (outcome.reason) {
      case 'notFinite':
        return `${until}; there an abundance leaves the range of numbers, or the model is undefined.`;
      case 'stepTooSmall':
        return `${until}; there the model changes too abruptly to be followed, as in growth without limit.`;
      case 'tooManySteps':
        return `${until}; the budget of steps was used up.`;
      case 'budget':
        return `${until}; the calculation was stopped.`;
      case 'stiff':
        return `${until}; the rates differ too widely in speed.`;
    }
  }
  return stiff ? 'The rates differ widely in speed (a stiff model); implicit steps were used where they pay.' : null;
}

/**
 * The path by the kernel of the model's family, some ten times faster, where nothing has to be watched on the way.
 * @returns null when the general way is needed: backwards, under a quota, with thresholds, stiff, or too deep a dip.
 */
function simulateFast(spec: ModelSpec, options: TrajectoryOptions, times: Float64Array): TrajectoryResult | null {
  const { start, span, thresholds = [] } = options;
  if (thresholds.length > 0 || !(span[1] > span[0])) return null;
  let inOrder = true;
  for (let i = 0, before = span[0]; i < times.length; i++) {
    inOrder &&= times[i]! >= before && times[i]! <= span[1];
    before = times[i]!;
  }
  const model = planarModelOf(spec);
  const settled = (start.x > 0 || model.rates[S1] === 0) && (start.y > 0 || model.rates[S2] === 0);
  if (!inOrder || !settled || !isPlanar(model.rates)) return null;
  const path = integratePlanar(model, start, span, times, {
    rtol: Math.max(TIGHTEST, (options.rtol ?? 1e-8) * STEP_SHARE),
    ...(options.maxSteps !== undefined && { maxSteps: options.maxSteps }),
    ...(options.shouldStop && { shouldStop: options.shouldStop })
  });
  if (path.end !== 'reached') return null;
  const n = times.length;
  const t = new Array<number>(n);
  const x = new Array<number>(n);
  const y = new Array<number>(n);
  for (let i = 0; i < n; i++) {
    t[i] = times[i]!;
    x[i] = path.values[2 * i]!;
    y[i] = path.values[2 * i + 1]!;
  }
  return {
    t,
    x,
    y,
    events: [],
    steps: { accepted: path.accepted, rejected: path.rejected, evaluations: path.evaluations },
    outcome: { status: 'reached' },
    remark: null,
    stiff: false,
    engine: ENGINE_VERSION
  };
}

/** The path that stays where it is. */
function atRest(start: { x: number; y: number }, times: Float64Array): TrajectoryResult {
  return {
    t: Array.from(times),
    x: Array.from(times, () => start.x),
    y: Array.from(times, () => start.y),
    events: [],
    steps: { accepted: 0, rejected: 0, evaluations: 1 },
    outcome: { status: 'reached' },
    remark: 'The start is an equilibrium: nothing changes.',
    stiff: false,
    engine: ENGINE_VERSION
  };
}

/**
 * Follows a model from a start.
 * @param spec a checked model. @param options start, span, output times, accuracy, thresholds; see TrajectoryOptions.
 * @returns abundances at the output times reached, events located to 1e-10 in time, and the outcome. A species that a
 *   quota exhausts is an event, after which it is held at 0. Failures of the mathematics are values.
 * @throws RangeError for a negative start, or a span, count or tolerance that makes no sense.
 * @source dormandPrince1980, hairer1993
 */
export function simulate(spec: ModelSpec, options: TrajectoryOptions): TrajectoryResult {
  requireValid(options);
  const { start, span, thresholds = [] } = options;
  const times = new Float64Array(options.times ?? equallySpaced(span, options.samples ?? 201));
  if (options.schedule && options.schedule.length > 0) {
    const { schedule, ...plain } = options;
    return simulateSchedule(spec, plain, Array.from(times), schedule, simulate);
  }
  const system = options.season ? seasonalSystem(spec, options.season) : compile(spec);
  if (!options.season && restsExactly(spec, system, start.x, start.y)) return atRest(start, times);
  const fast = options.season ? null : simulateFast(spec, options, times);
  if (fast !== null) return fast;
  const t: number[] = [];
  const x: number[] = [];
  const y: number[] = [];
  const path = followPath(system, {
    start,
    span,
    rtol: Math.max(TIGHTEST, (options.rtol ?? 1e-8) * STEP_SHARE),
    atol: (options.atol ?? 1e-10) * STEP_SHARE,
    times,
    maxSteps: options.maxSteps ?? 200_000,
    shouldStop: options.shouldStop,
    watch: (c) => thresholdsIn(c, thresholds),
    onPiece(solution, c) {
      solution.t.forEach((time, i) => {
        const z = solution.y.subarray(2 * i, 2 * i + 2);
        t.push(time);
        // The start is given back as it came, without a trip through the logarithm.
        x.push(time === span[0] ? start.x : c.x(z));
        y.push(time === span[0] ? start.y : c.y(z));
      });
    }
  });
  const events = crossingsAtStart(system, options);
  for (const moment of path.moments) {
    if (moment.kind === 'watched') {
      events.push({ t: moment.t, ...moment.tag });
      continue;
    }
    // A species that is gone in an instant passes every level on the way without being seen to.
    for (const { species, below = 0 } of thresholds) {
      if (species === moment.species && below > 0 && below < moment.from) {
        events.push({ t: moment.t, species, kind: 'fell below', value: below });
      }
    }
    events.push({ t: moment.t, species: moment.species, kind: 'ran out', value: 0 });
  }
  const outcome: Outcome = path.outcome.status === 'failed' ? path.outcome : { status: 'reached' };
  return {
    t,
    x,
    y,
    events,
    steps: path.steps,
    outcome,
    remark: remarkOn(outcome, path.stiff),
    stiff: path.stiff,
    engine: ENGINE_VERSION
  };
}
