import type { ModelSpec } from '../model/spec';
import type { EquilibriaReport } from './results';
import type { LimitCycle } from './limitCycles';
import { basinShares, outcomeFrom, type OutcomeOptions, type PathEnd } from './outcome';
import type { Separatrix } from './separatrices';

type Point = { x: number; y: number };

/** Starts that end in the same place. */
export interface Basin {
  end: { kind: PathEnd['kind']; index: number | null };
  /** Closed outlines in abundances; an outline inside another of the same basin, turned the other way, is a hole. */
  polygons: Point[][];
  /** Share of the window's area, 0 to 1. */
  share: number;
}
export interface Basins {
  basins: Basin[];
  /** `divides`: bounded by the stable manifolds, one start followed for each piece. `grid`: one start for each cell. */
  by: 'divides' | 'grid';
}

/** An end this near an edge of the window, as a share of its size, lies on it. */
const ON_EDGE = 2e-3;
/** Cells a side where the divides do not part the window. */
const GRID = 24;

/** Signed area of a closed outline; above 0 when it turns anticlockwise. */
function signedArea(polygon: readonly Point[]): number {
  let twice = 0;
  for (let i = 0; i < polygon.length; i++) {
    const p = polygon[i]!;
    const q = polygon[(i + 1) % polygon.length]!;
    twice += p.x * q.y - q.x * p.y;
  }
  return twice / 2;
}

function contains(polygon: readonly Point[], p: Point): boolean {
  let inside = false;
  for (let i = 0, j = polygon.length - 1; i < polygon.length; j = i++) {
    const a = polygon[i]!;
    const b = polygon[j]!;
    if (a.y > p.y !== b.y > p.y && p.x < a.x + ((p.y - a.y) / (b.y - a.y)) * (b.x - a.x)) inside = !inside;
  }
  return inside;
}

function distanceTo(a: Point, b: Point, p: Point): number {
  const dx = b.x - a.x;
  const dy = b.y - a.y;
  const length = dx * dx + dy * dy;
  const t = length === 0 ? 0 : Math.min(1, Math.max(0, ((p.x - a.x) * dx + (p.y - a.y) * dy) / length));
  return Math.hypot(p.x - a.x - t * dx, p.y - a.y - t * dy);
}

/** A point well inside: the best of a grid over the outline's box; null for a sliver that holds none. */
function wellInside(polygon: readonly Point[]): Point | null {
  const xs = polygon.map((p) => p.x);
  const ys = polygon.map((p) => p.y);
  const [x0, x1, y0, y1] = [Math.min(...xs), Math.max(...xs), Math.min(...ys), Math.max(...ys)];
  let best: Point | null = null;
  let room = 0;
  for (let i = 0; i < 16; i++) {
    for (let j = 0; j < 16; j++) {
      const p = { x: x0 + ((i + 0.5) / 16) * (x1 - x0), y: y0 + ((j + 0.5) / 16) * (y1 - y0) };
      if (!contains(polygon, p)) continue;
      let nearest = Infinity;
      for (let k = 0; k < polygon.length && nearest > room; k++) {
        nearest = Math.min(nearest, distanceTo(polygon[k]!, polygon[(k + 1) % polygon.length]!, p));
      }
      if (nearest > room) [best, room] = [p, nearest];
    }
  }
  return best;
}

/** The part of a branch inside the unit square, from its saddle to where it first leaves. */
function inUnitSquare(branch: readonly Point[]): Point[] {
  const kept: Point[] = [];
  const within = (p: Point) => p.x >= -1e-9 && p.x <= 1 + 1e-9 && p.y >= -1e-9 && p.y <= 1 + 1e-9;
  for (const p of branch) {
    const last = kept.at(-1);
    if (within(p)) kept.push(p);
    else {
      if (last) {
        let t = 1;
        for (const axis of ['x', 'y'] as const) {
          const d = p[axis] - last[axis];
          if (d > 0) t = Math.min(t, (1 - last[axis]) / d);
          if (d < 0) t = Math.min(t, -last[axis] / d);
        }
        kept.push({ x: last.x + t * (p.x - last.x), y: last.y + t * (p.y - last.y) });
      }
      break;
    }
  }
  return kept;
}

