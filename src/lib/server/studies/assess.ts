import type { StudyContent } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import type { PartView } from '$lib/contracts/views';
import { assemble, countWord, sentenceCase, verdict, type Assembled, type Verdict } from '$lib/study';
import type { Reading } from '../db/models/Reading';
import { partsOf } from './partsOf';
import { cycleFacts, outcomeToday, resultsOf } from './results';

/** A verdict, or the honest lack of one: `none` while a rate is missing or wrong. */
export type StudyVerdict = Omit<Verdict, 'kind'> & { kind: Verdict['kind'] | 'none' };

export interface Assessment {
  assembled: Assembled;
  verdict: StudyVerdict;
  parts: PartView[];
}

/** What a study says as a whole: its verdict, and how far each part has come. */
export function assess(
  question: StudyQuestion,
  content: StudyContent,
  readings: readonly Pick<Reading, 'part' | 'fingerprint' | 'sentence' | 'revision'>[],
  openThreads = 0
): Assessment {
  const assembled = assemble(question, content);
  const told = verdictOf(question, content, assembled);
  return {
    assembled,
    verdict: told,
    parts: partsOf({ question, content, assembled, verdict: told, readings, openThreads })
  };
}

function verdictOf(question: StudyQuestion, content: StudyContent, assembled: Assembled): StudyVerdict {
  const { model, missing, issues } = assembled;
  if (model === null) {
    const plain = missing.length
      ? `${sentenceCase(countWord(missing.length))} of the model’s rates ${missing.length === 1 ? 'is' : 'are'} not entered yet.`
      : (issues[0]?.message ?? 'The model is not complete yet.');
    return { kind: 'none', consequence: 'unknown', parts: [{ text: plain }], plain };
  }
  const { report, cycles } = resultsOf(model);
  return verdict(question, report, {
    model,
    cycles: cycles.map(cycleFacts),
    outcome: outcomeToday(question, content, model)
  });
}
