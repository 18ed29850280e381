/**
 * Many runs of a model under chance: of births and deaths among whole individuals, of the years, or of both. Runs are
 * numbered and each has a stream of its own: chunks of them give the same bytes however they are cut up.
 */
import { equallySpaced } from '../analysis/trajectory';
import type { ModelSpec } from '../model/spec';
import { randomStream, type RandomStream } from '../numeric/random';
import { isPlanar, makePlanarIntegrator, planarModelOf, planarTimes } from '../solve/planar';
import { P0, Q0 } from '../solve/planarRates';
import { B, D, EVENT_RATES, eventRatesOf, SPECIES_WIDTH, type Turnover } from './eventRates';
import {
  advanceEvents,
  END,
  EVENTS,
  FIRST,
  LOST_FIRST,
  LOST_SECOND,
  NEXT,
  RUN_STATE,
  SECOND,
  STOPS,
  TIME,
  type EventStatus
} from './exactEvents';
import { advanceLeaps, type Leap } from './leapEvents';
import { bandsOf, type Bands } from './quantiles';

/**
 * Good and bad years: in each stretch of time the growth per head of a species is higher or lower than its rate by a normal
 * amount, K and all else unchanged.
 */
export interface EnvironmentalNoise {
  /** Standard deviation of growth per head, 1/time; default 0. */
  first?: number;
  second?: number;
  /** Correlation of the two species within a stretch, -1 to 1; default 0. */
  together?: number;
  /** Correlation of a stretch with the one before, -1 to 1; default 0. */
  persistence?: number;
  /** Length of a stretch; default one time unit. */
  every?: number;
}

export interface StochasticPlan {
  /** A model without issues; where individuals are counted, in individuals. */
  spec: ModelSpec;
  seed: number;
  runs: number;
  /** Whole numbers where individuals are counted. */
  start: { x: number; y: number };
  span: readonly [number, number];
  /** Output times, equally spaced, both ends included, default 201. */
  samples?: number;
  /** `exact` and `leap` count individuals; `smooth` follows the equations, with chance only in the years. */
  method: 'exact' | 'leap' | 'smooth';
  turnover?: Turnover;
  noise?: EnvironmentalNoise;
  leap?: Leap;
  /** End a run when the first species is lost. */
  stopsAtLoss?: boolean;
  /** For `smooth`: below this abundance a species counts as lost, at the output time or end of a stretch; default 1. */
  lostBelow?: number;
  /** Most events a run, default 50 million. */
  mostEvents?: number;
  quantiles?: readonly number[];
}

export interface StochasticChunk {
  from: number;
  to: number;
  /** Pairs, time by time, run by run; NaN after a run has ended early. */
  values: Float64Array;
  /** When each species was first lost: pairs; Infinity when it was not. */
  lost: Float64Array;
  events: Float64Array;
  /** 1 where the budget of events, or the integrator, gave up. */
  failed: Uint8Array;
}

export interface StochasticSummary {
  runs: number;
  times: number[];
  bands: Bands;
  /** Means over the runs that are still known, by time. */
  mean: { x: number[]; y: number[] };
  variance: { x: number[]; y: number[] };
  /** Share of runs in which a species has been lost by each time. */
  lostBy: { first: number[]; second: number[]; either: number[] };
  /** Share that lost each species at all, and the mean and standard deviation of the time over those runs. */
  lost: Record<'first' | 'second' | 'either', { share: number; meanTime: number; sdTime: number }>;
  /** Share of runs in which the first species was lost before the second. */
  firstLostFirst: number;
  events: number;
  failed: number;
}

const PER_CALL = 4096;
const LEAPS_PER_CALL = 256;
const MOST_EVENTS = 50_000_000;

function checkPlan(plan: StochasticPlan, from: number, to: number): void {
  const { start, span, method, noise = {}, lostBelow = 1 } = plan;
  if (!(from >= 0 && to >= from && to <= plan.runs)) throw new RangeError('runs outside the plan');
  if (!(span[1] >= span[0]) || !Number.isFinite(span[1] - span[0])) throw new RangeError('the span must run forwards');
  for (const n of [start.x, start.y]) {
    if (!(n >= 0) || !Number.isFinite(n)) throw new RangeError('the start must be two numbers that are not negative');
    if (method !== 'smooth' && !Number.isInteger(n)) throw new RangeError('individuals must be whole numbers');
  }
  const { first = 0, second = 0, together = 0, persistence = 0, every = 1 } = noise;
  if (!(first >= 0) || !(second >= 0) || !(every > 0))
    throw new RangeError('noise and its stretch must not be negative');
  if (!(Math.abs(together) <= 1) || !(Math.abs(persistence) <= 1))
    throw new RangeError('correlations lie from -1 to 1');
  if (!(lostBelow >= 0)) throw new RangeError('the level of loss must be 0 or more');
}