/** Moves an end that lies on an edge of the unit square exactly onto it; null for an end inside. */
function ontoEdge(p: Point): Point | null {
  const gaps = [p.x, 1 - p.x, p.y, 1 - p.y];
  const k = gaps.indexOf(Math.min(...gaps));
  if (gaps[k]! > ON_EDGE) return null;
  return k === 0 ? { x: 0, y: p.y } : k === 1 ? { x: 1, y: p.y } : k === 2 ? { x: p.x, y: 0 } : { x: p.x, y: 1 };
}

/** The curves that part the unit square from edge to edge; null when one of them ends inside. */
function cuts(divides: readonly Separatrix[], window: { xMax: number; yMax: number }): Point[][] | null {
  const bySaddle = new Map<number, Point[][]>();
  for (const { saddle, points } of divides) {
    const branch = inUnitSquare(points.map((p) => ({ x: p.x / window.xMax, y: p.y / window.yMax })));
    if (branch.length > 1) bySaddle.set(saddle, [...(bySaddle.get(saddle) ?? []), branch]);
  }
  const curves: Point[][] = [];
  for (const branches of bySaddle.values()) {
    const [a, b] = branches;
    const curve = a && b ? [...[...a].reverse(), ...b.slice(1)] : [...(a ?? [])];
    const first = ontoEdge(curve[0]!);
    const last = ontoEdge(curve.at(-1)!);
    if (!first || !last) return null;
    curve[0] = first;
    curve[curve.length - 1] = last;
    curves.push(curve);
  }
  return curves;
}

/** Where on the outline a point lies: the index of the side and how far along; null when it lies on none. */
function placeOn(polygon: readonly Point[], p: Point): { side: number; along: number } | null {
  let best: { side: number; along: number } | null = null;
  let nearest = ON_EDGE;
  for (let side = 0; side < polygon.length; side++) {
    const a = polygon[side]!;
    const b = polygon[(side + 1) % polygon.length]!;
    const away = distanceTo(a, b, p);
    if (away < nearest) {
      nearest = away;
      best = { side, along: Math.hypot(p.x - a.x, p.y - a.y) };
    }
  }
  return best;
}

/** Parts an outline along a curve whose two ends lie on it; null when they do not. */
function split(polygon: readonly Point[], curve: readonly Point[]): [Point[], Point[]] | null {
  const from = placeOn(polygon, curve[0]!);
  const to = placeOn(polygon, curve.at(-1)!);
  if (!from || !to) return null;
  /** Corners met when walking the outline from one place to another. */
  const walk = (start: typeof from, end: typeof to): Point[] => {
    if (start.side === end.side && end.along > start.along) return [];
    const corners: Point[] = [];
    for (let side = start.side; ; side = (side + 1) % polygon.length) {
      if (corners.length > 0 && side === end.side) break;
      corners.push(polygon[(side + 1) % polygon.length]!);
      if ((side + 1) % polygon.length === end.side) break;
      if (corners.length > polygon.length) break;
    }
    return corners;
  };
  return [
    [...curve, ...walk(to, from)],
    [...[...curve].reverse(), ...walk(from, to)]
  ];
}

/**
 * How a window divides among the ends of its paths, as outlines: the window parted along the divides, and along cycles
 * that push away, with one start followed in each piece.
 * @param spec a checked model. @param report its equilibria. @param divides its stable manifolds in this window, as
 *   `separatrices` gives them. @param cycles its limit cycles. @param window upper corner; the lower is 0, 0.
 * @returns the basins, largest first. Where a divide winds up inside the window, a grid of starts instead. Measured, not
 *   proven: between divides every path ends alike by the theorem of Poincaré and Bendixson, but the piece's own start is
 *   followed numerically. Never throws. Cost: a path for each piece, or 576 paths for a grid.
 */
