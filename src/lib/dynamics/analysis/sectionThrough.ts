/** The return map of paths that go round an equilibrium. */
import type { ModelSpec, System } from '../model/spec';
import { integrate } from '../solve/integrate';
import type { EventSpec } from '../solve/problem';
import { coordinatesFor, formFor, netAdditionOf, type Coordinates } from './coordinates';
import type { Equilibrium } from './results';

/** Where the resource has no ceiling of its own, e^5 times the equilibrium is as far as the search goes. */
const OUTERMOST_UNBOUNDED = 5;
/** A ceiling e^30 times above the equilibrium is none. */
const OUTERMOST = 30;
/** The search begins this far above the ceiling: a violent cycle grazes it within rounding. */
const BEYOND_CEILING = 0.05;
/** A turn may take this many times what it takes close to the equilibrium. */
const LONGEST_TURN = 400;
const MOST_STEPS = 20_000;
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

export interface CycleOptions {
  /** `drawing` is good to a few digits, and some times faster; default `full`. */
  accuracy?: keyof typeof ACCURACY;
  shouldStop?: (() => boolean) | undefined;
}

/** Return map of the half line y = yE, x > xE, in s = ln(x/xE). */
export interface Section {
  /** Where the path from s comes back, and when; null when it does not. */
  turn(s: number, rtol: number): { s: number; time: number } | null;
  /** Where the search begins: outside every closed orbit, where the resource has a ceiling. */
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
  const limit = xE * Math.exp(OUTERMOST);
  let high = xE;
  while (high < limit && grows(high)) high *= 1.5;
  if (high >= limit) return xE * Math.exp(OUTERMOST_UNBOUNDED);
  let low = high / 1.5;
  for (let i = 0; i < 60; i++) {
    const middle = (low + high) / 2;
    if (grows(middle)) low = middle;
    else high = middle;
  }
  return high;
}

/** The section through an equilibrium off the axes that is no saddle. @returns functions that never throw. */
export function sectionThrough(
  spec: ModelSpec,
  system: System,
  point: Pick<Equilibrium, 'x' | 'y' | 'determinant'>,
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
    sMax: Math.log(resourceCeiling(system, point.x) / point.x) + BEYOND_CEILING,
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
