import type { RateEntry, RunSettings, Start } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';

/** A rate as a person types it: what may be left out takes its default when the command checks it. */
export type TypedRate = Omit<RateEntry, 'form' | 'note' | 'overrideReason'> & Partial<RateEntry>;

/** One study of the demo, as what a person would type into its pages one after another. */
export interface DemoStudy {
  key: string;
  question: StudyQuestion;
  rates: readonly TypedRate[];
  starts: readonly Start[];
  run: RunSettings;
}
