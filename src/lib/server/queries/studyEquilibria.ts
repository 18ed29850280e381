import type { StudyContent } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import { simulate, type EquilibriaReport, type LimitCycle, type ModelSpec } from '$lib/dynamics';
import {
  eigenvalueSE,
  errorsOf,
  factsFor,
  invasionSE,
  invasionsOf,
  pointParagraph,
  pointsOf,
  pointTitle,
  type Fact,
  type Issue,
  type LetteredPoint,
  type Outcome,
  type PointErrors,
  type PlaneResults,
  type PointParagraph,
  type RareGrowth,
  type RateNeed
} from '$lib/study';
import type { Context } from '../context';
import { Thread } from '../db/models/Thread';
import { deadline } from '../numerics/deadline';
import type { StudyAct } from '../policies/ability';
import { openStudy, readRevision } from '../studies/access';
import { assess, type StudyVerdict } from '../studies/assess';
import { ResultCache } from '../studies/cache';
import { fingerprintOf } from '../studies/fingerprint';
import { readingOf, type ReadingView } from '../studies/readingOf';
import { outcomeToday, planeOf, resultsOf } from '../studies/results';

export interface PointView extends LetteredPoint, PointErrors {
  /** `Both together`, `Ridge broom only`. */
  title: string;
  paragraph: PointParagraph;
  /** Standard errors of both eigenvalues, 1/time; null for a state held by a quota. */
  eigenvalueErrors: ReturnType<typeof eigenvalueSE> | null;
  openThreads: number;
}
export interface InvasionView extends RareGrowth {
  /** Standard error of the rate, and its 5–95 % limits; null where the rates are exact or it cannot be carried. */
  se: number | null;
  low: number | null;
  high: number | null;
}
/** Everything that follows from a model that is complete. */
export interface EquilibriaFindings {
  report: EquilibriaReport;
  /** Feasible points and states held by a quota, lettered in the order of the table. */
  points: PointView[];
  cycles: LimitCycle[];
  invasions: InvasionView[];
  facts: Fact[];
  plane: PlaneResults;
  /** The path from each start, for the plane. */
  paths: { label: string; points: { x: number; y: number }[] }[];
  outcome: Outcome | null;
}
export interface EquilibriaView {
  studyId: string;
  revision: number;
  question: StudyQuestion;
  content: StudyContent;
  model: ModelSpec | null;
  missing: RateNeed[];
  issues: Issue[];
  verdict: StudyVerdict;
  /** Null while the model is not complete. */
  findings: EquilibriaFindings | null;
  reading: ReadingView | null;
  abilities: StudyAct[];
}

/** Standard normal quantile of 95 %. */
const Z95 = 1.6448536269514722;
/** Milliseconds for the paths on the plane, all together. */
const PATHS_MS = 1500;
/** Points along a path that a plane of some 500 pixels can show. */
const PATH_POINTS = 401;

const cache = new ResultCache<Omit<EquilibriaFindings, 'points'> & { points: Omit<PointView, 'openThreads'>[] }>(24);

/** The Equilibria page: where the populations can rest, how sure that is, who invades whom, and the plane to draw. */
export async function studyEquilibria(context: Context, studyId: string): Promise<EquilibriaView> {
  const { study, abilities } = await openStudy(context, studyId, 'study.read');
  const { number, question, content } = await readRevision(study);
  const threads = await Thread.findAll({
    where: { studyId: study.id, state: 'open', anchorKind: 'point' },
    attributes: ['anchorKey']
  });
  const { assembled, verdict } = assess(question, content);
  const { model, missing, issues, resolved } = assembled;
  let findings: EquilibriaFindings | null = null;
  if (model) {
    const key = fingerprintOf({ model, resolved, question, starts: content.starts, span: content.run.span });
    const found = cache.get(key, () => findingsOf(question, content, model, resolved, verdict));
    findings = {
      ...found,
      points: found.points.map((point) => ({
        ...point,
        openThreads: threads.filter(({ anchorKey }) => anchorKey === point.letter).length
      }))
    };
  }
  return {
    studyId: study.id,
    revision: number,
    question,
    content,
    model,
    missing,
    issues,
    verdict,
    findings,
    reading: await readingOf(study.id, 'equilibria', question, content),
    abilities
  };
}

function findingsOf(
  question: StudyQuestion,
  content: StudyContent,
  model: ModelSpec,
  resolved: ReturnType<typeof assess>['assembled']['resolved'],
  verdict: StudyVerdict
) {
  const { report, cycles } = resultsOf(model);
  const outcome = outcomeToday(content, model);
  const errors = errorsOf(model, report, resolved);
  const points = pointsOf(report).map((point) => ({
    ...point,
    seX: errors[point.letter]?.seX ?? null,
    seY: errors[point.letter]?.seY ?? null,
    title: pointTitle(point.who, question),
    paragraph: pointParagraph(point, { question, model, report, cycles, errors }),
    eigenvalueErrors: point.equilibrium ? eigenvalueSE(model, point, resolved) : null
  }));
  const invasions = invasionsOf(question, report, model).map((found): InvasionView => {
    const se = invasionSE(model, report, found, resolved);
    const half = se === null || se === 0 ? null : Z95 * se;
    return {
      ...found,
      se,
      low: half === null ? null : found.rate - half,
      high: half === null ? null : found.rate + half
    };
  });
  const facts =
    verdict.kind === 'none'
      ? []
      : factsFor(question, report, { kind: verdict.kind }, { model, cycles, outcome, errors });
  const shouldStop = deadline(PATHS_MS);
  const paths = content.starts.map(({ label, x, y }) => {
    const path = simulate(model, {
      start: { x, y },
      span: [0, content.run.span],
      samples: PATH_POINTS,
      rtol: 1e-6,
      shouldStop
    });
    return { label, points: path.x.map((value, i) => ({ x: value, y: path.y[i] ?? 0 })) };
  });
  return { report, points, cycles, invasions, facts, plane: planeOf(model, content.starts), paths, outcome };
}
