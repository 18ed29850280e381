/** Closed orbits that attract or repel: found on a section through an equilibrium, measured over one turn. */
import { compile } from '../model/compile';
import type { ModelSpec, SpeciesKey, System } from '../model/spec';
import { bracketedRoot } from '../solve/bracket';
import { integrate } from '../solve/integrate';
import type { EventSpec } from '../solve/problem';
import { coordinatesFor, formFor, netAdditionOf, type Coordinates } from './coordinates';
import { excludeCycles } from './excludeCycles';
import type { EquilibriaReport, Equilibrium } from './results';

export interface CyclePoint {
  /** Time since the start of the turn. */
  t: number;
  x: number;
  y: number;
}

export interface LimitCycle {
  /** Index, in the report, of the equilibrium it was found around. */
  around: number;
  period: number;
  /** One turn, the first point repeated as the last; close together where the path bends or hurries. */
  points: CyclePoint[];
  xMin: number;
  xMax: number;
  yMin: number;
  yMax: number;
  /** Averages over time. */
  xMean: number;
  yMean: number;
  /** Factor by which a small deviation shrinks (below 1) or grows in one turn. */
  multiplier: number;
  stability: 'stable' | 'unstable' | 'undetermined';
}

/** Smallest deviation from the equilibrium looked at, in the logarithm of the resource. */
const INNERMOST = 1e-3;
/** Where the resource has no ceiling of its own, e^5 times the equilibrium is as far as the search goes. */
const OUTERMOST_UNBOUNDED = 5;
const GRID = 32;
/** Turns followed in the hope that they settle at once, before the grid is used. */
const ITERATES = 12;
/** The search begins further in when a cycle is found to be smaller than `INNERMOST`, down to this. */
const SMALLEST = 1e-6;
/** Tolerances of steps while looking for a cycle and on it, and how closely its place on the section is wanted. */
interface Accuracy {
  scan: number;
  fine: number;
  place: number;
}
const ACCURACY: Record<'full' | 'drawing', Accuracy> = {
  full: { scan: 1e-10, fine: 1e-12, place: 1e-13 },
  drawing: { scan: 1e-7, fine: 1e-8, place: 1e-8 }
};
/** A turn may take this many times what it takes close to the equilibrium. */
const LONGEST_TURN = 400;
const MOST_STEPS = 20_000;
/** Returns closer to the start than this, relative, on each of three turns mean that all orbits are closed. */
const CLOSED = 1e-6;
/** |ln multiplier| below this decides nothing. */
const UNDECIDED = 1e-7;

/** Return map of the half line y = yE, x > xE, in s = ln(x/xE). */
interface Section {
  /** Where the path from s comes back, and when; null when it does not. */
  turn(s: number, rtol: number): { s: number; time: number } | null;
  sMax: number;
  accuracy: Accuracy;
  coordinates: Coordinates;
  start(s: number): Float64Array;
}

/** Largest abundance of the resource that can be sustained without consumers: no closed orbit goes beyond it. */
function resourceCeiling(system: System, xE: number): number {
  const slope = new Float64Array(2);
  const grows = (x: number): boolean => {
    system.rhs(x, 0, slope);
    return slope[0]! > 0;
  };
  const limit = xE * Math.exp(OUTERMOST_UNBOUNDED);
  let high = xE;
  while (high < limit && grows(high)) high *= 1.5;
  if (high >= limit) return limit;
  let low = high / 1.5;
  for (let i = 0; i < 60; i++) {
    const middle = (low + high) / 2;
    if (grows(middle)) low = middle;
    else high = middle;
  }
  return high;
}

