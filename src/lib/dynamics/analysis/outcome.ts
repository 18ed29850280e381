/** Where a start ends, and how the starts of a window divide among the ends. */
import { compile } from '../model/compile';
import type { ModelSpec, System } from '../model/spec';
import { formFor, netAdditionOf, type Coordinates, type Forms } from './coordinates';
import { limitCycles, type LimitCycle } from './limitCycles';
import { followPath, type Watched } from './path';
import type { EquilibriaReport } from './results';
import type { PlaneWindow } from './separatrices';

/** `index` counts in the report's equilibria or absorbing states, or in the cycles; `time` is when it was settled. */
export type PathEnd =
  | { kind: 'equilibrium' | 'cycle' | 'absorbing'; index: number; time: number }
  | { kind: 'unbounded' | 'undecided'; time: number };

export interface OutcomeOptions {
  /** Longest time followed; default some hundreds of times the slowest return time of the stable equilibria. */
  horizon?: number;
  /** Cycles already found; worked out when absent. */
  cycles?: readonly LimitCycle[];
  maxSteps?: number;
  shouldStop?: () => boolean;
}

export interface BasinShares {
  /** The different ends met, most frequent first, with the share of the starts, 0 to 1. */
  shares: { end: { kind: PathEnd['kind']; index: number | null }; share: number }[];
  /** n x n indices into `shares`, row by row from the lowest y, each row from the lowest x; starts are cell centres. */
  grid: number[];
  n: number;
}

/** Enough for telling ends apart; a path that passes a divide closer than this is a matter of chance anyway. */
const RTOL = 1e-7;
/** Within this relative distance of a stable equilibrium the path is taken to stay. */
const CAPTURED = 1e-4;
/** An absent species counts as gone below this part of the largest abundance in sight. */
const GONE = 1e-7;
/** This many times the largest abundance in sight is without limit. */
const BEYOND = 1e9;
/** A return this near to the cycle, as part of its distance from the equilibrium inside, is on it. */
const SAME_TURN = 1e-3;
const MOST_STEPS = 20_000;

/** A state a path can come to rest in. */
interface Target {
  kind: 'equilibrium' | 'absorbing';
  index: number;
  x: number;
  y: number;
  held: readonly string[];
}

/** Where a cycle rises through a level of y, and where that is in ln x. */
interface Gate {
  kind: 'gate';
  cycle: number;
  y: number;
  logX: number;
  low: number;
}

type Tag = Target | Gate | 'unbounded';

/** What is the same for every start of a model. */
interface Setting {
  system: System;
  targets: Target[];
  gates: Gate[];
  sizeX: number;
  sizeY: number;
  horizon: number;
  closedOrbits: boolean;
}

function settingOf(spec: ModelSpec, report: EquilibriaReport, options: OutcomeOptions): Setting {
  const system = compile(spec);
  const feasible = report.equilibria.filter((p) => p.feasible);
  const targets: Target[] = [];
  report.equilibria.forEach((p, index) => {
    if (p.feasible && p.stability === 'stable') targets.push({ kind: 'equilibrium', index, x: p.x, y: p.y, held: [] });
  });
  report.absorbing.forEach((p, index) => {
    if (p.stability !== 'unstable') targets.push({ kind: 'absorbing', index, x: p.x, y: p.y, held: p.held });
  });
  const cycles = options.cycles ?? limitCycles(spec, report);
  const gates = cycles.flatMap((cycle, index): Gate[] => {
    const gate = cycle.points[0];
    const centre = report.equilibria[cycle.around];
    if (cycle.stability !== 'stable' || gate === undefined || centre === undefined) return [];
    return [{ kind: 'gate', cycle: index, y: gate.y, logX: Math.log(gate.x), low: Math.log(centre.x) }];
  });
  const all = [...feasible, ...report.absorbing];
  const slowest = Math.max(
    ...feasible.flatMap((p) => p.eigenvalues.map((e) => (e.re !== 0 ? 1 / Math.abs(e.re) : 0))),
    ...cycles.map((c) => c.period / Math.max(0.1, Math.abs(Math.log(c.multiplier)))),
    0
  );
  return {
    system,
    targets,
    gates,
    sizeX: Math.max(...all.map((p) => p.x), 0),
    sizeY: Math.max(...all.map((p) => p.y), 0),
    horizon: options.horizon ?? (slowest > 0 ? 300 * slowest : 1e4),
    closedOrbits: feasible.some((p) => p.class === 'centre')
  };
}

/** Distance of a state to a target less the radius of capture: relative in what is present, scaled in what is absent. */
function gapTo(target: Target, x: number, y: number, sizeX: number, sizeY: number): number {
  const part = (n: number, at: number, size: number): number =>
    at > 0 ? (n / at - 1) / CAPTURED : n / (GONE * (size || 1));
  return Math.hypot(part(x, target.x, sizeX), part(y, target.y, sizeY)) - 1;
}

/** Whether a target is a state of the equations that hold while the species have these forms. */
function fits(target: Target, forms: Forms): boolean {
  return (
    (!target.held.includes('first') || forms[0] === 'zero') && (!target.held.includes('second') || forms[1] === 'zero')
  );
}

