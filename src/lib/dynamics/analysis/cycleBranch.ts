/**
 * Branches of cycles: from the point where an equilibrium begins to oscillate the cycle is followed as a fixed point of the
 * return map, round the folds at which two cycles merge, until it leaves the range, shrinks again or runs into a saddle.
 */
import type { ModelSpec } from '../model/spec';
import { correct, locate, tangentAt, walk, type CurveEquations, type CurvePoint } from './continuation';
import { findEquilibria } from './equilibria';
import { faceOf, familyOf, type Family } from './faces';
import { measure, type LimitCycle } from './limitCycles';
import { sectionThrough, type Section } from './sectionThrough';
import { integrate } from '../solve/integrate';
import { thresholds, type ParameterThreshold, type ThresholdReport } from './thresholds';

export interface CycleBranchOptions {
  /** Longest step, in units of the range and of one e-fold of amplitude; default 1/8. */
  longest?: number;
  /** Most points of a branch; default 200. */
  maxPoints?: number;
  shouldStop?: () => boolean;
}

/** How a branch of cycles ends. `homoclinic-suspected`: close to a saddle, with a period that grows. */
export interface CycleEnd {
  kind: 'hopf' | 'homoclinic-suspected' | 'range' | 'unknown';
  value: number;
  /** The equilibrium it shrinks to or runs into; null otherwise. */
  at: { x: number; y: number } | null;
}

/** Columns of equal length, in order along the branch, the Hopf point itself first. */
export interface CycleBranch {
  parameter: number[];
  period: number[];
  xMin: number[];
  xMax: number[];
  yMin: number[];
  yMax: number[];
  /** Factor by which a small deviation grows in one turn; 1 at the Hopf point. */
  multiplier: number[];
  stable: boolean[];
  /** Values at which a stable and an unstable cycle merge. */
  folds: number[];
  from: ParameterThreshold;
  end: CycleEnd;
}

/** Half-width in the logarithm of the resource at which the return map is first looked at, and the smallest tried. */
const FIRST = 0.02;
const SMALLEST = 0.002;
const TURN_RTOL = 1e-11;
/** Steps of the central differences, in the logarithm of the half-width and in the range. */
const STEP = 1e-4;
/** A cycle this near to a saddle, as a share of its own extent, may run into it. */
const RUNS_INTO = 0.15;
/** The period has to have grown by this factor since its shortest. */
const SLOWER = 1.5;
/** A cycle whose deviations grow by more than this in a turn is followed against time. */
const AGAINST_TIME = 1.5;
/** Turns this many times longer than at the onset are not followed. */
const LONGEST_PERIOD = 12;

interface Turning {
  section: Section;
  system: ReturnType<Family['at']>['system'];
}

/** The return map around the equilibrium that goes with each value of the parameter. */
function turningAround(family: Family, onset: ParameterThreshold, qOnset: number): (q: number) => Turning | null {
  const { curve } = faceOf(family, 'both', onset.x, onset.y);
  const across = Float64Array.of(0, 0, 1);
  // Guesses come from the nearest value already solved, so that the equilibrium is followed and not found anew.
  const solved = [{ q: qOnset, x: onset.x, y: onset.y }];
  const known = new Map<number, Turning | null>();
  const j = new Float64Array(4);
  return (q) => {
    const before = known.get(q);
    if (before !== undefined) return before;
    const guess = solved.reduce((best, one) => (Math.abs(one.q - q) < Math.abs(best.q - q) ? one : best));
    const z = correct(curve, Float64Array.of(guess.x, guess.y, q), across);
    let turning: Turning | null = null;
    if (z && z[0]! > 0 && z[1]! > 0) {
      const { spec, system } = family.at(q);
      system.jacobian(z[0]!, z[1]!, j);
      const determinant = j[0]! * j[3]! - j[1]! * j[2]!;
      solved.push({ q, x: z[0]!, y: z[1]! });
      if (determinant > 0) {
        turning = { system, section: sectionThrough(spec, system, { x: z[0]!, y: z[1]!, determinant }, {}) };
      }
    }
    known.set(q, turning);
    return turning;
  };
}

/** Time of a turn from a place on a cycle; null when the path does not come back. */
function periodOf(turning: Turning, s: number, longest: number, againstTime: boolean): number | null {
  const turn = againstTime ? turnBack(turning, s, longest) : turning.section.turn(s, TURN_RTOL);
  return turn && turn.time;
}

/** The cycle through a place, its turn taken in the direction in which errors die away. */
function measured({ system, section }: Turning, s: number, period: number, againstTime: boolean): LimitCycle {
  if (!againstTime) return measure(system, section, 0, s, period);
  const reversed = measure(system, section, 0, s, -period);
  const { multiplier, stability } = reversed;
  return {
    ...reversed,
    period,
    multiplier: 1 / multiplier,
    stability: stability === 'undetermined' ? stability : stability === 'stable' ? 'unstable' : 'stable'
  };
}

