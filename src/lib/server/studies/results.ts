import type { Start, StudyContent } from '$lib/contracts/content';
import {
  findEquilibria,
  limitCycles,
  outcomeFrom,
  type EquilibriaReport,
  type LimitCycle,
  type ModelSpec
} from '$lib/dynamics';
import { outcomeOf, planeFor, type Outcome, type PlaneResults } from '$lib/study';
import { deadline } from '../numerics/deadline';
import { ResultCache } from './cache';
import { fingerprintOf } from './fingerprint';

/** What the engine says of a model, whatever the counts are. */
export interface ModelResults {
  report: EquilibriaReport;
  cycles: LimitCycle[];
}

const models = new ResultCache<ModelResults>(64);
const planes = new ResultCache<PlaneResults>(64);
const ends = new ResultCache<{ outcome: Outcome | null }>(128);

/** Equilibria and cycles of a model. */
export function resultsOf(model: ModelSpec): ModelResults {
  return models.get(fingerprintOf(model), () => {
    const report = findEquilibria(model);
    return { report, cycles: limitCycles(model, report) };
  });
}

/** Window, isoclines, divides and direction field of a model, in a window that holds its starts as well. */
export function planeOf(model: ModelSpec, starts: readonly Start[]): PlaneResults {
  const seen = starts.map(({ x, y }) => ({ x, y }));
  const isLate = deadline(500);
  const draw = () => {
    const { report, cycles } = resultsOf(model);
    return planeFor(model, report, cycles, seen, { shouldStop: isLate });
  };
  return planes.get(fingerprintOf({ model, seen }), draw, () => !isLate());
}

/** Where today's counts end up; null where there are none, or where their path does not say. */
export function outcomeToday(content: StudyContent, model: ModelSpec): Outcome | null {
  const [today] = content.starts;
  if (!today || (today.x === 0 && today.y === 0)) return null;
  const { x, y } = today;
  const isLate = deadline(500);
  const follow = () => {
    const { report, cycles } = resultsOf(model);
    const end = outcomeFrom(model, report, { x, y }, { cycles, shouldStop: isLate });
    return { outcome: outcomeOf(end, report, model) };
  };
  return ends.get(fingerprintOf({ model, x, y }), follow, ({ outcome }) => outcome !== null || !isLate()).outcome;
}
