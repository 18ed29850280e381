import type { Start } from '$lib/contracts/content';
import { separatrices, type ModelSpec, type PlaneWindow, type Separatrix } from '$lib/dynamics';
import { ResultCache } from './cache';
import { fingerprintOf } from './fingerprint';
import { resultsOf } from './results';

export interface PlaneFacts {
  /** From 0, 0 to here. */
  window: PlaneWindow;
  isoclines: { species: 'first' | 'second'; points: { x: number; y: number }[] }[];
  separatrices: Separatrix[];
}

const cache = new ResultCache<PlaneFacts>(64);
/** Share of the window that stays free above the highest thing in it. */
const SPARE = 1.16;

/** Everything drawn on the state plane that follows from the model: window, isoclines, divides. */
export function planeOf(model: ModelSpec, starts: readonly Start[]): PlaneFacts {
  const seen = starts.map(({ x, y }) => ({ x, y }));
  return cache.get(fingerprintOf({ model, seen }), () => {
    const { report, cycles } = resultsOf(model);
    const shown = [
      ...report.equilibria.filter(({ feasible }) => feasible),
      ...report.absorbing,
      ...cycles.map(({ xMax, yMax }) => ({ x: xMax, y: yMax })),
      ...capacities(model),
      ...seen
    ];
    const most = (key: 'x' | 'y') => roundUp(SPARE * Math.max(0, ...shown.map((point) => point[key])));
    const window = { xMax: most('x'), yMax: most('y') };
    return { window, isoclines: [], separatrices: separatrices(model, report, window) };
  });
}

/** A ceiling that nothing rests at is still where the axis of a reader ends. */
function capacities(model: ModelSpec): { x: number; y: number }[] {
  const first = model.first.growth;
  const second = model.second.growth;
  return [
    { x: 'K' in first ? first.K : 0, y: 0 },
    { x: 0, y: second && 'K' in second ? second.K : 0 }
  ];
}

/** The next number of the kind 1, 1.2, 1.5, 2, 2.5, 3, 4, 5, 6, 8 × 10ⁿ; 1 for nothing. */
function roundUp(value: number): number {
  if (!(value > 0) || !Number.isFinite(value)) return 1;
  const decade = 10 ** Math.floor(Math.log10(value));
  const step = [1, 1.2, 1.5, 2, 2.5, 3, 4, 5, 6, 8, 10].find((candidate) => candidate * decade >= value) ?? 10;
  return Number((step * decade).toPrecision(6));
}
