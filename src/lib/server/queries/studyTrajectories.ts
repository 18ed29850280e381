import type { z } from 'zod';
import type { StudyPathsAnswer } from '$lib/contracts/answers';
import type { RunSettings, Start, StudyContent } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import type { ModelSpec, TrajectoryResult } from '$lib/dynamics';
import { fileStem } from '$lib/formats/csv';
import { assemble, displayUnit, type Issue, type RateNeed } from '$lib/study';
import type { UnitsOption } from '../api/csvResponse';
import type { Context } from '../context';
import type { CrossCheck } from '../numerics/crossCheck';
import { requireReached } from '../numerics/trajectory';
import type { StudyAct } from '../policies/ability';
import { tableCsv } from '../presenters/trajectoryCsv';
import { openStudy, readRevision } from '../studies/access';
import { pathsFor } from '../studies/paths';
import { readingOf, type ReadingView } from '../studies/readingOf';
import { requireResult } from '../studies/requireResult';

export interface RunView {
  start: Start;
  /** Reached or not: a run that stopped early holds what it reached, and `result.remark` says why. */
  result: TrajectoryResult;
  crossCheck: CrossCheck;
}
export interface TrajectoriesView {
  studyId: string;
  revision: number;
  question: StudyQuestion;
  content: StudyContent;
  model: ModelSpec | null;
  missing: RateNeed[];
  issues: Issue[];
  run: RunSettings;
  /** One a start, in their order; empty while the model or the starts are missing. */
  runs: RunView[];
  reading: ReadingView | null;
  abilities: StudyAct[];
}

/** The Trajectories page: the path from every start, each with the check by another method. */
export async function studyTrajectories(context: Context, studyId: string): Promise<TrajectoriesView> {
  const { study, abilities } = await openStudy(context, studyId, 'study.read');
  const { number, question, content } = await readRevision(study);
  const { model, missing, issues } = assemble(question, content);
  return {
    studyId: study.id,
    revision: number,
    question,
    content,
    model,
    missing,
    issues,
    run: content.run,
    runs: model ? pathsFor(model, content.starts, content.run) : [],
    reading: await readingOf(study.id, 'trajectories', question, content),
    abilities
  };
}

/** The same paths as the API gives them. Throws 422 where something is missing or a run does not reach its end. */
export async function studyPaths(context: Context, studyId: string): Promise<z.input<typeof StudyPathsAnswer>> {
  const { number, question, paths } = await reachedPaths(context, studyId);
  return {
    studyId,
    revision: number,
    units: { time: question.timeUnit, first: question.first.unit, second: question.second.unit },
    paths: paths.map(({ start, result, crossCheck }) => ({
      label: start.label,
      start: { x: start.x, y: start.y },
      t: result.t,
      x: result.x,
      y: result.y,
      events: result.events,
      steps: result.steps,
      crossCheck,
      remark: result.remark,
      engine: result.engine
    }))
  };
}

/**
 * The paths as one table: a row for each start and time, all digits kept. The file is named after the study, its
 * revision and today's date.
 */
export async function studyTrajectoriesCsv(
  context: Context,
  studyId: string,
  options: { units: UnitsOption }
): Promise<{ fileName: string; text: string }> {
  const { number, question, paths } = await reachedPaths(context, studyId);
  const unit = (code: string) => displayUnit(code).text;
  const text = tableCsv(
    [
      { name: 'start', unit: '', values: paths.flatMap(({ start, result }) => result.t.map(() => start.label)) },
      { name: 'time', unit: unit(question.timeUnit), values: paths.flatMap(({ result }) => result.t) },
      { name: question.first.common, unit: unit(question.first.unit), values: paths.flatMap(({ result }) => result.x) },
      {
        name: question.second.common,
        unit: unit(question.second.unit),
        values: paths.flatMap(({ result }) => result.y)
      }
    ],
    options.units
  );
  const date = context.now().toISOString().slice(0, 10);
  return { fileName: `${fileStem(question.title)}-v${number}-trajectories-${date}.csv`, text };
}

async function reachedPaths(context: Context, studyId: string) {
  const { study } = await openStudy(context, studyId, 'study.export');
  const { number, question, content } = await readRevision(study);
  const model = requireResult(question, content, 'trajectories');
  const paths = pathsFor(model, content.starts, content.run);
  for (const { result } of paths) requireReached(result);
  return { number, question, paths };
}