function sectionThrough(
  spec: ModelSpec,
  system: System,
  point: Equilibrium,
  { shouldStop, accuracy = 'full' }: CycleOptions
): Section {
  const c = coordinatesFor(system, [
    formFor(point.x, netAdditionOf(spec, 'first')),
    formFor(point.y, netAdditionOf(spec, 'second'))
  ]);
  const home = new Float64Array(2);
  c.fromPlane(point.x, point.y, home);
  const level = home[1]!;
  // Only above the equilibrium's resource does the consumer increase there, so every rise through the line is a return.
  const events: EventSpec[] = [{ value: (_, z) => z[1]! - level, direction: 1, terminal: true, betweenSteps: true }];
  for (const i of [0, 1]) {
    if (c.forms[i] === 'plain')
      events.push({ value: (_, z) => z[i]!, direction: -1, terminal: true, betweenSteps: true });
  }
  const horizon = (LONGEST_TURN * 2 * Math.PI) / Math.sqrt(Math.abs(point.determinant));
  const start = (s: number): Float64Array => {
    const z = new Float64Array(2);
    c.fromPlane(point.x * Math.exp(s), point.y, z);
    z[1] = level;
    return z;
  };
  return {
    coordinates: c,
    accuracy: ACCURACY[accuracy],
    sMax: Math.log(resourceCeiling(system, point.x) / point.x),
    start,
    turn(s, rtol) {
      const solution = integrate(
        { rhs: c.rhs, jacobian: c.jacobian, y0: start(s), span: [0, horizon], events },
        {
          ...c.tolerances(rtol, rtol * Math.min(point.x, point.y)),
          maxSteps: MOST_STEPS,
          times: [],
          ...(shouldStop && { shouldStop })
        }
      );
      if (solution.outcome.status !== 'event' || solution.outcome.event !== 0) return null;
      return { s: Math.log(c.x(solution.yEnd) / point.x), time: solution.tEnd };
    }
  };
}

/** ln(return/start) at scanning accuracy; NaN where the path does not come back. */
function gainAt(section: Section, s: number): number {
  const back = section.turn(s, section.accuracy.scan);
  return back === null || !(back.s > 0) ? NaN : Math.log(back.s / s);
}

/** A stretch of the section on whose ends the return map moves different ways, and where within it the cycle may well be. */
interface Bracket {
  low: number;
  high: number;
  guess: number | null;
}

/**
 * Paths cannot cross, so the return map increases and its iterates are monotone: from the outermost start they fall to the
 * largest fixed point, from the innermost they rise to the smallest. When both arrive at one place there is exactly one
 * cycle; when the outermost falls to the equilibrium there is none.
 * @returns the brackets that prove it, or null when the iterates are too slow to tell.
 */
function bracketsByIteration(section: Section, from: number): Bracket[] | null {
  let outer = section.sMax;
  let settled = false;
  for (let i = 0; i < ITERATES && !settled; i++) {
    const next = section.turn(outer, section.accuracy.scan)?.s ?? NaN;
    if (!(next < outer)) return null;
    if (next < from) return [];
    settled = outer - next < 1e-6 * outer;
    outer = next;
  }
  if (!settled) return null;
  // The limit lies below the last iterate by about as much again; the inner ones need only come this near.
  let inner = from;
  for (let i = 0; i < ITERATES; i++) {
    const next = section.turn(inner, section.accuracy.scan)?.s ?? NaN;
    if (!(next > inner)) return null;
    inner = next;
    if (inner > outer * (1 - 1e-3)) {
      return [{ low: Math.min(inner, outer * (1 - 1e-3)), high: outer * (1 + 1e-3), guess: outer }];
    }
  }
  return null;
}

