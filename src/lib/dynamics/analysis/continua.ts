import type { System } from '../model/spec';
import type { Continuum, Stability } from './results';
import type { FoundCurve, Search } from './rootSearch';

type Point = { x: number; y: number };

const POINTS = 65;

function stabilityAlong(system: System, points: Point[]): Pick<Continuum, 'stability' | 'remark'> {
  const j = new Float64Array(4);
  let attracting = 0;
  let repelling = 0;
  let flat = 0;
  for (const { x, y } of points.slice(1, -1)) {
    system.jacobian(x, y, j);
    const scale = Math.abs(j[0]!) + Math.abs(j[3]!) + Math.sqrt(Math.abs(j[1]! * j[2]!));
    // One eigenvalue along a curve of equilibria is 0, so the trace is the other.
    const trace = j[0]! + j[3]!;
    if (Math.abs(trace) <= 1e-12 * scale || scale === 0) flat += 1;
    else if (trace < 0) attracting += 1;
    else repelling += 1;
  }
  if (flat === 0 && repelling === 0) {
    return verdict('stable', 'Attracts from both sides; each point on it is stable but pulls nothing along the curve.');
  }
  if (flat === 0 && attracting === 0) return verdict('unstable', 'Repels on both sides along its whole length.');
  if (attracting > 0 && repelling > 0) {
    return verdict('undetermined', 'Attracts along part of its length and repels along the rest.');
  }
  return verdict('undetermined', 'The linearisation decides nothing along it.');
}

function verdict(stability: Stability, remark: string) {
  return { stability, remark };
}

/** Samples a stretch of the curve; a stretch without end is drawn up to twice `reach` beyond its start. */
function stretch(curve: FoundCurve, from: number, to: number, reach: number): Point[] {
  const last = Number.isFinite(to) ? to : from + 2 * reach;
  return Array.from({ length: POINTS }, (_, i) => {
    const t = from + ((last - from) * i) / (POINTS - 1);
    const u = Math.max(0, curve.at(t));
    return curve.along === 'first' ? { x: t, y: u } : { x: u, y: t };
  }).filter((point) => Number.isFinite(point.x) && Number.isFinite(point.y));
}

function continuumOf(system: System, curve: FoundCurve, from: number, to: number, reach: number): Continuum | null {
  const points = stretch(curve, from, to, reach);
  const start = points[0];
  const end = points[points.length - 1];
  if (!start || !end || points.length < 3) return null;
  const finite = Number.isFinite(to) && Number.isFinite(curve.at(to));
  return { from: start, to: finite ? end : null, points, ...stabilityAlong(system, points) };
}

/** Sorts ends as the points they are: from the smaller x. */
function oriented(continuum: Continuum): Continuum {
  const { from, to, points } = continuum;
  if (to === null || from.x < to.x || (from.x === to.x && from.y <= to.y)) return continuum;
  return { ...continuum, from: to, to: from, points: [...points].reverse() };
}

/**
 * Curves of equilibria as stretches inside the quadrant.
 * @returns one continuum a stretch with its two ends; a far end at infinity is null. Never throws.
 */
export function continuaOf(system: System, search: Search): Continuum[] {
  const reach = Math.max(0, ...search.points.map((point) => Math.max(point.x, point.y))) || 1;
  return search.curves.flatMap((curve) => {
    const marks = [0, ...curve.cuts, Infinity];
    const found: Continuum[] = [];
    for (let i = 0; i + 1 < marks.length; i++) {
      const [from, to] = [marks[i]!, marks[i + 1]!];
      if (Number.isFinite(to) && to - from <= 1e-12 * to) continue;
      const inside = Number.isFinite(to) ? (from + to) / 2 : from + reach;
      if (!(curve.at(inside) >= 0)) continue;
      const continuum = continuumOf(system, curve, from, to, reach);
      if (continuum) found.push(oriented(continuum));
    }
    return found;
  });
}

/** Whether a point lies on a continuum, to the precision of its drawing at the ends and exactly on straight ones. */
export function liesOn(continuum: Continuum, point: Point): boolean {
  const { points, to } = continuum;
  const span = Math.max(...points.map((p) => Math.max(p.x, p.y)));
  const near = (p: number, q: number) => Math.abs(p - q) <= 1e-9 * Math.max(span, Math.abs(p));
  for (let i = 0; i + 1 < points.length; i++) {
    const [p, q] = [points[i]!, points[i + 1]!];
    if ((near(p.x, point.x) && near(p.y, point.y)) || (near(q.x, point.x) && near(q.y, point.y))) return true;
    const cross = (q.x - p.x) * (point.y - p.y) - (q.y - p.y) * (point.x - p.x);
    const length = Math.hypot(q.x - p.x, q.y - p.y);
    const share = ((point.x - p.x) * (q.x - p.x) + (point.y - p.y) * (q.y - p.y)) / length ** 2;
    const beyond = to === null && i + 2 === points.length;
    if (Math.abs(cross) <= 1e-9 * span * length && share >= 0 && (share <= 1 || beyond)) return true;
  }
  return false;
}
