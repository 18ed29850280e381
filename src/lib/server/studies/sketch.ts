import type { StudyContent } from '$lib/contracts/content';
import type { StudySketch } from '$lib/contracts/views';
import { simulate, type ModelSpec } from '$lib/dynamics';
import { deadline } from '../numerics/deadline';
import { planeOf, resultsOf } from './results';

/** Points that a thumbnail of 80 pixels can show. */
const POINTS = 40;

/** The thumbnail of a model's state plane, with the path from today's counts where there are any. */
export function sketchOf(model: ModelSpec, content: StudyContent): StudySketch {
  const { report, cycles } = resultsOf(model);
  const { window, isoclines } = planeOf(model, content.starts);
  const scaled = (points: readonly { x: number; y: number }[]): [number, number][] =>
    thinned(points).map(({ x, y }) => [share(x / window.xMax), share(y / window.yMax)]);
  const ofSpecies = (species: 'first' | 'second') =>
    isoclines
      .filter((isocline) => isocline.species === species && !isocline.trivial)
      .map(({ points }) => scaled(points));
  const [today] = content.starts;
  const path = today
    ? simulate(model, {
        start: { x: today.x, y: today.y },
        span: [0, content.run.span],
        samples: 81,
        rtol: 1e-4,
        shouldStop: deadline(200)
      })
    : null;
  const cycle = cycles.find(({ stability }) => stability === 'stable');
  return {
    first: ofSpecies('first'),
    second: ofSpecies('second'),
    points: [...report.equilibria.filter(({ feasible }) => feasible), ...report.absorbing]
      .filter(({ x, y }) => x <= window.xMax && y <= window.yMax)
      .map(({ x, y, stability }) => ({
        x: share(x / window.xMax),
        y: share(y / window.yMax),
        holds: stability === 'stable'
      })),
    path: path ? scaled(path.x.map((x, i) => ({ x, y: path.y[i] ?? 0 }))) : [],
    cycle: cycle ? scaled(cycle.points) : []
  };
}

/** Three decimals of a unit square are finer than a thumbnail's pixel. */
function share(value: number): number {
  return Math.round(Math.min(4, Math.max(-1, value)) * 1000) / 1000;
}

function thinned<T>(points: readonly T[]): T[] {
  if (points.length <= POINTS) return [...points];
  return Array.from({ length: POINTS }, (_, i) => points[Math.round((i * (points.length - 1)) / (POINTS - 1))]).filter(
    (point): point is T => point !== undefined
  );
}