/** One turn against time, from the half line back to it; null when the path does not come back. */
function turnBack({ section }: Turning, s: number, longest: number): { s: number; time: number } | null {
  const { coordinates: c, start } = section;
  const z = start(s);
  const home = start(0);
  const level = home[1]!;
  const solution = integrate(
    {
      rhs: c.rhs,
      jacobian: c.jacobian,
      y0: z,
      span: [0, -longest],
      events: [{ value: (_, state) => state[1]! - level, direction: -1, terminal: true, betweenSteps: true }]
    },
    { ...c.tolerances(TURN_RTOL, TURN_RTOL * Math.min(c.x(home), c.y(home))), maxSteps: 20_000, times: [] }
  );
  if (solution.outcome.status !== 'event') return null;
  return { s: Math.log(c.x(solution.yEnd) / c.x(home)), time: -solution.tEnd };
}

/**
 * Cycles as a curve in (ln s, q): where the path from s comes back to s. A cycle that repels is followed against time, where
 * it attracts: forwards, paths a little off it never come back. Both ways the sign is that of growth forwards.
 */
function cycleCurve(
  family: Family,
  turningAt: (q: number) => Turning | null,
  longest: number
): CurveEquations & { againstTime: boolean } {
  const range = family.q1 - family.q0;
  const gain = (logS: number, q: number): number => {
    const turning = turningAt(q);
    if (!turning) return NaN;
    const s = Math.exp(logS);
    const back = self.againstTime ? turnBack(turning, s, longest) : turning.section.turn(s, TURN_RTOL);
    if (!back || !(back.s > 0)) return NaN;
    return self.againstTime ? logS - Math.log(back.s) : Math.log(back.s) - logS;
  };
  const self: CurveEquations & { againstTime: boolean } = curveOf(range, gain);
  return self;
}

function curveOf(range: number, gain: (logS: number, q: number) => number): CurveEquations & { againstTime: boolean } {
  return {
    againstTime: false,
    n: 1,
    // The return map is known to its own accuracy as a part of the half-width.
    settled: 1e-9,
    scale: (_, out) => out.set([1, range]),
    evaluate(z, values, slopes) {
      const [logS, q] = [z[0]!, z[1]!];
      const h = STEP * range;
      values[0] = gain(logS, q);
      slopes[0] = (gain(logS + STEP, q) - gain(logS - STEP, q)) / (2 * STEP);
      slopes[1] = (gain(logS, q + h) - gain(logS, q - h)) / (2 * h);
    }
  };
}

/** The smallest cycle that can be told from the equilibrium, and on from there. */
function startOf(curve: CurveEquations, qOnset: number): CurvePoint | null {
  for (let s = FIRST; s >= SMALLEST; s /= 2) {
    const z = correct(curve, Float64Array.of(Math.log(s), qOnset), Float64Array.of(1, 0));
    const tangent = z && tangentAt(curve, z, Float64Array.of(1, 0));
    if (z && tangent) return { z, tangent };
  }
  return null;
}

/** The saddle that a cycle passes most closely, with the distance as a share of the cycle's extent. */
function nearestSaddle(family: Family, q: number, cycle: LimitCycle): { x: number; y: number; off: number } | null {
  let best: { x: number; y: number; off: number } | null = null;
  for (const { x, y, determinant, feasible } of findEquilibria(family.at(q).spec).equilibria) {
    if (!feasible || !(determinant < 0)) continue;
    const off = Math.min(
      ...cycle.points.map((point) => Math.hypot((point.x - x) / cycle.xMax, (point.y - y) / cycle.yMax))
    );
    if (best === null || off < best.off) best = { x, y, off };
  }
  return best;
}

