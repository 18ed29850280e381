/** Models whose growth rate or capacity follows the seasons, and what repeats itself from year to year in them. */
import { checkModel } from '../model/check';
import { compile } from '../model/compile';
import { parametersOf, withParameter } from '../model/parameters';
import type { ModelSpec, SpeciesKey, System } from '../model/spec';
import { integrate } from '../solve/integrate';
import type { EventSpec } from '../solve/problem';
import { coordinatesFor, formFor, netAdditionOf, type Coordinates, type Form } from './coordinates';
import { findEquilibria } from './equilibria';
import type { Complex } from './results';

/** A cosine about the value in the model: value (1 + amplitude cos(2 pi (t - peak)/year)). */
export interface Season {
  species: SpeciesKey;
  of: 'r' | 'K';
  /** Share of the value, 0 to 1; below 1 for a capacity. */
  amplitude: number;
  /** A time at which the value is highest. */
  peak: number;
  /** Length of the year in the study's time unit. */
  year: number;
}

/** A path that is the same every year, or a state at rest all year. */
export interface YearlyCycle {
  /** State at time 0, and again a year later. */
  x: number;
  y: number;
  /** Factors by which small deviations grow in a year, the larger in size first. */
  multipliers: [Complex, Complex];
  stability: 'stable' | 'unstable' | 'undetermined';
  xMin: number;
  xMax: number;
  xMean: number;
  yMin: number;
  yMax: number;
  yMean: number;
}

export interface YearlyCycles {
  /** Ascending by x, then y. */
  cycles: YearlyCycle[];
  /** What the search can have missed, in one sentence. */
  remark: string;
}

const RTOL = 1e-12;
const ITERATIONS = 25;
/** A multiplier nearer to 1 in size than this decides nothing. */
const UNDECIDED = 1e-8;
/** Years followed in search of what attracts. */
const YEARS = 60;

const pathOf = (season: Season): string => `${season.species}.growth.${season.of}`;

/** Present value of the number that follows the season. @throws RangeError where the season fits no such number */
function valueOf(spec: ModelSpec, season: Season): number {
  const { amplitude, peak, year, of } = season;
  const found = parametersOf(spec).find(({ path }) => path === pathOf(season));
  if (!found) throw new RangeError(`This model has no ${pathOf(season)} that could follow a season.`);
  if (!(year > 0) || !Number.isFinite(year)) throw new RangeError('The year must be a length of time above 0.');
  if (!Number.isFinite(peak)) throw new RangeError('The peak must be a time.');
  if (!(amplitude >= 0 && (of === 'r' ? amplitude <= 1 : amplitude < 1))) {
    throw new RangeError('The amplitude must lie between 0 and 1, and below 1 for a capacity.');
  }
  const lowest = withParameter(spec, pathOf(season), found.value * (1 - amplitude));
  const issue = of === 'K' ? checkModel(lowest)[0] : undefined;
  if (issue) throw new RangeError(`In the worst season this is no model: ${issue.path} ${issue.message}`);
  return found.value;
}

/**
 * A model under a season, as a system that is moved to a time before it is read.
 *
 * Every rate is a straight line in r, and one in 1/K, so that the model at any time lies on the line through two compiled
 * ones: nothing is compiled on the way.
 * @throws RangeError for a season that fits no number of the model or leaves it unsound
 */
