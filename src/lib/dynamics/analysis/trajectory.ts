/** One path of a model from one start, with the moments a manager asks about. */
import { compile } from '../model/compile';
import type { ModelSpec, SpeciesKey, System } from '../model/spec';
import { integrate } from '../solve/integrate';
import type { EventSpec, Outcome, Solution } from '../solve/problem';
import { ENGINE_VERSION } from '../version';
import { coordinatesFor, formFor, netAdditionOf, type Coordinates, type Form } from './coordinates';

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
  engine: string;
}

/**
 * Errors made in each step add up along the way, so steps are held to a thousandth of the accuracy asked for: the answer,
 * and not merely each step, is then good to it unless the path itself is chaotic or very long.
 */
const STEP_SHARE = 1e-3;
/** Rounding makes tighter steps pointless. */
const TIGHTEST = 5e-14;
const LARGEST = 1e300;
/** A ceiling that follows the resource collapses with it; the last part of the way is the same to any accuracy asked. */
const COLLAPSE = 1e-12;

type Stop = 'first ran out' | 'second ran out' | 'overflow' | 'settled in';
type Watched = { spec: EventSpec } & ({ stop: Stop } | { event: Omit<TrajectoryEvent, 't'> });

/** Equally spaced times, both ends exact. @param count at least 2. */
export function equallySpaced([t0, t1]: readonly [number, number], count: number): number[] {
  return Array.from({ length: count }, (_, i) => (i === count - 1 ? t1 : t0 + ((t1 - t0) * i) / (count - 1)));
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

/** Everything to watch for while the species have given forms. */
function watchedIn(
  c: Coordinates,
  spec: ModelSpec,
  options: TrajectoryOptions,
  floor: number,
  lift: number
): Watched[] {
  const list: Watched[] = [];
  const read = (form: Form, i: number, level: number) => {
    const target = form === 'log' ? Math.log(level) : level;
    return (_: number, z: Float64Array): number => z[i]! - target;
  };
  const forwards = options.span[1] >= options.span[0];
  for (const [i, species] of (['first', 'second'] as const).entries()) {
    const form = c.forms[i]!;
    if (form === 'zero') continue;
    list.push({ spec: { value: read(form, i, LARGEST), direction: 1, terminal: true }, stop: 'overflow' });
    if (form === 'plain' && netAdditionOf(spec, species) < 0 && forwards) {
      const value = read(form, i, i === 0 ? floor : 0);
      list.push({ spec: { value, direction: -1, terminal: true }, stop: i === 0 ? 'first ran out' : 'second ran out' });
    }
    if (form === 'plain' && netAdditionOf(spec, species) > 0) {
      const value = read(form, i, lift * netAdditionOf(spec, species));
      list.push({ spec: { value, direction: 1, terminal: true }, stop: 'settled in' });
    }
    for (const threshold of options.thresholds ?? []) {
      if (threshold.species !== species) continue;
      if (threshold.below !== undefined && threshold.below > 0) {
        const event = { species, kind: 'fell below', value: threshold.below } as const;
        list.push({ spec: { value: read(form, i, threshold.below), direction: -1, terminal: false }, event });
      }
      if (threshold.above !== undefined && threshold.above > 0) {
        const event = { species, kind: 'rose above', value: threshold.above } as const;
        list.push({ spec: { value: read(form, i, threshold.above), direction: 1, terminal: false }, event });
      }
    }
  }
  return list;
}

/** A start that stands exactly on a threshold and leaves it at once has crossed it at the first moment. */
function crossingsAtStart(system: System, options: TrajectoryOptions): TrajectoryEvent[] {
  const { start, span } = options;
  const slope = new Float64Array(2);
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
 * Follows a model from a start.
 * @param spec a checked model. @param options start, span, output times, accuracy, thresholds; see TrajectoryOptions.
 * @returns abundances at the output times reached, events located to 1e-10 in time, and the outcome. A species that a
 *   quota exhausts is an event, after which it is held at 0. Failures of the mathematics are values.
 * @throws RangeError for a negative start, or a span, count or tolerance that makes no sense.
 * @source dormandPrince1980, hairer1993
 */
export function simulate(spec: ModelSpec, options: TrajectoryOptions): TrajectoryResult {
  requireValid(options);
  const system = compile(spec);
  const [t0, t1] = options.span;
  const times = Float64Array.from(options.times ?? equallySpaced(options.span, options.samples ?? 201));
  const rtol = Math.max(TIGHTEST, (options.rtol ?? 1e-8) * STEP_SHARE);
  const atol = (options.atol ?? 1e-10) * STEP_SHARE;
  const followsResource =
    spec.interaction === 'consumer-resource' &&
    spec.second.growth?.kind === 'leslie' &&
    netAdditionOf(spec, 'first') < 0;
  const floor = followsResource ? COLLAPSE * options.start.x : 0;
  const lift = Math.abs(t1 - t0) * 1e-3;

  const result: TrajectoryResult = {
    t: [],
    x: [],
    y: [],
    events: crossingsAtStart(system, options),
    steps: { accepted: 0, rejected: 0, evaluations: 0 },
    outcome: { status: 'reached' },
    remark: null,
    stiff: false,
    engine: ENGINE_VERSION
  };
  let { x, y } = options.start;
  let t = t0;
  let forms: [Form, Form] = [formFor(x, netAdditionOf(spec, 'first')), formFor(y, netAdditionOf(spec, 'second'))];
  let stepsLeft = options.maxSteps ?? 200_000;

  for (;;) {
    const c = coordinatesFor(system, forms);
    const watched = watchedIn(c, spec, options, floor, lift);
    const state = new Float64Array(2);
    c.fromPlane(x, y, state);
    const solution = integrate(
      { rhs: c.rhs, jacobian: c.jacobian, y0: state, span: [t, t1], events: watched.map((w) => w.spec) },
      {
        ...c.tolerances(rtol, atol),
        times: times.subarray(result.t.length),
        maxSteps: stepsLeft,
        ...(options.shouldStop && { shouldStop: options.shouldStop })
      }
    );
    collect(result, solution, c, options);
    stepsLeft -= solution.steps.accepted + solution.steps.rejected;
    let stop: Stop | null = null;
    for (const found of solution.events) {
      const what = watched[found.event]!;
      if ('event' in what) result.events.push({ t: found.t, ...what.event });
      else stop = what.stop;
    }
    if (solution.outcome.status !== 'event') {
      result.outcome = solution.outcome;
      break;
    }
    t = solution.tEnd;
    x = c.x(solution.yEnd);
    y = c.y(solution.yEnd);
    if (stop === 'overflow') {
      result.outcome = { status: 'failed', reason: 'notFinite', t };
      break;
    }
    if (stop === 'first ran out') {
      result.events.push({ t, species: 'first', kind: 'ran out', value: 0 });
      if (followsResource && y > 0) {
        // The consumer's ceiling is a multiple of nothing: it is gone in the same instant.
        for (const { species, below } of options.thresholds ?? []) {
          if (species === 'second' && below !== undefined && below < y) {
            result.events.push({ t, species, kind: 'fell below', value: below });
          }
        }
        result.events.push({ t, species: 'second', kind: 'ran out', value: 0 });
        y = 0;
        forms = ['zero', formFor(0, netAdditionOf(spec, 'second'))];
      } else forms = ['zero', forms[1]];
      x = 0;
    } else if (stop === 'second ran out') {
      result.events.push({ t, species: 'second', kind: 'ran out', value: 0 });
      forms = [forms[0], 'zero'];
      y = 0;
    } else {
      forms = [formFor(x, netAdditionOf(spec, 'first')), formFor(y, netAdditionOf(spec, 'second'))];
    }
  }
  result.remark = remarkOn(result.outcome, result.stiff);
  return result;
}

function collect(result: TrajectoryResult, solution: Solution, c: Coordinates, options: TrajectoryOptions): void {
  for (let i = 0; i < solution.t.length; i++) {
    const t = solution.t[i]!;
    const z = solution.y.subarray(2 * i, 2 * i + 2);
    const atStart = t === options.span[0];
    result.t.push(t);
    // The start is given back as it came, without a trip through the logarithm.
    result.x.push(atStart ? options.start.x : c.x(z));
    result.y.push(atStart ? options.start.y : c.y(z));
  }
  result.steps.accepted += solution.steps.accepted;
  result.steps.rejected += solution.steps.rejected;
  result.steps.evaluations += solution.steps.evaluations;
  result.stiff ||= solution.stiff;
}
