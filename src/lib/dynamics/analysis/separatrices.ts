/** The divides of the plane: paths that run into a saddle, which part the starts with different ends. */
import { compile } from '../model/compile';
import type { ModelSpec, System } from '../model/spec';
import { integrate } from '../solve/integrate';
import type { EventSpec } from '../solve/problem';
import { coordinatesFor, formFor, netAdditionOf } from './coordinates';
import type { EquilibriaReport, Equilibrium } from './results';

/** The part of the plane to be drawn, in abundance; it begins at 0 unless said. */
export interface PlaneWindow {
  xMin?: number;
  xMax: number;
  yMin?: number;
  yMax: number;
}

export interface Separatrix {
  /** Index of the saddle in the report. */
  saddle: number;
  /** `stable`: the paths into the saddle, the divide. `unstable`: the paths out of it. */
  kind: 'stable' | 'unstable';
  /** From the saddle outwards, thinned to what a drawing can show; the last may lie outside the window. */
  points: { x: number; y: number }[];
  /** `unfinished`: it winds for ever, around a cycle or a slow spiral. */
  ends: 'window' | 'equilibrium' | 'axis' | 'unfinished';
  /** Index of the equilibrium it ends in, else null. */
  endsAt: number | null;
}

/** First step off the saddle in units of the window (or of the saddle's distance from the axes, if less). */
const OFFSET = 1e-4;
/** A curve may leave the window and come back; beyond this many windows it is let go. */
const MARGIN = 2;
/** Nearer than this part of the window is at the equilibrium, as far as a drawing can show. */
const ARRIVED = 2e-4;
/** Less than this part of the window is on the axis. */
const ON_AXIS = 1e-9;
const RTOL = 1e-9;
const MOST_STEPS = 4000;
/** Largest distance, in windows, between the curve and its drawing. */
const DRAWING = 2e-4;

type Point = { x: number; y: number };

/** Unit eigenvector in units of the window, as abundances; null when the eigenvalue has none worth the name. */
function direction(point: Equilibrium, lambda: number, sizeX: number, sizeY: number): Point | null {
  const [[a, b], [c, d]] = point.jacobian;
  // Two rows give the same direction; the longer is the better conditioned. Lengths are made comparable by the window.
  const first = { x: b, y: lambda - a, length: Math.hypot(b / sizeX, (lambda - a) / sizeY) * sizeY };
  const second = { x: lambda - d, y: c, length: Math.hypot((lambda - d) / sizeX, c / sizeY) * sizeX };
  const v = first.length > second.length ? first : second;
  const length = Math.hypot(v.x / sizeX, v.y / sizeY);
  return length > 0 ? { x: v.x / length, y: v.y / length } : null;
}

/**
 * Curvature of the manifold: the points E + s v + s^2 w lie on it up to s^3, with (J - 2 lambda I) w = -D^2f(v, v)/2.
 * @source kuznetsov2004 §8.7
 */
function bend(system: System, point: Equilibrium, lambda: number, v: Point): Point {
  const [[a, b], [c, d]] = point.jacobian;
  const reach = 1e-4;
  const inside = point.x > Math.abs(reach * v.x) && point.y > Math.abs(reach * v.y);
  const ahead = new Float64Array(4);
  const behind = new Float64Array([a, b, c, d]);
  system.jacobian(point.x + reach * v.x, point.y + reach * v.y, ahead);
  if (inside) system.jacobian(point.x - reach * v.x, point.y - reach * v.y, behind);
  const width = inside ? 2 * reach : reach;
  const p = (-0.5 * ((ahead[0]! - behind[0]!) * v.x + (ahead[1]! - behind[1]!) * v.y)) / width;
  const q = (-0.5 * ((ahead[2]! - behind[2]!) * v.x + (ahead[3]! - behind[3]!) * v.y)) / width;
  const [a2, d2] = [a - 2 * lambda, d - 2 * lambda];
  const determinant = a2 * d2 - b * c;
  const w = { x: (p * d2 - b * q) / determinant, y: (a2 * q - c * p) / determinant };
  return Number.isFinite(w.x) && Number.isFinite(w.y) ? w : { x: 0, y: 0 };
}

/** Drops points nearer than `DRAWING` windows to the chord of their neighbours. */
function thin(points: Point[], sizeX: number, sizeY: number): Point[] {
  const keep = new Uint8Array(points.length);
  keep[0] = 1;
  keep[points.length - 1] = 1;
  const stack: [number, number][] = [[0, points.length - 1]];
  for (let span = stack.pop(); span; span = stack.pop()) {
    const [from, to] = span;
    const p = points[from]!;
    const dx = (points[to]!.x - p.x) / sizeX;
    const dy = (points[to]!.y - p.y) / sizeY;
    const length = Math.hypot(dx, dy);
    let far = 0;
    let at = -1;
    for (let i = from + 1; i < to; i++) {
      const ex = (points[i]!.x - p.x) / sizeX;
      const ey = (points[i]!.y - p.y) / sizeY;
      const distance = length > 0 ? Math.abs(dx * ey - dy * ex) / length : Math.hypot(ex, ey);
      if (distance > far) {
        far = distance;
        at = i;
      }
    }
    if (at < 0 || far <= DRAWING) continue;
    keep[at] = 1;
    stack.push([from, at], [at, to]);
  }
  return points.filter((_, i) => keep[i] === 1);
}

type Ending = Pick<Separatrix, 'ends' | 'endsAt'>;

