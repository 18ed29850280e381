/** Polylines on paper: all coordinates are pixels, y pointing down. */
import type { Point } from './types';

const round = (value: number) => Math.round(value * 10) / 10;

/** SVG path data through the points, to a tenth of a pixel. Points that are not finite break the line. */
export function linePath(points: readonly Point[], closed = false): string {
  let out = '';
  let pen = false;
  for (const { x, y } of points) {
    if (!Number.isFinite(x) || !Number.isFinite(y)) {
      pen = false;
      continue;
    }
    out += `${pen ? 'L' : 'M'}${round(x)} ${round(y)}`;
    pen = true;
  }
  return closed && out ? `${out}Z` : out;
}

/** Ramer–Douglas–Peucker: drops points that lie within `tolerance` of the line that remains. Ends are kept. */
export function simplify(points: readonly Point[], tolerance = 0.3): Point[] {
  if (points.length < 3) return [...points];
  const keep = new Uint8Array(points.length);
  keep[0] = keep[points.length - 1] = 1;
  const stack: [number, number][] = [[0, points.length - 1]];
  for (let span = stack.pop(); span; span = stack.pop()) {
    const [from, to] = span;
    const a = points[from];
    const b = points[to];
    if (!a || !b) continue;
    let worst = tolerance;
    let at = -1;
    for (let i = from + 1; i < to; i += 1) {
      const p = points[i];
      const distance = p ? distanceToSegment(p, a, b) : 0;
      if (distance > worst) {
        worst = distance;
        at = i;
      }
    }
    if (at > 0) {
      keep[at] = 1;
      stack.push([from, at], [at, to]);
    }
  }
  return points.filter((_, i) => keep[i]);
}

export function distanceToSegment(p: Point, a: Point, b: Point): number {
  const dx = b.x - a.x;
  const dy = b.y - a.y;
  const length2 = dx * dx + dy * dy;
  const t = length2 === 0 ? 0 : Math.min(1, Math.max(0, ((p.x - a.x) * dx + (p.y - a.y) * dy) / length2));
  return Math.hypot(p.x - a.x - t * dx, p.y - a.y - t * dy);
}

/** A polyline measured along itself. */
export interface Measured {
  length: number;
  /** The point and heading (radians, clockwise from rightwards) after `s` pixels; `s` is held within [0, length]. */
  at(s: number): Point & { angle: number };
}

export function measure(points: readonly Point[]): Measured {
  const run: number[] = [0];
  for (let i = 1; i < points.length; i += 1) {
    const a = points[i - 1];
    const b = points[i];
    run.push((run[i - 1] ?? 0) + (a && b ? Math.hypot(b.x - a.x, b.y - a.y) : 0));
  }
  const length = run[run.length - 1] ?? 0;
  return {
    length,
    at(s) {
      const want = Math.min(length, Math.max(0, s));
      let low = 0;
      let high = run.length - 1;
      while (high - low > 1) {
        const middle = (low + high) >> 1;
        if ((run[middle] ?? 0) <= want) low = middle;
        else high = middle;
      }
      const a = points[low] ?? { x: 0, y: 0 };
      const b = points[high] ?? a;
      const piece = (run[high] ?? 0) - (run[low] ?? 0);
      const t = piece > 0 ? (want - (run[low] ?? 0)) / piece : 0;
      return { x: a.x + (b.x - a.x) * t, y: a.y + (b.y - a.y) * t, angle: Math.atan2(b.y - a.y, b.x - a.x) };
    }
  };
}

export interface Rect {
  x0: number;
  y0: number;
  x1: number;
  y1: number;
}
export const inside = (p: Point, box: Rect, margin = 0): boolean =>
  p.x >= box.x0 + margin && p.x <= box.x1 - margin && p.y >= box.y0 + margin && p.y <= box.y1 - margin;

