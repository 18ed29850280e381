import type { System } from '../model/spec';
import type { Continuum, Stability } from './results';
import type { FoundCurve, Search } from './rootSearch';

type Point = { x: number; y: number };

const POINTS = 65;
/** Along a stretch the sign of the attraction is read at this many places, evenly in the exponent on both sides. */
const DECADES = 16;
const PER_DECADE = 4;
/** Below this share of its own scale an eigenvalue counts as zero. */
const FLAT = 1e-12;

/** Part of a curve between two places where it may start, end or leave the quadrant. */
interface Stretch {
  curve: FoundCurve;
  from: number;
  to: number;
  /** A length along the curve on which things happen. */
  reach: number;
}

function pointAt(curve: FoundCurve, t: number, u: number): Point {
  return curve.along === 'first' ? { x: t, y: u } : { x: u, y: t };
}

/** Sign of the eigenvalue across the curve, 0 where it is nothing; one eigenvalue along a curve is 0, so the trace is it. */
function pull(system: System, { curve, reach }: Stretch, t: number): number {
  const { x, y } = pointAt(curve, t, Math.max(0, curve.at(t)));
  const j = new Float64Array(4);
  system.jacobian(x, y, j);
  // The terms that make up growth per head, which may cancel: next to an axis where the abundance itself is nothing.
  const [nearX, nearY] = [Math.max(x, 1e-12 * reach), Math.max(y, 1e-12 * reach)];
  const terms = new Float64Array(2);
  system.magnitude(nearX, nearY, terms);
  const scale = terms[0]! / nearX + terms[1]! / nearY;
  const trace = j[0]! + j[3]!;
  if (!Number.isFinite(trace)) return Number.NaN;
  return Math.abs(trace) <= FLAT * scale ? 0 : Math.sign(trace);
}

/** Places along a stretch, close to its ends and, where it has no end, far out. */
function probes({ from, to, reach }: Stretch): number[] {
  const length = Number.isFinite(to) ? to - from : reach;
  const list: number[] = [];
  for (let i = -DECADES * PER_DECADE; i <= DECADES * PER_DECADE; i++) {
    const part = 10 ** (i / PER_DECADE);
    if (!Number.isFinite(to)) list.push(from + length * part);
    else if (part < 0.5) list.push(from + length * part, to - length * part);
  }
  return [...new Set(list)].filter((t) => t > from && t < to).sort((p, q) => p - q);
}

/** Where the sign of the pull changes between two places. */
function change(system: System, stretch: Stretch, low: number, high: number, sign: number): number {
  let [a, b] = [low, high];
  for (let i = 0; i < 60; i++) {
    const middle = a + (b - a) / 2;
    if (pull(system, stretch, middle) === sign) a = middle;
    else b = middle;
  }
  return b;
}

interface Judgement {
  stability: Stability;
  remark: string;
  /** Places along the curve where it turns from attracting to repelling or back. */
  changes: number[];
}

function judge(system: System, stretch: Stretch): Judgement {
  const signs = probes(stretch)
    .map((t) => ({ t, sign: pull(system, stretch, t) }))
    .filter(({ sign }) => !Number.isNaN(sign));
  const firm = signs.filter(({ sign }) => sign !== 0);
  // Next to an end where the pull dies out, and within rounding of a change of sign, it is nothing.
  if (firm.length < 0.5 * signs.length) {
    return { stability: 'undetermined', remark: 'The linearisation decides nothing along it.', changes: [] };
  }
  const changes: number[] = [];
  for (let i = 1; i < firm.length; i++) {
    const [before, after] = [firm[i - 1]!, firm[i]!];
    if (before.sign !== after.sign) changes.push(change(system, stretch, before.t, after.t, before.sign));
  }
  const starts = firm[0]!.sign;
  if (changes.length === 0) {
    return starts < 0
      ? {
          stability: 'stable',
          remark: 'Attracts from both sides; each point on it is stable but pulls nothing along the curve.',
          changes
        }
      : { stability: 'unstable', remark: 'Repels on both sides along its whole length.', changes };
  }
  if (changes.length > 1) {
    return {
      stability: 'undetermined',
      remark: 'Attracts along parts of its length and repels along others.',
      changes
    };
  }
  const species = stretch.curve.along === 'first' ? 'first' : 'second';
  const level = Number(changes[0]!.toPrecision(6));
  const [below, beyond] = starts < 0 ? ['Attracts', 'repels'] : ['Repels', 'attracts'];
  return {
    stability: 'undetermined',
    remark: `${below} while the ${species} species is below ${level} and ${beyond} above.`,
    changes
  };
}