/** Deviations of growth per head in the coming stretch; a run has one of these. */
interface Weather {
  first: number;
  second: number;
  next(stream: RandomStream): void;
}

function weatherOf(noise: EnvironmentalNoise): Weather {
  const { first = 0, second = 0, together = 0, persistence = 0 } = noise;
  const rest = Math.sqrt(1 - together * together);
  const fresh = Math.sqrt(1 - persistence * persistence);
  let before1 = 0;
  let before2 = 0;
  let started = false;
  return {
    first: 0,
    second: 0,
    next(stream) {
      const z1 = stream.normal();
      const z2 = together * z1 + rest * stream.normal();
      // The first stretch is drawn as all others are in the long run.
      before1 = started ? persistence * before1 + fresh * z1 : z1;
      before2 = started ? persistence * before2 + fresh * z2 : z2;
      started = true;
      this.first = first * before1;
      this.second = second * before2;
    }
  };
}

const isNoisy = ({ first = 0, second = 0 }: EnvironmentalNoise): boolean => first > 0 || second > 0;

/** One run after another into a chunk, among whole individuals. */
function makeCounted(plan: StochasticPlan, chunk: StochasticChunk): (i: number, stream: RandomStream) => void {
  const { start, span, noise = {}, leap = {}, mostEvents = MOST_EVENTS } = plan;
  const times = planarTimes(equallySpaced(span, plan.samples ?? 201));
  const nTimes = times.length - 1;
  const still = eventRatesOf(plan.spec, plan.turnover);
  const k = new Float64Array(EVENT_RATES);
  const s = new Float64Array(RUN_STATE);
  const noisy = isNoisy(noise);
  const every = noise.every ?? 1;
  return (i, stream) => {
    const base = 2 * nTimes * i;
    const weather = weatherOf(noise);
    s.fill(0);
    s[TIME] = span[0];
    s[FIRST] = start.x;
    s[SECOND] = start.y;
    s[LOST_FIRST] = start.x > 0 ? Infinity : span[0];
    s[LOST_SECOND] = start.y > 0 ? Infinity : span[0];
    s[STOPS] = plan.stopsAtLoss ? 1 : 0;
    k.set(still);
    let status: EventStatus = 0;
    for (let stretch = 1; status === 0; stretch++) {
      const until = noisy ? Math.min(span[1], span[0] + stretch * every) : span[1];
      if (noisy) {
        weather.next(stream);
        k[B] = still[B]! + Math.max(0, weather.first);
        k[D] = still[D]! - Math.min(0, weather.first);
        k[SPECIES_WIDTH + B] = still[SPECIES_WIDTH + B]! + Math.max(0, weather.second);
        k[SPECIES_WIDTH + D] = still[SPECIES_WIDTH + D]! - Math.min(0, weather.second);
      }
      s[END] = until;
      let part: EventStatus = 0;
      while (part === 0 && s[EVENTS]! < mostEvents) {
        part =
          plan.method === 'leap'
            ? advanceLeaps(s, k, stream, times, chunk.values, base, LEAPS_PER_CALL, leap)
            : advanceEvents(s, k, stream.state, times, chunk.values, base, PER_CALL);
      }
      if (part === 0) {
        chunk.failed[i] = 1;
        break;
      }
      // The end of a stretch is the end of the run only at the end of the span.
      status = part === 1 && until < span[1] ? 0 : part;
    }
    const isKnown = status === 2 || status === 1;
    for (let j = s[NEXT]!; j < nTimes; j++) {
      chunk.values[base + 2 * j] = isKnown ? s[FIRST]! : Number.NaN;
      chunk.values[base + 2 * j + 1] = isKnown ? s[SECOND]! : Number.NaN;
    }
    chunk.lost[2 * i] = s[LOST_FIRST]!;
    chunk.lost[2 * i + 1] = s[LOST_SECOND]!;
    chunk.events[i] = s[EVENTS]!;
  };
}