export function seasonalSystem(spec: ModelSpec, season: Season): System {
  const mean = valueOf(spec, season);
  const other = season.of === 'K' ? 2 * mean : mean + (Math.abs(mean) || 1);
  const base = compile(spec);
  const shifted = compile(withParameter(spec, pathOf(season), other));
  const along = season.of === 'K' ? (value: number) => 1 / value : (value: number) => value;
  const line = along(other) - along(mean);
  const angular = (2 * Math.PI) / season.year;
  const buffer = new Float64Array(4);
  let weight = 0;
  const blend = (size: number, out: Float64Array): void => {
    for (let i = 0; i < size; i++) out[i] = out[i]! + weight * (buffer[i]! - out[i]!);
  };
  return {
    spec,
    firstAxisInvariant: base.firstAxisInvariant,
    secondAxisInvariant: base.secondAxisInvariant,
    moveTo(t) {
      const value = mean * (1 + season.amplitude * Math.cos(angular * (t - season.peak)));
      weight = (along(value) - along(mean)) / line;
    },
    rhs(x, y, out) {
      base.rhs(x, y, out);
      shifted.rhs(x, y, buffer);
      blend(2, out);
    },
    jacobian(x, y, out) {
      base.jacobian(x, y, out);
      shifted.jacobian(x, y, buffer);
      blend(4, out);
    },
    perHead(x, y, out) {
      base.perHead(x, y, out);
      shifted.perHead(x, y, buffer);
      blend(2, out);
    },
    magnitude: (x, y, out) => base.magnitude(x, y, out)
  };
}

interface Year {
  /** State after a year, in the coordinates of the start. */
  z: Float64Array;
  /** Row-major slopes of it by the state at the start. */
  slopes: Float64Array;
  /** Growth per head of each species, summed over the year: what an absent one would gain. */
  gained: [number, number];
  means: [number, number];
}

/** Follows one year with its slopes; null where that cannot be done. */
function overOneYear(system: System, c: Coordinates, z0: Float64Array, year: number): Year | null {
  const { moveTo } = system;
  const slopes = new Float64Array(4);
  const perHead = new Float64Array(2);
  const rhs = (t: number, z: Float64Array, out: Float64Array): void => {
    c.rhs(t, z, out);
    c.jacobian(t, z, slopes);
    const [a, b, p, q] = slopes as unknown as [number, number, number, number];
    out[2] = a * z[2]! + b * z[4]!;
    out[3] = a * z[3]! + b * z[5]!;
    out[4] = p * z[2]! + q * z[4]!;
    out[5] = p * z[3]! + q * z[5]!;
    const [x, y] = [c.x(z), c.y(z)];
    moveTo?.(t);
    system.perHead(x, y, perHead);
    out[6] = perHead[0]!;
    out[7] = perHead[1]!;
    out[8] = x / year;
    out[9] = y / year;
  };
  const { rtol, atol } = c.tolerances(RTOL, RTOL * Math.max(c.x(z0), c.y(z0)));
  const size = [Math.max(c.x(z0), Number.MIN_VALUE), Math.max(c.y(z0), Number.MIN_VALUE)];
  const solution = integrate(
    { rhs, y0: [z0[0]!, z0[1]!, 1, 0, 0, 1, 0, 0, 0, 0], span: [0, year] },
    {
      rtol: [...rtol, ...new Array<number>(8).fill(RTOL)],
      atol: [...atol, ...new Array<number>(6).fill(RTOL), RTOL * size[0]!, RTOL * size[1]!],
      times: [],
      // A year seen at too few moments could look like none.
      maxStep: year / 8
    }
  );
  if (solution.outcome.status !== 'reached' || !solution.yEnd.every(Number.isFinite)) return null;
  const end = solution.yEnd;
  return {
    z: end.slice(0, 2),
    slopes: end.slice(2, 6),
    gained: [end[6]!, end[7]!],
    means: [end[8]!, end[9]!]
  };
}

function eigenvaluesOf(a: number, b: number, c: number, d: number): [Complex, Complex] {
  const half = (a + d) / 2;
  const root = ((a - d) / 2) ** 2 + b * c;
  if (root < 0) {
    return [
      { re: half, im: Math.sqrt(-root) },
      { re: half, im: -Math.sqrt(-root) }
    ];
  }
  const strong = half + (half < 0 ? -Math.sqrt(root) : Math.sqrt(root));
  // The smaller by quotient, so that a strongly contracting direction keeps its digits.
  return [
    { re: strong, im: 0 },
    { re: strong === 0 ? 0 : (a * d - b * c) / strong, im: 0 }
  ];
}