/** Samples a stretch; one without end is drawn up to twice `reach` beyond its start. */
function sample({ curve, from, to, reach }: Stretch): Point[] {
  const last = Number.isFinite(to) ? to : from + 2 * reach;
  const drawn = Array.from({ length: POINTS }, (_, i) => {
    const t = from + ((last - from) * i) / (POINTS - 1);
    return pointAt(curve, t, curve.at(t));
  });
  const size = Math.max(...drawn.slice(1, -1).map((p) => Math.max(Math.abs(p.x), Math.abs(p.y))));
  // At an end on an axis rounding may leave a trace of the other sign; at a pole there is no point at all.
  const settle = (n: number) => (n < 0 && n >= -1e-9 * size ? 0 : n);
  return drawn
    .map(({ x, y }) => ({ x: settle(x), y: settle(y) }))
    .filter(({ x, y }) => x >= 0 && y >= 0 && x <= 1e6 * size && y <= 1e6 * size);
}

/** Sorts ends as the points they are: an end at infinity last, else from the smaller x. */
function oriented(continuum: Continuum): Continuum {
  const { from, to, points } = continuum;
  if (to === null || from.x < to.x || (from.x === to.x && from.y <= to.y)) return continuum;
  return { ...continuum, from: to, to: from, points: [...points].reverse() };
}

function continuumOf(system: System, stretch: Stretch): Continuum | null {
  const { stability, remark, changes } = judge(system, stretch);
  const { curve, from, to } = stretch;
  const reach = Math.max(stretch.reach, ...changes);
  const points = sample({ ...stretch, reach });
  const [start, end] = [points[0], points[points.length - 1]];
  if (!start || !end || points.length < 3) return null;
  const isPlace = (t: number) => Number.isFinite(t) && curve.at(t) >= 0 && curve.at(t) < Infinity;
  const ends = (t: number, point: Point) => isPlace(t) || Math.abs(curve.at(t)) < 1e-9 * Math.max(point.x, point.y);
  const [hasStart, hasEnd] = [ends(from, start), Number.isFinite(to) && ends(to, end)];
  if (hasStart) return oriented({ from: start, to: hasEnd ? end : null, points, stability, remark });
  const turned = [...points].reverse();
  if (hasEnd) return { from: end, to: null, points: turned, stability, remark };
  return { from: start, to: null, points, stability, remark: `${remark} It has no end on either side.` };
}

/**
 * Curves of equilibria as stretches inside the quadrant.
 * @returns one continuum a stretch with its two ends; a far end at infinity is null. Never throws.
 */
export function continuaOf(system: System, search: Search): Continuum[] {
  const sizes = search.points.map((point) => Math.max(point.x, point.y)).filter(Number.isFinite);
  const reach = Math.max(0, ...sizes, ...search.curves.flatMap(({ cuts }) => cuts)) || 1;
  return search.curves.flatMap((curve) => {
    const marks = [0, ...curve.cuts, Infinity];
    const found: Continuum[] = [];
    for (let i = 0; i + 1 < marks.length; i++) {
      const [from, to] = [marks[i]!, marks[i + 1]!];
      if (Number.isFinite(to) && to - from <= 1e-12 * to) continue;
      const inside = Number.isFinite(to) ? (from + to) / 2 : from + reach;
      if (!(curve.at(inside) >= 0)) continue;
      const continuum = continuumOf(system, { curve, from, to, reach });
      if (continuum) found.push(continuum);
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