export function basinsOf(
  spec: ModelSpec,
  report: EquilibriaReport,
  divides: readonly Separatrix[],
  cycles: readonly LimitCycle[],
  window: { xMax: number; yMax: number },
  options: OutcomeOptions = {}
): Basins {
  const curves = cuts(
    divides.filter(({ kind }) => kind === 'stable'),
    window
  );
  const full = { cycles, ...options };
  if (curves === null) return fromGrid(spec, report, window, full);
  let pieces: Point[][] = [
    [
      { x: 0, y: 0 },
      { x: 1, y: 0 },
      { x: 1, y: 1 },
      { x: 0, y: 1 }
    ]
  ];
  for (const curve of curves) {
    const middle = curve[Math.floor(curve.length / 2)]!;
    const at = pieces.findIndex((piece) => contains(piece, middle));
    const parts = at < 0 ? null : split(pieces[at]!, curve);
    if (!parts) return fromGrid(spec, report, window, full);
    pieces = [...pieces.slice(0, at), ...parts, ...pieces.slice(at + 1)];
  }
  const found: Basin[] = [];
  const add = (end: PathEnd, polygons: Point[][], share: number): void => {
    const index = 'index' in end ? end.index : null;
    const same = found.find((b) => b.end.kind === end.kind && b.end.index === index);
    const outlines = polygons.map((polygon) => polygon.map((p) => ({ x: p.x * window.xMax, y: p.y * window.yMax })));
    if (same) {
      same.polygons.push(...outlines);
      same.share += share;
    } else found.push({ end: { kind: end.kind, index }, polygons: outlines, share });
  };
  const rings = cycles
    .filter((cycle) => cycle.stability === 'unstable' && cycle.xMax <= window.xMax && cycle.yMax <= window.yMax)
    .map((cycle) => {
      const outline = cycle.points.slice(0, -1).map((p) => ({ x: p.x / window.xMax, y: p.y / window.yMax }));
      return { around: report.equilibria[cycle.around]!, outline };
    });
  for (const piece of pieces) {
    const holes = rings.filter(({ outline }) => contains(piece, outline[0]!));
    const start = wellInside(holes.length ? piece.concat() : piece);
    if (!start) continue;
    const outside = holes.some(({ outline }) => contains(outline, start)) ? cornerOf(piece, holes) : start;
    const end = outcomeFrom(spec, report, { x: outside.x * window.xMax, y: outside.y * window.yMax }, full);
    const area = Math.abs(signedArea(piece));
    const holeArea = holes.reduce((sum, { outline }) => sum + Math.abs(signedArea(outline)), 0);
    const turned = holes.map(({ outline }) =>
      signedArea(outline) > 0 === signedArea(piece) > 0 ? [...outline].reverse() : outline
    );
    add(end, [piece, ...turned], area - holeArea);
  }
  for (const { around, outline } of rings) {
    const rim = outline[0]!;
    const inside = {
      x: around.x + 0.5 * (rim.x * window.xMax - around.x),
      y: around.y + 0.5 * (rim.y * window.yMax - around.y)
    };
    add(outcomeFrom(spec, report, inside, full), [outline], Math.abs(signedArea(outline)));
  }
  return { basins: found.sort((a, b) => b.share - a.share), by: 'divides' };
}

/** A point of the piece outside every ring: its outline's own corners, drawn a little inwards. */
function cornerOf(piece: readonly Point[], rings: readonly { outline: Point[] }[]): Point {
  const centre = wellInside(piece) ?? piece[0]!;
  for (const corner of piece) {
    const p = { x: corner.x + 0.02 * (centre.x - corner.x), y: corner.y + 0.02 * (centre.y - corner.y) };
    if (contains(piece, p) && !rings.some(({ outline }) => contains(outline, p))) return p;
  }
  return centre;
}

function fromGrid(
  spec: ModelSpec,
  report: EquilibriaReport,
  window: { xMax: number; yMax: number },
  options: OutcomeOptions
): Basins {
  const { shares, grid, n } = basinShares(spec, report, window, GRID, options);
  const dx = window.xMax / n;
  const dy = window.yMax / n;
  const basins = shares.map(({ end, share }, k): Basin => {
    const polygons: Point[][] = [];
    for (let row = 0; row < n; row++) {
      for (let from = 0; from < n; from++) {
        if (grid[row * n + from] !== k) continue;
        let to = from;
        while (to + 1 < n && grid[row * n + to + 1] === k) to++;
        const [x0, x1, y0, y1] = [from * dx, (to + 1) * dx, row * dy, (row + 1) * dy];
        polygons.push([
          { x: x0, y: y0 },
          { x: x1, y: y0 },
          { x: x1, y: y1 },
          { x: x0, y: y1 }
        ]);
        from = to;
      }
    }
    return { end, polygons, share };
  });
  return { basins, by: 'grid' };
}