/** One run after another into a chunk, along the equations with good and bad years. */
function makeSmooth(plan: StochasticPlan, chunk: StochasticChunk): (i: number, stream: RandomStream) => void {
  const { start, span, noise = {}, lostBelow = 1 } = plan;
  const times = equallySpaced(span, plan.samples ?? 201);
  const model = planarModelOf(plan.spec);
  if (!isPlanar(model.rates)) {
    throw new RangeError('a model under a quota has no smooth runs with chance; count individuals instead');
  }
  const k = model.rates.slice();
  const integrator = makePlanarIntegrator({ rtol: 1e-7 });
  const every = noise.every ?? 1;
  const nTimes = times.length;
  // Output times within each stretch, and its end, at which the state is handed on.
  const stretches: { from: number; to: number; first: number; times: Float64Array }[] = [];
  let first = 0;
  for (let j = 0; span[0] + j * every < span[1] || j === 0; j++) {
    const to = Math.min(span[1], span[0] + (j + 1) * every);
    let last = first;
    while (last < nTimes && (times[last]! <= to || to === span[1])) last += 1;
    stretches.push({ from: span[0] + j * every, to, first, times: planarTimes(times.slice(first, last)) });
    first = last;
  }
  return (i, stream) => {
    const base = 2 * nTimes * i;
    const weather = weatherOf(noise);
    let { x, y } = start;
    let known = 0;
    chunk.lost[2 * i] = x >= lostBelow && x > 0 ? Infinity : span[0];
    chunk.lost[2 * i + 1] = y >= lostBelow && y > 0 ? Infinity : span[0];
    const note = (t: number, nx: number, ny: number): void => {
      if (nx < lostBelow && t < chunk.lost[2 * i]!) chunk.lost[2 * i] = t;
      if (ny < lostBelow && t < chunk.lost[2 * i + 1]!) chunk.lost[2 * i + 1] = t;
    };
    for (const stretch of stretches) {
      weather.next(stream);
      k[P0] = model.rates[P0]! + weather.first;
      k[Q0] = model.rates[Q0]! + weather.second;
      const at = base + 2 * stretch.first;
      const run = integrator.run(model.kernel, k, x, y, stretch.from, stretch.to, stretch.times, chunk.values, at);
      for (let j = 0; j < run.written; j++) {
        note(stretch.times[j]!, chunk.values[at + 2 * j]!, chunk.values[at + 2 * j + 1]!);
      }
      known = stretch.first + run.written;
      x = run.x;
      y = run.y;
      if (run.end !== 'reached') {
        chunk.failed[i] = 1;
        break;
      }
      note(stretch.to, x, y);
      if (plan.stopsAtLoss && Math.min(chunk.lost[2 * i]!, chunk.lost[2 * i + 1]!) < Infinity) break;
    }
    chunk.values.fill(Number.NaN, base + 2 * known, base + 2 * nTimes);
  };
}

/**
 * Some of the runs. @param from, to which, 0 <= from <= to <= plan.runs. @param shouldStop asked between runs.
 * @returns their results, or null when stopped. The same bytes however the runs are cut up.
 * @throws RangeError for a plan that makes no sense.
 */
export function runStochasticChunk(
  plan: StochasticPlan,
  from: number,
  to: number,
  shouldStop?: () => boolean
): StochasticChunk | null {
  checkPlan(plan, from, to);
  const n = to - from;
  const chunk: StochasticChunk = {
    from,
    to,
    values: new Float64Array(2 * (plan.samples ?? 201) * n),
    lost: new Float64Array(2 * n),
    events: new Float64Array(n),
    failed: new Uint8Array(n)
  };
  const run = plan.method === 'smooth' ? makeSmooth(plan, chunk) : makeCounted(plan, chunk);
  for (let i = 0; i < n; i++) {
    if (shouldStop?.()) return null;
    run(i, randomStream(plan.seed, from + i));
  }
  return chunk;
}