function multipliersOf(forms: readonly [Form, Form], { slopes, gained }: Year): [Complex, Complex] {
  const [a, b, c, d] = slopes as unknown as [number, number, number, number];
  if (forms[0] !== 'zero' && forms[1] !== 'zero') return eigenvaluesOf(a, b, c, d);
  const own = (i: 0 | 1): number => (forms[i] === 'zero' ? Math.exp(gained[i]) : i === 0 ? a : d);
  const pair: [Complex, Complex] = [
    { re: own(0), im: 0 },
    { re: own(1), im: 0 }
  ];
  return Math.abs(pair[0].re) >= Math.abs(pair[1].re) ? pair : [pair[1], pair[0]];
}

/** Lowest and highest abundances of a year. */
function extremesOf(c: Coordinates, z0: Float64Array, year: number): { x: [number, number]; y: [number, number] } {
  const speed = new Float64Array(2);
  const events: EventSpec[] = [0, 1].flatMap((i) => {
    if (c.forms[i] === 'zero') return [];
    const value = (t: number, z: Float64Array): number => {
      c.rhs(t, z, speed);
      return speed[i]!;
    };
    return [{ value, direction: 0, terminal: false }];
  });
  const { rtol, atol } = c.tolerances(1e-10, 1e-10 * Math.max(c.x(z0), c.y(z0)));
  const solution = integrate(
    { rhs: c.rhs, jacobian: c.jacobian, y0: z0, span: [0, year], events },
    { rtol, atol, times: [], maxStep: year / 16 }
  );
  const states = [z0, solution.yEnd, ...solution.events.map(({ y }) => y)];
  const range = (values: number[]): [number, number] => [Math.min(...values), Math.max(...values)];
  return { x: range(states.map((z) => c.x(z))), y: range(states.map((z) => c.y(z))) };
}

/** Newton's method on the map of one year to the next, from a state near a yearly cycle. */
function shoot(system: System, season: Season, start: { x: number; y: number }): YearlyCycle | null {
  const net = [netAdditionOf(system.spec, 'first'), netAdditionOf(system.spec, 'second')] as const;
  const forms: [Form, Form] = [formFor(start.x, net[0]), formFor(start.y, net[1])];
  const c = coordinatesFor(system, forms);
  const z = new Float64Array(2);
  c.fromPlane(start.x, start.y, z);
  const absent = forms.map((form) => form === 'zero');
  for (let i = 0; i < ITERATIONS; i++) {
    const turn = overOneYear(system, c, z, season.year);
    if (turn === null) return null;
    const [a, b, p, q] = turn.slopes as unknown as [number, number, number, number];
    const off = [z[0]! - turn.z[0]!, z[1]! - turn.z[1]!] as const;
    const [m00, m01, m10, m11] = [absent[0] ? 1 : a - 1, absent[0] ? 0 : b, absent[1] ? 0 : p, absent[1] ? 1 : q - 1];
    const determinant = m00 * m11 - m01 * m10;
    let size = 0;
    const step = [(m11 * off[0] - m01 * off[1]) / determinant, (m00 * off[1] - m10 * off[0]) / determinant] as const;
    for (const k of [0, 1] as const) {
      if (absent[k]) continue;
      const scale = forms[k] === 'log' ? 1 : Math.abs(z[k]!) || 1;
      size = Math.max(size, Math.abs(step[k]) / scale);
    }
    if (!Number.isFinite(size) || size > 1e3) return null;
    // A logarithm moves by one e-fold at a time: Newton's method overshoots where growth levels off.
    const damp = Math.min(1, 1 / size);
    for (const k of [0, 1] as const) if (!absent[k]) z[k] = z[k]! + damp * step[k];
    if (forms.some((form, k) => form === 'plain' && !(z[k]! >= 0))) return null;
    if (size < 1e-11) return describe(system, c, z, season.year);
  }
  return null;
}

