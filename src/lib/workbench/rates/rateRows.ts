import type { RateEntry, StudyContent } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import {
  assemble,
  displayUnit,
  echoOf,
  ratesNeeded,
  speciesNames,
  studyUnit,
  warningsOf,
  type RateGroup,
  type RateNeed,
  type ResolvedRate
} from '$lib/study';

/** One line of the Rates table. */
export interface RateRow {
  need: RateNeed;
  entry: RateEntry | null;
  resolved: ResolvedRate | null;
  /** The study's unit, as people write it. */
  unit: string;
  /** What the number says in plain words; empty while there is none. */
  echo: string[];
  warnings: { key: string; sentence: string; answered: boolean }[];
  /** Why an entered value cannot be used. */
  issues: string[];
}

export interface RateGroupRows {
  group: RateGroup;
  title: string;
  rows: RateRow[];
}

/** The Rates table of a study: every number its model needs, in groups, with what is known of each. */
export function rateRows(question: StudyQuestion, content: StudyContent): RateGroupRows[] {
  const assembled = assemble(question, content);
  const warnings = warningsOf(question, content, assembled);
  const names = speciesNames(question);
  const titles: Record<RateGroup, string> = {
    first: names.first,
    second: names.second,
    between: 'Between the two',
    management: 'Management'
  };
  const context = { response: content.structure.feeding.response };
  const rows = ratesNeeded(content.structure, question).map((need): RateRow => {
    const entry = content.rates.find((r) => r.path === need.path) ?? null;
    const resolved = assembled.resolved[need.path] ?? null;
    return {
      need,
      entry,
      resolved,
      unit: displayUnit(studyUnit(need.path, question, context)).text,
      echo: resolved ? echoOf(need.path, question, content, assembled) : [],
      warnings: warnings
        .filter((w) => w.path === need.path)
        .map(({ key, sentence }) => ({ key, sentence, answered: Boolean(entry?.overrideReason) })),
      issues: assembled.issues.filter((i) => i.path.startsWith(`rates.${need.path}.`)).map((i) => i.message)
    };
  });
  return (['first', 'second', 'between', 'management'] as const)
    .map((group) => ({ group, title: titles[group], rows: rows.filter((r) => r.need.group === group) }))
    .filter((g) => g.rows.length > 0);
}
