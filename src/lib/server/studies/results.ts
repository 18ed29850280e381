import type { StudyContent } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import {
  findEquilibria,
  limitCycles,
  simulate,
  type EquilibriaReport,
  type LimitCycle,
  type ModelSpec,
  type TrajectoryResult
} from '$lib/dynamics';
import { outcomeOf, scaleOf, type CycleFacts, type Outcome } from '$lib/study';
import { deadline } from '../numerics/deadline';
import { ResultCache } from './cache';
import { fingerprintOf } from './fingerprint';

/** What the engine says of a model, whatever the counts are. */
export interface ModelResults {
  report: EquilibriaReport;
  cycles: LimitCycle[];
}

const models = new ResultCache<ModelResults>(64);
const ends = new ResultCache<{ outcome: Outcome | null }>(128);

/** Equilibria and cycles of a model. */
export function resultsOf(model: ModelSpec): ModelResults {
  return models.get(fingerprintOf(model), () => {
    const report = findEquilibria(model);
    return { report, cycles: limitCycles(model, report) };
  });
}

/** A cycle as the words about it want it. */
export function cycleFacts(cycle: LimitCycle): CycleFacts {
  return {
    stability: cycle.multiplier < 1 ? 'stable' : 'unstable',
    period: cycle.period,
    low: { x: cycle.xMin, y: cycle.yMin },
    high: { x: cycle.xMax, y: cycle.yMax },
    mean: { x: cycle.xMean, y: cycle.yMean }
  };
}

/** Return times and turns after which a path has come to its end, or is not going to come to one. */
const PATIENCE = 40;
/** How near a path must lie to a cycle, as a share of the cycle's own size. */
const NEAR_CYCLE = 0.03;

/** Where today's counts end up; null where there are none, or where a long path does not say. */
export function outcomeToday(question: StudyQuestion, content: StudyContent, model: ModelSpec): Outcome | null {
  const [today] = content.starts;
  if (!today || (today.x === 0 && today.y === 0)) return null;
  const { x, y } = today;
  return ends.get(fingerprintOf({ model, x, y, horizon: question.horizon }), () => ({
    outcome: followTo({ x, y }, model, question.horizon)
  })).outcome;
}

function followTo(start: { x: number; y: number }, model: ModelSpec, horizon: number): Outcome | null {
  const { report, cycles } = resultsOf(model);
  const times = [
    horizon,
    ...report.equilibria.flatMap(({ returnTime, period }) => [returnTime ?? 0, period ?? 0]),
    ...cycles.map(({ period }) => period)
  ];
  const span = PATIENCE * Math.max(...times.filter((time) => Number.isFinite(time)));
  const path = simulate(model, { start, span: [0, span], samples: 101, rtol: 1e-6, shouldStop: deadline(500) });
  const end = { x: path.x.at(-1) ?? Number.NaN, y: path.y.at(-1) ?? Number.NaN };
  if (path.outcome.status === 'failed') return unboundedEnd(path, report);
  return outcomeOf(end, report) ?? (cycles.some((cycle) => isOn(end, cycle)) ? { ends: 'cycle' } : null);
}

/** A run that stopped because an abundance left the range of numbers has said where it goes. */
function unboundedEnd(path: TrajectoryResult, report: EquilibriaReport): Outcome | null {
  if (path.outcome.status !== 'failed' || path.outcome.reason !== 'notFinite') return null;
  const scale = scaleOf(report);
  const x = (path.x.at(-1) ?? 0) / scale.x;
  const y = (path.y.at(-1) ?? 0) / scale.y;
  return { ends: 'unbounded', species: x >= y ? 'first' : 'second' };
}

function isOn(end: { x: number; y: number }, cycle: LimitCycle): boolean {
  if (!(cycle.multiplier < 1)) return false;
  const sizeX = cycle.xMax - cycle.xMin;
  const sizeY = cycle.yMax - cycle.yMin;
  return cycle.points.some((point) => Math.hypot((end.x - point.x) / sizeX, (end.y - point.y) / sizeY) < NEAR_CYCLE);
}
