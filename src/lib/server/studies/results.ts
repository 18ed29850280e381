import type { Start, StudyContent } from '$lib/contracts/content';
import {
  findEquilibria,
  isoclines,
  limitCycles,
  outcomeFrom,
  separatrices,
  suggestWindow,
  vectorField,
  type EquilibriaReport,
  type FieldArrow,
  type Isocline,
  type LimitCycle,
  type ModelSpec,
  type Separatrix
} from '$lib/dynamics';
import { outcomeOf, type Outcome } from '$lib/study';
import { deadline } from '../numerics/deadline';
import { ResultCache } from './cache';
import { fingerprintOf } from './fingerprint';

/** What the engine says of a model, whatever the counts are. */
export interface ModelResults {
  report: EquilibriaReport;
  cycles: LimitCycle[];
}

/** Everything drawn on the state plane that follows from the model and the starts. */
export interface PlaneResults {
  /** From 0, 0 to here. */
  window: { xMax: number; yMax: number };
  isoclines: Isocline[];
  separatrices: Separatrix[];
  field: FieldArrow[];
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

/** Columns and rows of the direction field that is kept; a page may sample its own. */
const FIELD = 24;

/** Window, isoclines, divides and direction field of a model, in a window that holds its starts as well. */
export function planeOf(model: ModelSpec, starts: readonly Start[]): PlaneResults {
  const seen = starts.map(({ x, y }) => ({ x, y }));
  return planes.get(fingerprintOf({ model, seen }), () => {
    const { report, cycles } = resultsOf(model);
    const turns = cycles.map(({ xMax, yMax }) => ({ x: xMax, y: yMax }));
    const window = suggestWindow(model, report, [...seen, ...turns]);
    return {
      window,
      isoclines: isoclines(model, window),
      separatrices: separatrices(model, report, window),
      field: vectorField(model, window, FIELD, FIELD)
    };
  });
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
