import type { ModelStructure, RatePath, StudyContent } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import type { ModelSpec } from '$lib/dynamics';
import {
  assemble,
  assumptionsOf,
  cautionsOf,
  type AssumptionText,
  type Caution,
  type Issue,
  type RateNeed,
  type ResolvedRate
} from '$lib/study';
import type { Context } from '../context';
import type { StudyAct } from '../policies/ability';
import { openStudy, readRevision } from '../studies/access';

export interface ModelView {
  studyId: string;
  revision: number;
  question: StudyQuestion;
  content: StudyContent;
  structure: ModelStructure;
  /** The engine's document; null while a rate is missing or wrong. */
  model: ModelSpec | null;
  missing: RateNeed[];
  issues: Issue[];
  /** Rates in the study's units. */
  resolved: Partial<Record<RatePath, ResolvedRate>>;
  /** What the model assumes and leaves out, with the author's tick and comment. */
  assumptions: (AssumptionText & { accepted: boolean; comment: string })[];
  cautions: Caution[];
  abilities: StudyAct[];
}

/** The Model page: the terms, what they come to with the study's rates, and what they take for granted. */
export async function studyModel(context: Context, studyId: string): Promise<ModelView> {
  const { study, abilities } = await openStudy(context, studyId, 'study.read');
  const { number, question, content } = await readRevision(study);
  const { structure } = content;
  const ticks = new Map(content.assumptions.map((assumption) => [assumption.key, assumption]));
  return {
    studyId: study.id,
    revision: number,
    question,
    content,
    structure,
    ...assemble(question, content),
    assumptions: assumptionsOf(structure, question).map((text) => ({
      ...text,
      accepted: ticks.get(text.key)?.accepted ?? false,
      comment: ticks.get(text.key)?.comment ?? ''
    })),
    cautions: cautionsOf(structure, question),
    abilities
  };
}