/** The pieces of a polyline that lie in the box, cut at its edges (Liang–Barsky on each segment). */
export function clipLine(points: readonly Point[], box: Rect): Point[][] {
  const pieces: Point[][] = [];
  let current: Point[] = [];
  const end = () => {
    if (current.length > 1) pieces.push(current);
    current = [];
  };
  for (let i = 1; i < points.length; i += 1) {
    const a = points[i - 1];
    const b = points[i];
    const cut = a && b ? clipSegment(a, b, box) : null;
    if (!cut || !b) {
      end();
      continue;
    }
    const last = current[current.length - 1];
    if (!last || Math.hypot(last.x - cut[0].x, last.y - cut[0].y) > 1e-6) {
      end();
      current = [cut[0]];
    }
    current.push(cut[1]);
    if (cut[1].x !== b.x || cut[1].y !== b.y) end();
  }
  end();
  return pieces;
}

function clipSegment(a: Point, b: Point, box: Rect): [Point, Point] | null {
  if (![a.x, a.y, b.x, b.y].every(Number.isFinite)) return null;
  const dx = b.x - a.x;
  const dy = b.y - a.y;
  let t0 = 0;
  let t1 = 1;
  const edges: [number, number][] = [
    [-dx, a.x - box.x0],
    [dx, box.x1 - a.x],
    [-dy, a.y - box.y0],
    [dy, box.y1 - a.y]
  ];
  for (const [step, room] of edges) {
    if (step === 0) {
      if (room < 0) return null;
    } else if (step < 0) t0 = Math.max(t0, room / step);
    else t1 = Math.min(t1, room / step);
  }
  if (t0 > t1) return null;
  const point = (t: number) => (t === 0 ? a : t === 1 ? b : { x: a.x + t * dx, y: a.y + t * dy });
  return [point(t0), point(t1)];
}

/**
 * Where the chevrons of a path go: the first after `first` pixels, then one every `gap`, at most `most`, none in the last
 * `clear` pixels. A path too short for its first chevron gets one in the middle; under 14 px it gets none.
 */
export function arrowsAlong(
  points: readonly Point[],
  { first = 44, gap = 120, most = 3, clear = 16 } = {}
): (Point & { angle: number })[] {
  const line = measure(points);
  if (line.length < 14) return [];
  if (line.length < first + clear) return [line.at(line.length / 2)];
  const marks: (Point & { angle: number })[] = [];
  for (let s = first; s <= line.length - clear && marks.length < most; s += gap) marks.push(line.at(s));
  return marks;
}

/**
 * The outline of a blade of sedge along a spine: broadest just above the root, tapering to nothing at the tip. The tip is
 * where the populations are going.
 */
export function bladePath(spine: readonly Point[], width: number): string {
  const last = spine.length - 1;
  const left: Point[] = [];
  const right: Point[] = [];
  spine.forEach((p, i) => {
    const a = spine[Math.max(0, i - 1)] ?? p;
    const b = spine[Math.min(last, i + 1)] ?? p;
    const size = Math.hypot(b.x - a.x, b.y - a.y) || 1;
    const nx = -(b.y - a.y) / size;
    const ny = (b.x - a.x) / size;
    const t = i / last;
    const half = (width / 2) * (t < 0.15 ? 0.55 + 3 * t : ((1 - t) / 0.85) ** 0.8);
    left.push({ x: p.x + nx * half, y: p.y + ny * half });
    right.push({ x: p.x - nx * half, y: p.y - ny * half });
  });
  return linePath([...left, ...right.reverse()], true);
}

/** Twice the signed area; used for the size of a polygon and to find its inside. */
export function polygonArea(polygon: readonly Point[]): number {
  return polygon.reduce((sum, a, i) => {
    const b = polygon[(i + 1) % polygon.length] ?? a;
    return sum + a.x * b.y - b.x * a.y;
  }, 0);
}

/** Even–odd rule. */
export function insidePolygon(p: Point, polygon: readonly Point[]): boolean {
  let odd = false;
  polygon.forEach((a, i) => {
    const b = polygon[(i + 1) % polygon.length] ?? a;
    if (a.y > p.y !== b.y > p.y && p.x < ((b.x - a.x) * (p.y - a.y)) / (b.y - a.y) + a.x) odd = !odd;
  });
  return odd;
}
