/** The direction field, drawn as blades of sedge of one length: they say which way, never how fast. */
import { bladePath, type Rect } from './path';
import type { Scale } from './scales';
import type { FieldArrow, FieldFunction, Point } from './types';

const SPINE_STEPS = 6;

/** Unit heading on paper, or null where nothing moves. */
type Heading = (p: Point) => Point | null;

function unit(dx: number, dy: number): Point | null {
  const size = Math.hypot(dx, dy);
  return size > 1e-12 && Number.isFinite(size) ? { x: dx / size, y: dy / size } : null;
}

/** A fixed number in [-0.5, 0.5) for a pair of indices: breaks the grid's regularity the same way on every drawing. */
function wobble(i: number, j: number, salt: number): number {
  const n = Math.sin(i * 127.1 + j * 311.7 + salt * 74.7) * 43758.5453;
  return n - Math.floor(n) - 0.5;
}

/** Follows the heading from `root` for `length` pixels, by the midpoint rule. */
function spineFrom(root: Point, heading: Heading, length: number): Point[] {
  const step = length / SPINE_STEPS;
  const spine = [root];
  let p = root;
  for (let i = 0; i < SPINE_STEPS; i += 1) {
    const here = heading(p);
    if (!here) break;
    const there = heading({ x: p.x + (here.x * step) / 2, y: p.y + (here.y * step) / 2 }) ?? here;
    p = { x: p.x + there.x * step, y: p.y + there.y * step };
    spine.push(p);
  }
  return spine;
}

/** Samples bend towards their neighbours so that a blade leans as the flow does; the root keeps its own direction. */
function headingBetween(samples: (Point & { h: Point })[], spacing: number): Heading {
  const reach = spacing * 1.2;
  return (p) => {
    let x = 0;
    let y = 0;
    for (const s of samples) {
      const distance = Math.hypot(s.x - p.x, s.y - p.y);
      if (distance > reach) continue;
      const weight = 1 / (distance * distance + 4);
      x += s.h.x * weight;
      y += s.h.y * weight;
    }
    return unit(x, y);
  };
}

/**
 * One path holding all blades.
 * @param field direction samples, or a function of the abundances; a function is sampled as densely as the plot allows.
 * @returns "" for an empty field. Samples that would crowd (nearer than 15 px) are left out.
 */
export function bladesPath(field: FieldArrow[] | FieldFunction | undefined, X: Scale, Y: Scale, box: Rect): string {
  if (!field) return '';
  const sx = (X.range[1] - X.range[0]) / (X.domain[1] - X.domain[0]);
  const sy = (Y.range[1] - Y.range[0]) / (Y.domain[1] - Y.domain[0]);
  return typeof field === 'function' ? fromFunction(field, X, Y, box, sx, sy) : fromSamples(field, X, Y, sx, sy);
}

function fromFunction(field: FieldFunction, X: Scale, Y: Scale, box: Rect, sx: number, sy: number): string {
  const heading: Heading = (p) => {
    const { dx, dy } = field(Math.max(0, X.invert(p.x)), Math.max(0, Y.invert(p.y)));
    return unit(dx * sx, dy * sy);
  };
  const narrow = box.x1 - box.x0 < 340;
  const pitch = narrow ? 26.5 : 28;
  const nx = Math.max(3, Math.round((box.x1 - box.x0) / pitch));
  const ny = Math.max(3, Math.round((box.y1 - box.y0) / pitch));
  const [length, width] = narrow ? [16, 2.9] : [17, 3.2];
  let out = '';
  for (let i = 0; i < nx; i += 1) {
    for (let j = 0; j < ny; j += 1) {
      const u = (i + 0.32 + (j % 2 ? 0.25 : 0) + wobble(i, j, 1) * 0.22) / nx;
      const v = (j + 0.5 + wobble(i, j, 2) * 0.22) / ny;
      const root = { x: box.x0 + u * (box.x1 - box.x0), y: box.y1 - v * (box.y1 - box.y0) };
      const spine = spineFrom(root, heading, length);
      if (spine.length > SPINE_STEPS) out += bladePath(spine, width);
    }
  }
  return out;
}

function fromSamples(field: FieldArrow[], X: Scale, Y: Scale, sx: number, sy: number): string {
  const samples = field.flatMap(({ x, y, dx, dy }) => {
    const h = unit(dx * sx, dy * sy);
    return h ? [{ x: X(x), y: Y(y), h }] : [];
  });
  const kept: typeof samples = [];
  for (const s of samples) if (kept.every((k) => Math.hypot(k.x - s.x, k.y - s.y) >= 15)) kept.push(s);
  const first = kept[0];
  if (!first) return '';
  const spacing = kept.slice(1).reduce((near, k) => Math.min(near, Math.hypot(k.x - first.x, k.y - first.y)), 60);
  const between = headingBetween(samples, spacing);
  const length = Math.min(17, spacing * 0.72);
  return kept
    .map((s) => {
      const root = { x: s.x - s.h.x * length * 0.3, y: s.y - s.h.y * length * 0.3 };
      let step = 0;
      const heading: Heading = (p) => (step++ < 5 ? s.h : between(p));
      return bladePath(spineFrom(root, heading, length), Math.min(3.2, length * 0.19));
    })
    .join('');
}
