import type { StudyContent } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import {
  assemble,
  changeWords,
  countWord,
  partInputs,
  partStates,
  sentenceCase,
  verdict,
  type Assembled,
  type PartReading,
  type PartStatus,
  type Verdict
} from '$lib/study';
import type { ResultPart } from './fingerprint';
import { outcomeToday, resultsOf } from './results';

/** A verdict, or the honest lack of one: `none` while a rate is missing or wrong. */
export type StudyVerdict = Omit<Verdict, 'kind'> & { kind: Verdict['kind'] | 'none' };

export interface Assessment {
  assembled: Assembled;
  verdict: StudyVerdict;
  parts: PartStatus[];
}

/** The text that a part was last read from, and its revision. */
export interface ReadText {
  part: ResultPart;
  revision: number;
  question: StudyQuestion;
  content: StudyContent;
}
/** What the parts lean on beside the text itself. */
export interface Surroundings {
  readings?: readonly ReadText[];
  comments?: { open: number; total: number };
  reviewers?: number;
}

const RESULTS: readonly ResultPart[] = ['equilibria', 'trajectories'];

/** What a study says as a whole: its verdict, and how far each part has come. */
export function assess(question: StudyQuestion, content: StudyContent, around: Surroundings = {}): Assessment {
  const assembled = assemble(question, content);
  const told = verdictOf(question, content, assembled);
  const { readings = [], comments, reviewers } = around;
  const statuses = partStates({
    question,
    content,
    assembled,
    verdict: told.kind === 'none' ? null : told.kind,
    readings: readingsByPart(question, content, readings),
    ...(comments ? { comments } : {}),
    ...(reviewers === undefined ? {} : { reviewers })
  });
  const parts = statuses.map((status) => {
    if (status.state !== 'stale') return status;
    const [first] = status.changed;
    const revision = readings.find(({ part }) => part === status.key)?.revision;
    const words = first ? sentenceCase(changeWords(first, question, content)) : 'Inputs';
    const more = status.changed.length > 1 ? ' and more' : '';
    return { ...status, summary: `${words}${more} changed since version ${revision ?? '?'}` };
  });
  return { assembled, verdict: told, parts };
}

/** A result that nobody has read yet is as fresh as its inputs: only a reading can go stale. */
function readingsByPart(question: StudyQuestion, content: StudyContent, readings: readonly ReadText[]) {
  const byPart: Partial<Record<ResultPart, PartReading>> = {};
  for (const part of RESULTS) {
    const read = readings.find((reading) => reading.part === part) ?? { question, content };
    byPart[part] = { inputs: partInputs(part, read.question, read.content) };
  }
  return byPart;
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
  return verdict(question, report, { model, cycles, outcome: outcomeToday(content, model) });
}