function describe(system: System, c: Coordinates, z: Float64Array, year: number): YearlyCycle | null {
  const turn = overOneYear(system, c, z, year);
  if (turn === null) return null;
  const multipliers = multipliersOf([c.forms[0], c.forms[1]], turn);
  const largest = Math.hypot(multipliers[0].re, multipliers[0].im);
  const extremes = extremesOf(c, z, year);
  return {
    x: c.x(z),
    y: c.y(z),
    multipliers,
    stability: Math.abs(largest - 1) < UNDECIDED ? 'undetermined' : largest < 1 ? 'stable' : 'unstable',
    xMin: extremes.x[0],
    xMax: extremes.x[1],
    xMean: turn.means[0],
    yMin: extremes.y[0],
    yMax: extremes.y[1],
    yMean: turn.means[1]
  };
}

/** Where paths are after many years: near what attracts them, if that repeats every year. */
function afterYears(system: System, season: Season, start: { x: number; y: number }): { x: number; y: number } | null {
  const net = [netAdditionOf(system.spec, 'first'), netAdditionOf(system.spec, 'second')] as const;
  const c = coordinatesFor(system, [formFor(start.x, net[0]), formFor(start.y, net[1])]);
  const z = new Float64Array(2);
  c.fromPlane(start.x, start.y, z);
  const { rtol, atol } = c.tolerances(1e-8, 1e-8 * Math.max(start.x, start.y));
  const solution = integrate(
    { rhs: c.rhs, jacobian: c.jacobian, y0: z, span: [0, YEARS * season.year] },
    { rtol, atol, times: [], maxSteps: 20_000, maxStep: season.year / 4 }
  );
  const end = { x: c.x(solution.yEnd), y: c.y(solution.yEnd) };
  return solution.outcome.status === 'reached' && Number.isFinite(end.x + end.y) ? end : null;
}

/**
 * States that come back after one year under a season, with the multipliers of the map from year to year.
 * @param spec a model without issues. @param season what follows the year.
 * @param starts further states from which to look, e.g. today's
 * @returns the cycles found from the equilibria of the mean, best and worst season and from long runs, by Newton's method on
 *   the map with exact slopes. Cycles of several years are not looked for. Never throws on a valid season.
 * @throws RangeError for a season that fits no number of the model or leaves it unsound
 * @source kuznetsov2004 §1.5, §4.1
 */
export function yearlyCycles(
  spec: ModelSpec,
  season: Season,
  starts: readonly { x: number; y: number }[] = []
): YearlyCycles {
  const system = seasonalSystem(spec, season);
  const mean = valueOf(spec, season);
  const seeds: { x: number; y: number }[] = [];
  for (const factor of [1, 1 + season.amplitude, 1 - season.amplitude]) {
    const still = withParameter(spec, pathOf(season), mean * factor);
    if (factor !== 1 && (season.amplitude === 0 || checkModel(still).length > 0)) continue;
    seeds.push(...findEquilibria(still).equilibria.map(({ x, y }) => ({ x, y })));
  }
  const inside = [...seeds.filter(({ x, y }) => x > 0 && y > 0), ...starts];
  const [largestX, largestY] = [Math.max(0, ...seeds.map(({ x }) => x)), Math.max(0, ...seeds.map(({ y }) => y))];
  if (largestX > 0 && largestY > 0) inside.push({ x: largestX / 2, y: largestY / 2 });
  for (const start of inside) {
    const end = afterYears(system, season, start);
    if (end) seeds.push(end);
  }
  const cycles: YearlyCycle[] = [];
  const near = (p: number, q: number): boolean => Math.abs(p - q) <= 1e-7 * Math.max(Math.abs(p), Math.abs(q));
  for (const seed of seeds) {
    const found = shoot(system, season, seed);
    // Newton's method may end on an absent species written as one of 1e-200: that cycle is found as absent.
    const present =
      found && (found.x === 0 || found.x > 1e-12 * largestX) && (found.y === 0 || found.y > 1e-12 * largestY);
    if (!found || !present) continue;
    if (!cycles.some((known) => near(known.x, found.x) && near(known.y, found.y))) cycles.push(found);
  }
  return {
    cycles: cycles.sort((p, q) => p.x - q.x || p.y - q.y),
    remark:
      'Found from the equilibria of the mean, best and worst season and from long runs; others are not excluded, nor are cycles of several years.'
  };
}
