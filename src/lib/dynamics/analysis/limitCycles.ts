/** Closed orbits that attract or repel: found on a section through an equilibrium, measured over one turn. */
import { compile } from '../model/compile';
import type { ModelSpec, SpeciesKey, System } from '../model/spec';
import { integrate } from '../solve/integrate';
import type { EventSpec } from '../solve/problem';
import { excludeCycles } from './excludeCycles';
import { fixedPoints } from './fixedPoints';
import type { EquilibriaReport } from './results';
import { sectionThrough, type CycleOptions, type Section } from './sectionThrough';

export type { CycleOptions };

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

/** |ln multiplier| below this decides nothing. */
const UNDECIDED = 1e-7;

/** Follows one turn with its integrals. The section's s must be a fixed point of the return map. */
export function measure(system: System, section: Section, around: number, s: number, period: number): LimitCycle {
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
    for (const fixed of fixedPoints(section, point.trace)) {
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
