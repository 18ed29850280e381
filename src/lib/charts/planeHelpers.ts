/** From what an analysis says to what the plane shows. */
import { niceCeiling } from './scales';
import type { EquilibriumShape, PlaneWindow, Point } from './types';

/**
 * Shape and fill for a class and stability in words.
 * @param kind "stable node", "saddle", "unstable degenerate node", …; any other word is drawn as not decided.
 * @param stability "stable", "unstable", "neutral" or "undetermined"; neutral and undetermined are drawn half filled.
 */
export function equilibriumLook(kind: string, stability: string): { kind: EquilibriumShape; stable: boolean | null } {
  const shape: EquilibriumShape = kind.includes('degenerate')
    ? 'degenerate'
    : kind.includes('star')
      ? 'star'
      : kind.includes('node')
        ? 'node'
        : kind.includes('spiral')
          ? 'spiral'
          : kind === 'saddle'
            ? 'saddle'
            : kind === 'centre'
              ? 'centre'
              : kind === 'held'
                ? 'held'
                : 'non-hyperbolic';
  return { kind: shape, stable: stability === 'stable' ? true : stability === 'unstable' ? false : null };
}

/** "A", … "Z", "AA": letters that tie glyphs to table rows. */
export function letterOf(index: number): string {
  const last = String.fromCharCode(65 + (index % 26));
  return index < 26 ? last : letterOf(Math.floor(index / 26) - 1) + last;
}

/** A window that holds all the points with about a sixth to spare, ending on a round value. 1 by 1 where nothing is above 0. */
export function planeWindow(points: Iterable<Point>): PlaneWindow {
  let x = 0;
  let y = 0;
  for (const p of points) {
    if (Number.isFinite(p.x)) x = Math.max(x, p.x);
    if (Number.isFinite(p.y)) y = Math.max(y, p.y);
  }
  return { xMax: niceCeiling(x * 1.16, 8), yMax: niceCeiling(y * 1.16, 8) };
}
