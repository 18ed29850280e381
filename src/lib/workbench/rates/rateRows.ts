import type { RateEntry } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import { speciesNames, type RateGroup, type RateNeed, type ResolvedRate } from '$lib/study';

/** One line of the Rates table, as the server reads it. */
export interface RateRow {
  need: RateNeed;
  entry: RateEntry | null;
  resolved: ResolvedRate | null;
  /** Code of the unit the model takes it in. */
  studyUnit: string;
  /** What the number says in plain words. */
  echo: readonly string[];
  warnings: readonly { key: string; sentence: string }[];
  issues: readonly { path: string; message: string }[];
}

export interface RateGroupRows {
  group: RateGroup;
  title: string;
  rows: RateRow[];
}

/** The rows under the headings of the table: each species, what is between them, and management. */
export function groupRates(rows: readonly RateRow[], question: StudyQuestion): RateGroupRows[] {
  const names = speciesNames(question);
  const titles: Record<RateGroup, string> = {
    first: names.first,
    second: names.second,
    between: 'Between the two',
    management: 'Management'
  };
  return (['first', 'second', 'between', 'management'] as const)
    .map((group) => ({ group, title: titles[group], rows: rows.filter((r) => r.need.group === group) }))
    .filter((g) => g.rows.length > 0);
}