/** Sign changes of the gain on a grid, and hidden pairs of them. */
function bracketsOnGrid(section: Section, from: number, to: number): Bracket[] {
  const gain = (s: number): number => gainAt(section, s);
  const s = Array.from({ length: GRID + 1 }, (_, i) => from * Math.pow(to / from, i / GRID));
  if ([0.6, 0.7, 0.8].every((part) => Math.abs(gain(s[Math.round(part * GRID)]!)) < CLOSED)) return [];
  const g = s.map(gain);
  const brackets: Bracket[] = [];
  const note = (low: number, high: number) => brackets.push({ low, high, guess: null });
  for (let i = 1; i <= GRID; i++) {
    if (g[i - 1]! * g[i]! < 0) note(s[i - 1]!, s[i]!);
    if (i < 2) continue;
    const [left, middle, right] = [g[i - 2]!, g[i - 1]!, g[i]!];
    const sign = Math.sign(middle);
    if (!(sign * left > sign * middle && sign * right > sign * middle && sign * middle > 0)) continue;
    // The gain comes nearest to zero here: two orbits may hide between the points of the grid.
    let low = s[i - 2]!;
    let high = s[i]!;
    for (let j = 0; j < 24; j++) {
      const a = low + 0.382 * (high - low);
      const b = low + 0.618 * (high - low);
      const ga = gain(a);
      const gb = gain(b);
      const through = sign * ga < 0 ? a : sign * gb < 0 ? b : null;
      if (through !== null) {
        note(s[i - 2]!, through);
        note(through, s[i]!);
        break;
      }
      if (sign * ga < sign * gb) high = b;
      else low = a;
    }
  }
  return brackets.sort((p, q) => p.low - q.low);
}

/** The fixed point of the return map in a bracket: by secants from a guess where there is one, else within the bracket. */
function place(section: Section, { low, high, guess }: Bracket): { s: number; time: number } | null {
  const { fine, place: wanted } = section.accuracy;
  if (guess !== null) {
    let last = guess;
    let turn = section.turn(last, fine);
    let missed = turn ? turn.s - last : Number.NaN;
    let s = turn?.s ?? Number.NaN;
    for (let i = 0; i < 5 && s > low && s < high; i++) {
      turn = section.turn(s, fine);
      if (turn === null) break;
      const miss = turn.s - s;
      if (Math.abs(miss) <= wanted * Math.max(1, s)) return { s, time: turn.time };
      const next = s - (miss * (s - last)) / (miss - missed);
      [last, missed, s] = [s, miss, next];
    }
  }
  const miss = (s: number): number => (section.turn(s, fine)?.s ?? Number.NaN) - s;
  const [atLow, atHigh] = [miss(low), miss(high)];
  if (!(atLow * atHigh <= 0)) return null;
  const s = bracketedRoot(miss, low, high, atLow, atHigh, wanted);
  const turn = section.turn(s, fine);
  return turn !== null && Math.abs(turn.s - s) < 1e-6 * s ? { s, time: turn.time } : null;
}

/** Follows one turn with its integrals. The section's s must be a fixed point of the return map. */
function measure(system: System, section: Section, around: number, s: number, period: number): LimitCycle {
  const c = section.coordinates;
  const { fine } = section.accuracy;
  const slopes = new Float64Array(4);
  const plane = section.start(s);
  const x0 = c.x(plane);
  const y0 = c.y(plane);
  const speed = new Float64Array(2);
  const rhs = (t: number, z: Float64Array, out: Float64Array): void => {
    c.rhs(t, z, out);
    const x = c.x(z);
    const y = c.y(z);
    system.jacobian(x, y, slopes);
    out[2] = slopes[0]! + slopes[3]!;
    out[3] = x / period;
    out[4] = y / period;
  };
  const events: EventSpec[] = [0, 1].map((i) => ({
    value: (t, z) => {
      c.rhs(t, z, speed);
      return speed[i]!;
    },
    direction: 0,
    terminal: false
  }));
  const { rtol, atol } = c.tolerances(fine, fine * Math.min(x0, y0));
  const solution = integrate(
    { rhs, y0: [plane[0]!, plane[1]!, 0, 0, 0], span: [0, period], events },
    {
      rtol: [...rtol, fine, fine, fine],
      atol: [...atol, fine, fine * x0, fine * y0],
      method: 'dormand-prince'
    }
  );
  const points = Array.from(solution.t, (t, i) => ({
    t,
    x: c.x(solution.y.subarray(5 * i, 5 * i + 2)),
    y: c.y(solution.y.subarray(5 * i, 5 * i + 2))
  }));
  const xs = [x0, ...solution.events.map((e) => c.x(e.y))];
  const ys = [y0, ...solution.events.map((e) => c.y(e.y))];
  const exponent = solution.yEnd[2]!;
  return {
    around,
    period,
    points,
    xMin: Math.min(...xs),
    xMax: Math.max(...xs),
    yMin: Math.min(...ys),
    yMax: Math.max(...ys),
    xMean: solution.yEnd[3]!,
    yMean: solution.yEnd[4]!,
    multiplier: Math.exp(exponent),
    stability: Math.abs(exponent) < UNDECIDED ? 'undetermined' : exponent < 0 ? 'stable' : 'unstable'
  };
}

