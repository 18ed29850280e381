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

const models = new ResultCache<ModelResults & { late: boolean }>(64);
const hurried = new ResultCache<ModelResults & { late: boolean }>(16);
const planes = new ResultCache<PlaneResults>(64);
const ends = new ResultCache<{ outcome: Outcome | null }>(128);

/** The search for cycles may take this long, some ten times what a hard model needs. */
const CYCLES_MS = 3000;

/** Equilibria and cycles of a model. */
export function resultsOf(model: ModelSpec): ModelResults {
  const key = fingerprintOf(model);
  const find = () => {
    const isLate = deadline(CYCLES_MS);
    const report = findEquilibria(model);
    const cycles = limitCycles(model, report, { shouldStop: isLate });
    return { report, cycles, late: isLate() };
  };
  // What ran out of time may be better another day, but a page that asks for it five times must not pay for each.
  const minute = Math.floor(Date.now() / 60_000);
  return models.get(
    key,
    () => hurried.get(`${key} ${minute}`, find),
    ({ late }) => !late
  );
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