/** Mean and standard deviation of the finite times, and their share of all. */
function timesLost(times: readonly number[]): { share: number; meanTime: number; sdTime: number } {
  const finite = times.filter(Number.isFinite);
  const meanTime = finite.reduce((sum, t) => sum + t, 0) / finite.length;
  const sum = finite.reduce((total, t) => total + (t - meanTime) ** 2, 0);
  return { share: finite.length / times.length, meanTime, sdTime: Math.sqrt(sum / Math.max(1, finite.length - 1)) };
}

/** Share of lost times at or before each time, which ascend. */
function sharesBy(lost: readonly number[], times: readonly number[]): number[] {
  const sorted = Float64Array.from(lost).sort();
  let done = 0;
  return times.map((t) => {
    while (done < sorted.length && sorted[done]! <= t) done += 1;
    return done / sorted.length;
  });
}

/** Mean and variance over the runs by time, NaN left out. @param offset 0 for the first species, 1 for the second. */
function momentsBy(
  parts: readonly Float64Array[],
  nTimes: number,
  offset: number
): { mean: number[]; variance: number[] } {
  const mean = new Float64Array(nTimes);
  const square = new Float64Array(nTimes);
  const count = new Float64Array(nTimes);
  for (const part of parts) {
    for (let at = offset, j = 0; at < part.length; at += 2, j = j + 1 === nTimes ? 0 : j + 1) {
      const value = part[at]!;
      if (value !== value) continue;
      // Updated run by run, as a difference of large sums would lose what it is after.
      count[j] = count[j]! + 1;
      const step = value - mean[j]!;
      mean[j] = mean[j]! + step / count[j]!;
      square[j] = square[j]! + step * (value - mean[j]!);
    }
  }
  return { mean: Array.from(mean), variance: Array.from(square, (sum, j) => sum / Math.max(1, count[j]! - 1)) };
}

/**
 * Puts chunks together. @param chunks all runs of the plan, each once, in any order.
 * @throws RangeError when runs are missing or there twice.
 */
export function summariseStochastic(plan: StochasticPlan, chunks: readonly StochasticChunk[]): StochasticSummary {
  const ordered = [...chunks].sort((a, b) => a.from - b.from);
  const done = ordered.reduce((next, { from, to }) => (from === next ? to : Number.NaN), 0);
  if (done !== plan.runs) throw new RangeError('runs are missing, or there twice');
  const nTimes = plan.samples ?? 201;
  const times = equallySpaced(plan.span, nTimes);
  const parts = ordered.map((chunk) => chunk.values);
  const first = ordered.flatMap(({ lost }) => Array.from({ length: lost.length / 2 }, (_, i) => lost[2 * i]!));
  const second = ordered.flatMap(({ lost }) => Array.from({ length: lost.length / 2 }, (_, i) => lost[2 * i + 1]!));
  const either = first.map((t, i) => Math.min(t, second[i]!));
  const x = momentsBy(parts, nTimes, 0);
  const y = momentsBy(parts, nTimes, 1);
  const sum = (list: Iterable<number>): number => {
    let total = 0;
    for (const value of list) total += value;
    return total;
  };
  return {
    runs: plan.runs,
    times,
    bands: bandsOf(parts, nTimes, plan.quantiles ?? [0.05, 0.25, 0.5, 0.75, 0.95]),
    mean: { x: x.mean, y: y.mean },
    variance: { x: x.variance, y: y.variance },
    lostBy: { first: sharesBy(first, times), second: sharesBy(second, times), either: sharesBy(either, times) },
    lost: { first: timesLost(first), second: timesLost(second), either: timesLost(either) },
    firstLostFirst: first.filter((t, i) => t < second[i]!).length / plan.runs,
    events: sum(ordered.map((chunk) => sum(chunk.events))),
    failed: sum(ordered.map((chunk) => sum(chunk.failed)))
  };
}

/** Runs a chunk. */
export const STOCHASTIC_CHUNK = 50;

/** All runs, here and now. @returns null when stopped. See runStochasticChunk. */
export function runStochastic(plan: StochasticPlan, shouldStop?: () => boolean): StochasticSummary | null {
  const chunks: StochasticChunk[] = [];
  for (let from = 0; from < plan.runs; from += STOCHASTIC_CHUNK) {
    const chunk = runStochasticChunk(plan, from, Math.min(plan.runs, from + STOCHASTIC_CHUNK), shouldStop);
    if (chunk === null) return null;
    chunks.push(chunk);
  }
  return summariseStochastic(plan, chunks);
}