export interface CycleOptions {
  /** `drawing` is good to a few digits, and some times faster; default `full`. */
  accuracy?: keyof typeof ACCURACY;
  shouldStop?: (() => boolean) | undefined;
}

/**
 * Limit cycles of a model around its equilibria.
 * @param spec a checked model. @param report its equilibria.
 * @returns cycles from the innermost outwards; none where excludeCycles proves that there are none, as for all of
 *   competition, and none for the classical model, whose orbits are all closed.
 *   One strongly attracting cycle is proven to be the only one around its equilibrium; otherwise a grid of starts is
 *   refined by bracketing, and two cycles nearer to each other than the grid may both be missed.
 *   Where `shouldStop` said yes, only those found until then. Never throws.
 * @source strogatz2015 §8.7 (return map), kuznetsov2004 §1.5 (multiplier by Liouville's formula), hofbauerSigmund1998 §3.4
 */
export function limitCycles(spec: ModelSpec, report: EquilibriaReport, options: CycleOptions = {}): LimitCycle[] {
  const rotating = report.equilibria.some(
    (point) => point.feasible && point.x > 0 && point.y > 0 && point.determinant > 0
  );
  if (!rotating || excludeCycles(spec) !== null) return [];
  const system = compile(spec);
  const found: LimitCycle[] = [];
  report.equilibria.forEach((point, index) => {
    if (!point.feasible || !(point.x > 0) || !(point.y > 0)) return;
    // A closed orbit goes round points whose indices sum to 1, hence round at least one that is no saddle.
    if (!(point.determinant > 0) || point.class === 'centre') return;
    const section = sectionThrough(spec, system, point, options);
    if (!(section.sMax > INNERMOST)) return;
    let from = INNERMOST;
    while (from > SMALLEST && point.trace * gainAt(section, from) < 0) from /= 10;
    const brackets = bracketsByIteration(section, from) ?? bracketsOnGrid(section, from, section.sMax);
    for (const bracket of brackets) {
      const fixed = place(section, bracket);
      if (fixed === null) continue;
      const cycle = measure(system, section, index, fixed.s, fixed.time);
      const known = found.some(
        (other) =>
          Math.abs(other.period / cycle.period - 1) < 1e-6 &&
          Math.abs(other.xMax / cycle.xMax - 1) < 1e-6 &&
          Math.abs(other.yMax / cycle.yMax - 1) < 1e-6
      );
      if (!known) found.push(cycle);
    }
  });
  return found;
}

/**
 * Share of the time that a species spends below a level on a cycle, 0 to 1; abundance is taken as exponential between points.
 * @param level abundance. @returns good to about 1e-6 of the period. Never throws.
 */
export function shareBelow(cycle: LimitCycle, species: SpeciesKey, level: number): number {
  let below = 0;
  for (let i = 1; i < cycle.points.length; i++) {
    const p = cycle.points[i - 1]!;
    const q = cycle.points[i]!;
    const a = species === 'first' ? p.x : p.y;
    const b = species === 'first' ? q.x : q.y;
    const length = q.t - p.t;
    if (a < level && b < level) below += length;
    else if (a < level !== b < level) {
      const part = Math.log(level / a) / Math.log(b / a);
      below += length * (a < level ? part : 1 - part);
    }
  }
  return below / cycle.period;
}
