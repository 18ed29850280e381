import type { RateEntry, StudyContent } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import {
  assemble,
  contextOf,
  echoOf,
  pathsOf,
  rateNeed,
  ratesNeeded,
  studyUnit,
  unitsFor,
  warningsOf,
  type Issue,
  type RateNeed,
  type ResolvedRate,
  type UnitOption,
  type Warning
} from '$lib/study';
import type { Context } from '../context';
import { Thread } from '../db/models/Thread';
import type { StudyAct } from '../policies/ability';
import { openStudy, readRevision } from '../studies/access';

export interface RateRow {
  need: RateNeed;
  /** As typed; null while it is missing. */
  entry: RateEntry | null;
  /** In the study's units; null while missing or wrong. */
  resolved: ResolvedRate | null;
  /** Code of the unit the model takes it in. */
  studyUnit: string;
  /** Units it may be typed in, the study's own first. */
  units: UnitOption[];
  /** Plain words: "doubles in 8.8 months". */
  echo: string[];
  warnings: Warning[];
  issues: Issue[];
  openThreads: number;
}
export interface RatesView {
  studyId: string;
  revision: number;
  question: StudyQuestion;
  content: StudyContent;
  rows: RateRow[];
  /** Entered, but not used by the model as it is now. */
  unused: { entry: RateEntry; need: RateNeed }[];
  missing: number;
  /** Complaints that belong to no row, such as terms that cannot stand together. */
  issues: Issue[];
  abilities: StudyAct[];
}

/** The Rates page: a row for every rate the model needs, with what was typed, what it comes to and what is odd about it. */
export async function studyRates(context: Context, studyId: string): Promise<RatesView> {
  const { study, abilities } = await openStudy(context, studyId, 'study.read');
  const [{ number, question, content }, threads] = await Promise.all([
    readRevision(study),
    Thread.findAll({ where: { studyId: study.id, state: 'open', anchorKind: 'rate' }, attributes: ['anchorKey'] })
  ]);
  const assembled = assemble(question, content);
  const warnings = warningsOf(question, content, assembled);
  const { structure } = content;
  const rows = ratesNeeded(structure, question).map((need): RateRow => {
    const { path } = need;
    const entry = content.rates.find((rate) => rate.path === path) ?? null;
    const unitContext = contextOf(entry ?? { form: 'plain' }, content);
    return {
      need,
      entry,
      resolved: entry ? (assembled.resolved[path] ?? null) : null,
      studyUnit: studyUnit(path, question, unitContext),
      units: unitsFor(path, question, unitContext),
      echo: entry ? echoOf(path, question, content, assembled) : [],
      warnings: warnings.filter((warning) => warning.path === path),
      issues: assembled.issues.filter((issue) => issue.path.startsWith(`rates.${path}`)),
      openThreads: threads.filter(({ anchorKey }) => anchorKey === path).length
    };
  });
  const used = pathsOf(structure);
  return {
    studyId: study.id,
    revision: number,
    question,
    content,
    rows,
    unused: content.rates
      .filter(({ path }) => !used.includes(path))
      .map((entry) => ({ entry, need: rateNeed(entry.path, structure, question) })),
    missing: assembled.missing.length,
    issues: assembled.issues.filter((issue) => !issue.path.startsWith('rates.')),
    abilities
  };
}
