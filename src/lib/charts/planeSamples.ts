/** The drawn plane in numbers: points along lines and the sense of change, for the table twin. */
import { measure } from './path';
import type { FieldArrow, FieldFunction, PlaneWindow, Point } from './types';

/** Points of a line within the window, evenly spaced as drawn; the ends come first and last. */
export function samplesOf(points: readonly Point[], n: number, window: PlaneWindow): Point[] {
  const shown = points.filter(({ x, y }) => x >= 0 && y >= 0 && x <= window.xMax && y <= window.yMax);
  if (shown.length < 2) return [...shown];
  const line = measure(shown.map(({ x, y }) => ({ x: x / window.xMax, y: y / window.yMax })));
  return Array.from({ length: n }, (_, i) => {
    const { x, y } = line.at((i / (n - 1)) * line.length);
    return { x: x * window.xMax, y: y * window.yMax };
  });
}

/** Two samples of a straight line say no less than nine. */
export function samplesWanted(points: readonly Point[]): number {
  return points.length <= 2 ? 2 : 9;
}

export interface FieldSense extends Point {
  dx: number;
  dy: number;
}

/** The field at the middles of a `n` by `n` grid, bottom row first; of samples, the nearest to each middle. */
export function fieldSenses(field: FieldArrow[] | FieldFunction | undefined, window: PlaneWindow, n = 4): FieldSense[] {
  if (!field || (typeof field !== 'function' && field.length === 0)) return [];
  return Array.from({ length: n * n }, (_, k) => {
    const x = (((k % n) + 0.5) / n) * window.xMax;
    const y = ((Math.floor(k / n) + 0.5) / n) * window.yMax;
    if (typeof field === 'function') return { x, y, ...field(x, y) };
    const distance = (a: Point) => Math.hypot((a.x - x) / window.xMax, (a.y - y) / window.yMax);
    return field.reduce((best, arrow) => (distance(arrow) < distance(best) ? arrow : best));
  });
}

/** "rises", "falls" or "holds". Changes under a ten-thousandth of the larger one hold. */
export function senseOf(change: number, other: number): 'rises' | 'falls' | 'holds' {
  if (Math.abs(change) <= 1e-4 * Math.abs(other) || change === 0) return 'holds';
  return change > 0 ? 'rises' : 'falls';
}