function followFrom(
  family: Family,
  onset: ParameterThreshold,
  onsets: readonly ParameterThreshold[],
  options: CycleBranchOptions
): CycleBranch | null {
  const { longest = 1 / 8, maxPoints = 200, shouldStop = () => false } = options;
  const qOnset = family.q(onset.value);
  const turningAt = turningAround(family, onset, qOnset);
  const period0 = onsetPeriod(family, qOnset, onset);
  const curve = cycleCurve(family, turningAt, LONGEST_PERIOD * period0);
  const start = startOf(curve, qOnset);
  if (start === null) return null;
  const branch: CycleBranch = {
    parameter: [onset.value],
    period: [period0],
    xMin: [onset.x],
    xMax: [onset.x],
    yMin: [onset.y],
    yMax: [onset.y],
    multiplier: [1],
    stable: [false],
    folds: [],
    from: onset,
    end: { kind: 'unknown', value: onset.value, at: null }
  };
  let last: { cycle: LimitCycle; q: number } | null = null;
  const push = (z: Float64Array): boolean => {
    const [logS, q] = [z[0]!, z[1]!];
    const turning = turningAt(q);
    const period = turning && periodOf(turning, Math.exp(logS), LONGEST_PERIOD * period0, curve.againstTime);
    if (!turning || !period) return false;
    const cycle = measured(turning, Math.exp(logS), period, curve.againstTime);
    curve.againstTime = cycle.multiplier > AGAINST_TIME;
    branch.parameter.push(family.value(q));
    for (const key of ['period', 'xMin', 'xMax', 'yMin', 'yMax', 'multiplier'] as const) branch[key].push(cycle[key]);
    branch.stable.push(cycle.stability === 'stable');
    last = { cycle, q };
    return true;
  };
  const inside = (q: number): boolean => q >= family.q0 && q <= family.q1;
  const slope = (z: Float64Array): number => {
    const slopes = new Float64Array(2);
    curve.evaluate(z, new Float64Array(1), slopes);
    return slopes[0]!;
  };
  const atRange = (a: CurvePoint, b: CurvePoint): CycleEnd => {
    const edge = b.z[1]! < family.q0 ? family.q0 : family.q1;
    const place = locate(curve, a, b, (z) => z[1]! - edge);
    if (place) {
      place.z[1] = edge;
      push(place.z);
    }
    return { kind: 'range', value: family.value(edge), at: null };
  };
  if (!inside(start.z[1]!)) return { ...branch, end: { kind: 'range', value: onset.value, at: null } };
  if (!push(start.z)) return null;
  let here = start;
  for (const next of walk(curve, start.z, start.tangent, { longest, shortest: 1e-5 * longest, maxPoints })) {
    if (shouldStop()) return branch;
    if (!inside(next.z[1]!)) return { ...branch, end: atRange(here, next) };
    if (next.tangent[1]! * here.tangent[1]! < 0) {
      const fold = locate(curve, here, next, slope);
      if (fold) branch.folds.push(family.value(fold.z[1]!));
    }
    if (next.z[0]! < Math.log(FIRST / 4)) {
      // The cycle has become as small as it was at the start: it has come to another onset.
      const near = onsets
        .filter((one) => one !== onset)
        .sort((p, q) => Math.abs(family.q(p.value) - next.z[1]!) - Math.abs(family.q(q.value) - next.z[1]!))[0];
      if (near) return { ...branch, end: { kind: 'hopf', value: near.value, at: { x: near.x, y: near.y } } };
      return branch;
    }
    if (!push(next.z)) break;
    here = next;
    if (branch.period.at(-1)! > LONGEST_PERIOD * period0) break;
  }
  return { ...branch, end: endNear(family, branch, last) };
}

function onsetPeriod(family: Family, q: number, { x, y }: ParameterThreshold): number {
  const j = new Float64Array(4);
  family.at(q).system.jacobian(x, y, j);
  return (2 * Math.PI) / Math.sqrt(j[0]! * j[3]! - j[1]! * j[2]!);
}

/** What a cycle that could not be followed further was coming to. */
function endNear(family: Family, branch: CycleBranch, last: { cycle: LimitCycle; q: number } | null): CycleEnd {
  const value = branch.parameter.at(-1)!;
  if (last) {
    const saddle = nearestSaddle(family, last.q, last.cycle);
    if (saddle && saddle.off < RUNS_INTO && last.cycle.period > SLOWER * Math.min(...branch.period)) {
      return { kind: 'homoclinic-suspected', value, at: { x: saddle.x, y: saddle.y } };
    }
  }
  return { kind: 'unknown', value, at: null };
}

/**
 * Branches of cycles from every Hopf point over one parameter.
 * @param spec a model without issues. @param path, range as for thresholds. @param known its thresholds, if at hand.
 * @returns one branch a Hopf point, two points joined by one branch giving one; empty where nothing oscillates. Cycles that
 *   come from no Hopf point are not looked for. Cost: some ten milliseconds a point.
 * @throws RangeError as thresholds does
 * @source kuznetsov2004 §3.4, §6.2, §10.2
 */
export function cycleBranches(
  spec: ModelSpec,
  path: string,
  range: readonly [number, number],
  options: CycleBranchOptions = {},
  known?: readonly ParameterThreshold[]
): CycleBranch[] {
  const { shouldStop } = options;
  const found = known ?? thresholds(spec, path, range, shouldStop ? { shouldStop } : {}).thresholds;
  const onsets = found.filter(({ kind }) => kind === 'hopf');
  const family = familyOf(spec, path, range);
  const branches: CycleBranch[] = [];
  for (const onset of onsets) {
    if (shouldStop?.()) break;
    if (branches.some(({ end }) => end.kind === 'hopf' && end.value === onset.value)) continue;
    const branch = followFrom(family, onset, onsets, options);
    if (branch) branches.push(branch);
  }
  return branches;
}

/**
 * Thresholds with those at which a cycle is lost on a saddle, and the branches of cycles that show it.
 * @throws RangeError as thresholds does
 */
export function thresholdsWithCycles(
  spec: ModelSpec,
  path: string,
  range: readonly [number, number],
  options: CycleBranchOptions = {}
): ThresholdReport & { cycles: CycleBranch[] } {
  const { shouldStop } = options;
  const report = thresholds(spec, path, range, shouldStop ? { shouldStop } : {});
  const cycles = cycleBranches(spec, path, range, options, report.thresholds);
  const lost = cycles.flatMap(({ end }): ParameterThreshold[] =>
    end.kind === 'homoclinic-suspected' && end.at
      ? [{ kind: 'homoclinic-suspected', value: end.value, ...end.at, criticality: null }]
      : []
  );
  return { ...report, thresholds: [...report.thresholds, ...lost].sort((p, q) => p.value - q.value), cycles };
}