function trace(
  system: System,
  report: EquilibriaReport,
  saddle: Equilibrium,
  first: Point,
  timeSign: 1 | -1,
  horizon: number,
  window: Required<PlaneWindow>
): { points: Point[] } & Ending {
  const sizeX = window.xMax - window.xMin;
  const sizeY = window.yMax - window.yMin;
  const c = coordinatesFor(system, [
    formFor(first.x, netAdditionOf(system.spec, 'first')),
    formFor(first.y, netAdditionOf(system.spec, 'second'))
  ]);
  const events: EventSpec[] = [];
  const endings: Ending[] = [];
  const endWhen = (value: (x: number, y: number) => number, ending: Ending): void => {
    events.push({ value: (_, z) => value(c.x(z), c.y(z)), direction: -1, terminal: true, betweenSteps: true });
    endings.push(ending);
  };
  const gone: Ending = { ends: 'window', endsAt: null };
  endWhen((x) => window.xMax + (MARGIN - 1) * sizeX - x, gone);
  endWhen((_, y) => window.yMax + (MARGIN - 1) * sizeY - y, gone);
  const axis: Ending = { ends: 'axis', endsAt: null };
  endWhen((x) => x - ON_AXIS * sizeX, axis);
  endWhen((_, y) => y - ON_AXIS * sizeY, axis);
  report.equilibria.forEach((point, index) => {
    // Saddles are passed close by; only their own manifolds, which no other path meets, run into them.
    if (!point.feasible || point.class === 'saddle') return;
    endWhen((x, y) => Math.hypot((x - point.x) / sizeX, (y - point.y) / sizeY) - ARRIVED, {
      ends: 'equilibrium',
      endsAt: index
    });
  });

  const z = new Float64Array(2);
  c.fromPlane(first.x, first.y, z);
  const solution = integrate(
    { rhs: c.rhs, jacobian: c.jacobian, y0: z, span: [0, timeSign * horizon], events },
    {
      ...c.tolerances(RTOL, RTOL * Math.min(sizeX, sizeY)),
      maxSteps: MOST_STEPS,
      dense: true,
      method: 'dormand-prince'
    }
  );
  const points: Point[] = [{ x: saddle.x, y: saddle.y }];
  const n = solution.t.length;
  for (let i = 0; i < n; i++) {
    const from = solution.t[Math.max(0, i - 1)]!;
    // Long steps are filled in, so that the drawing follows the path and not its chords.
    for (let k = i === 0 ? 4 : 1; k <= 4; k++) {
      solution.at?.(k === 4 ? solution.t[i]! : from + ((solution.t[i]! - from) * k) / 4, z);
      points.push({ x: c.x(z), y: c.y(z) });
    }
  }
  const { outcome } = solution;
  const ending: Ending =
    outcome.status === 'event'
      ? endings[outcome.event]!
      : outcome.status === 'failed' && outcome.reason !== 'tooManySteps'
        ? gone
        : { ends: 'unfinished', endsAt: null };
  if (ending.endsAt !== null) {
    const end = report.equilibria[ending.endsAt]!;
    points.push({ x: end.x, y: end.y });
  }
  return { points: thin(points, sizeX, sizeY), ...ending };
}

/**
 * Stable manifolds of the saddles inside the first quadrant, and on request the unstable ones.
 * @param spec a checked model. @param report its equilibria. @param window what will be drawn.
 * @param kinds which manifolds, default the stable ones: the divides between outcomes.
 * @returns one curve a branch; branches along an axis, which no interior path meets, are left out. Both branches of an
 *   interior saddle, one of a saddle on an axis. Never throws.
 * @source strogatz2015 §6.4 (basins and separatrices), kuznetsov2004 §8.7 (start on the quadratic approximation)
 */
export function separatrices(
  spec: ModelSpec,
  report: EquilibriaReport,
  window: PlaneWindow,
  kinds: readonly Separatrix['kind'][] = ['stable']
): Separatrix[] {
  const system = compile(spec);
  const full = { ...window, xMin: window.xMin ?? 0, yMin: window.yMin ?? 0 };
  const sizeX = full.xMax - full.xMin;
  const sizeY = full.yMax - full.yMin;
  const found: Separatrix[] = [];
  report.equilibria.forEach((saddle, index) => {
    if (!saddle.feasible || saddle.class !== 'saddle') return;
    for (const kind of kinds) {
      const lambda = saddle.eigenvalues[kind === 'stable' ? 1 : 0].re;
      const v = direction(saddle, lambda, sizeX, sizeY);
      if (v === null) continue;
      const w = bend(system, saddle, lambda, v);
      for (const side of [1, -1]) {
        let s = side * OFFSET;
        if (saddle.x > 0 && v.x !== 0) s = side * Math.min(Math.abs(s), (0.01 * saddle.x) / Math.abs(v.x));
        if (saddle.y > 0 && v.y !== 0) s = side * Math.min(Math.abs(s), (0.01 * saddle.y) / Math.abs(v.y));
        const first = { x: saddle.x + s * v.x + s * s * w.x, y: saddle.y + s * v.y + s * s * w.y };
        if (!(first.x > 0) || !(first.y > 0)) continue;
        // The slowest way off the saddle takes a few tens of its own times; the rest of the plane, some hundreds.
        const horizon = 1000 / Math.abs(lambda);
        if (!Number.isFinite(horizon)) continue;
        const branch = trace(system, report, saddle, first, kind === 'stable' ? -1 : 1, horizon, full);
        found.push({ saddle: index, kind, ...branch });
      }
    }
  });
  return found;
}