function followToEnd(setting: Setting, start: { x: number; y: number }, options: OutcomeOptions): PathEnd {
  const { system, targets, gates } = setting;
  const sizeX = Math.max(setting.sizeX, start.x);
  const sizeY = Math.max(setting.sizeY, start.y);

  const watch = (c: Coordinates): Watched<Tag>[] => {
    const far = (_: number, z: Float64Array): number => Math.max(c.x(z) / (sizeX || 1), c.y(z) / (sizeY || 1)) - BEYOND;
    const list: Watched<Tag>[] = [
      { spec: { value: far, direction: 1, terminal: true, betweenSteps: true }, tag: 'unbounded' }
    ];
    for (const target of targets) {
      if (!fits(target, c.forms)) continue;
      const value = (_: number, z: Float64Array): number => gapTo(target, c.x(z), c.y(z), sizeX, sizeY);
      list.push({ spec: { value, direction: -1, terminal: true, betweenSteps: true }, tag: target });
    }
    if (c.forms[0] === 'zero' || c.forms[1] === 'zero') return list;
    for (const gate of gates) {
      const value = (_: number, z: Float64Array): number => c.y(z) - gate.y;
      list.push({ spec: { value, direction: 1, terminal: true, betweenSteps: true }, tag: gate });
    }
    return list;
  };

  let t = 0;
  let { x, y } = start;
  let forms: Forms = [
    formFor(x, netAdditionOf(system.spec, 'first')),
    formFor(y, netAdditionOf(system.spec, 'second'))
  ];
  let stepsLeft = options.maxSteps ?? MOST_STEPS;
  for (;;) {
    // A path that begins inside the radius of capture never crosses it, and one that has entered stands on it.
    const here = targets.find((one) => fits(one, forms) && gapTo(one, x, y, sizeX, sizeY) <= 1e-6);
    if (here) return { kind: here.kind, index: here.index, time: t };
    const path = followPath<Tag>(system, {
      start: { x, y },
      forms,
      span: [t, setting.horizon],
      rtol: RTOL,
      atol: RTOL * GONE * Math.max(sizeX, sizeY),
      times: new Float64Array(0),
      maxSteps: stepsLeft,
      shouldStop: options.shouldStop,
      watch
    });
    stepsLeft -= path.steps.accepted + path.steps.rejected;
    ({ t, x, y, forms } = path);
    const last = path.moments.at(-1);
    const tag = path.outcome.status === 'event' && last?.kind === 'watched' ? last.tag : null;
    const overflowed = path.outcome.status === 'failed' && path.outcome.reason === 'notFinite';
    if (tag === 'unbounded' || overflowed) return { kind: 'unbounded', time: t };
    if (tag !== null && tag.kind === 'gate') {
      const near = Math.abs(Math.log(x) - tag.logX) < SAME_TURN * (tag.logX - tag.low);
      if (near) return { kind: 'cycle', index: tag.cycle, time: t };
    } else if (tag === null) {
      const end = targets.find((one) => fits(one, forms) && gapTo(one, x, y, sizeX, sizeY) <= 1e-6);
      return end ? { kind: end.kind, index: end.index, time: t } : { kind: 'undecided', time: t };
    }
  }
}

/**
 * Where the path from a start ends.
 * @param spec a checked model. @param report its equilibria. @param start abundances >= 0.
 * @returns a stable equilibrium, a cycle, an absorbing state left by a quota, growth without limit, or `undecided`: closed
 *   orbits, and paths that settle on nothing known within the horizon. Measured, not proven. Never throws on a valid start.
 */
export function outcomeFrom(
  spec: ModelSpec,
  report: EquilibriaReport,
  start: { x: number; y: number },
  options: OutcomeOptions = {}
): PathEnd {
  const setting = settingOf(spec, report, options);
  if (setting.closedOrbits && start.x > 0 && start.y > 0) return { kind: 'undecided', time: 0 };
  return followToEnd(setting, start, options);
}

/**
 * How the starts of a window divide among the ends: a grid of n x n starts at cell centres, each followed to its end.
 * @returns shares and the grid; the same every time. Cost: n^2 paths. Never throws.
 */
export function basinShares(
  spec: ModelSpec,
  report: EquilibriaReport,
  window: PlaneWindow,
  n: number,
  options: OutcomeOptions = {}
): BasinShares {
  const setting = settingOf(spec, report, options);
  const { xMin = 0, yMin = 0 } = window;
  const names: string[] = [];
  const ends: BasinShares['shares'] = [];
  const cells: number[] = [];
  for (let row = 0; row < n; row++) {
    for (let column = 0; column < n; column++) {
      const start = {
        x: xMin + ((column + 0.5) / n) * (window.xMax - xMin),
        y: yMin + ((row + 0.5) / n) * (window.yMax - yMin)
      };
      const end: PathEnd = setting.closedOrbits ? { kind: 'undecided', time: 0 } : followToEnd(setting, start, options);
      const index = 'index' in end ? end.index : null;
      const name = `${end.kind} ${index}`;
      let k = names.indexOf(name);
      if (k < 0) {
        k = names.push(name) - 1;
        ends.push({ end: { kind: end.kind, index }, share: 0 });
      }
      ends[k]!.share += 1;
      cells.push(k);
    }
  }
  const order = ends.map((_, k) => k).sort((a, b) => ends[b]!.share - ends[a]!.share || a - b);
  return {
    shares: order.map((k) => ({ end: ends[k]!.end, share: ends[k]!.share / (n * n) })),
    grid: cells.map((k) => order.indexOf(k)),
    n
  };
}
