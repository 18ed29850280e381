/** Glyphs of the resting points: the shape says the kind, the fill says whether it holds. */
import { linePath } from './path';
import type { EquilibriumShape, Point } from './types';

export interface Glyph {
  outline: string;
  /** The left half of the outline, filled when it is undecided whether the point holds. */
  half: string;
  /** Strokes that belong to the shape and are never filled. */
  stroke?: string;
  /** A filled core, whatever the fill. */
  core?: string;
  /** Radius that labels keep clear of. */
  clear: number;
}

function leftHalf(polygon: readonly Point[]): string {
  const out: Point[] = [];
  polygon.forEach((a, i) => {
    const b = polygon[(i + 1) % polygon.length] ?? a;
    if (a.x <= 0) out.push(a);
    if (a.x * b.x < 0) out.push({ x: 0, y: a.y - (a.x * (b.y - a.y)) / (b.x - a.x) });
  });
  return linePath(out, true);
}
function polygonGlyph(polygon: readonly Point[], clear: number, stroke?: string): Glyph {
  return { outline: linePath(polygon, true), half: leftHalf(polygon), clear, stroke };
}
function regular(sides: number, r: number, turn: number): Point[] {
  return Array.from({ length: sides }, (_, i) => {
    const angle = turn + (2 * Math.PI * i) / sides;
    return { x: r * Math.cos(angle), y: r * Math.sin(angle) };
  });
}
const circle = (r: number) => `M${-r} 0A${r} ${r} 0 1 1 ${r} 0A${r} ${r} 0 1 1 ${-r} 0Z`;
const halfCircle = (r: number) => `M0 ${-r}A${r} ${r} 0 0 0 0 ${r}Z`;
const tidy = (path: string) => path.replace(/-?\d+\.\d+/g, (n) => String(Math.round(Number(n) * 100) / 100));

/**
 * The drawing of one kind, centred on 0, 0.
 * Square node, disc with a tail for a spiral, pinched four-point saddle, ringed dot for a centre; an octagon approaches
 * alike from all sides (star), a slit square along one line only (degenerate); a hexagon is what the linear part does
 * not decide; a triangle standing on its axis is held there by a quota.
 * @param r nominal radius in px: 7.5 in a plane, 6.5 in a table, 4 in a thumbnail.
 */
export function glyphOf(kind: EquilibriumShape, r: number): Glyph {
  const side = r * 0.86;
  const square = [
    { x: -side, y: -side },
    { x: side, y: -side },
    { x: side, y: side },
    { x: -side, y: side }
  ];
  switch (kind) {
    case 'node':
      return polygonGlyph(square, r * 1.15);
    case 'degenerate':
      return polygonGlyph(
        square,
        r * 1.15,
        linePath([
          { x: -side, y: side },
          { x: side, y: -side }
        ])
      );
    case 'star':
      return polygonGlyph(regular(8, r * 1.04, Math.PI / 8), r * 1.15);
    case 'non-hyperbolic':
      return polygonGlyph(regular(6, r * 1.06, 0), r * 1.15);
    case 'held':
      return polygonGlyph(
        [
          { x: 0, y: -r * 1.15 },
          { x: r * 1.08, y: r * 0.8 },
          { x: -r * 1.08, y: r * 0.8 }
        ],
        r * 1.2
      );
    case 'saddle': {
      const k = r * 1.3;
      const q = r * 0.34;
      return {
        outline: tidy(`M0 ${-k}Q${q} ${-q} ${k} 0Q${q} ${q} 0 ${k}Q${-q} ${q} ${-k} 0Q${-q} ${-q} 0 ${-k}Z`),
        half: tidy(`M0 ${-k}Q${-q} ${-q} ${-k} 0Q${-q} ${q} 0 ${k}Z`),
        clear: r * 1.3
      };
    }
    case 'spiral':
      return {
        outline: tidy(circle(r * 0.92)),
        half: tidy(halfCircle(r * 0.92)),
        stroke: tidy(
          `M${r * 0.92} ${-r * 0.1}C${r * 1.35} ${-r * 1.2} ${r * 0.1} ${-r * 2.05} ${-r * 1.2} ${-r * 1.35}`
        ),
        clear: r * 1.5
      };
    case 'centre':
      return { outline: tidy(circle(r)), half: '', core: tidy(circle(r * 0.36)), clear: r * 1.15 };
  }
}
