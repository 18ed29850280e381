import type { Anchor, AnchorKind } from '$lib/contracts/comment';
import { ratePaths, type RatePath, type StudyContent } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import { assemble, levelWords, pointsOf, pointTitle, rateNeed, sentenceCase, type LetteredPoint } from '$lib/study';
import { invalid } from '../errors';
import { rateReads } from './changes';
import { resultsOf } from './results';

/** What something in a study is called, and what it reads at this revision; `reads` is null where it is not there. */
export interface AnchorReading {
  label: string;
  reads: string | null;
}

const isRatePath = (key: string): key is RatePath => (ratePaths as readonly string[]).includes(key);

function pointReads({ x, y, who, equilibrium }: LetteredPoint, question: StudyQuestion): string {
  const level = (key: 'first' | 'second') =>
    `${question[key].common} ${levelWords(key === 'first' ? x : y, key, question, { onArea: false })}`;
  const kind = equilibrium ? equilibrium.class : 'held by its quota';
  return `${pointTitle(who, question)}: ${level('first')}, ${level('second')}; ${kind}`;
}

/** Reads any anchor of one revision; the equilibria are found once, when a point is first asked for. */
export function anchorReader(
  question: StudyQuestion,
  content: StudyContent
): (kind: AnchorKind, key: string) => AnchorReading {
  let found: LetteredPoint[] | null = null;
  const findPoints = (): LetteredPoint[] => {
    if (found) return found;
    const { model } = assemble(question, content);
    found = model ? pointsOf(resultsOf(model).report) : [];
    return found;
  };
  return (kind, key) => {
    if (kind === 'study') return { label: 'The study', reads: question.title };
    if (kind === 'part') return { label: sentenceCase(key), reads: sentenceCase(key) };
    if (kind === 'point') {
      const point = findPoints().find(({ letter }) => letter === key);
      return { label: `Point ${key}`, reads: point ? pointReads(point, question) : null };
    }
    if (!isRatePath(key)) return { label: key, reads: null };
    const { symbol, name } = rateNeed(key, content.structure, question);
    const entry = content.rates.find(({ path }) => path === key);
    return { label: `${symbol.plain} ${name}`, reads: entry ? rateReads(entry) : 'not entered' };
  };
}

/** What an anchor reads now, for the record of a new thread. Throws 422 for a point that the study does not have. */
export function quoteAnchor(anchor: Anchor, question: StudyQuestion, content: StudyContent): string {
  const key = anchor.kind === 'study' ? '' : anchor.key;
  const { reads } = anchorReader(question, content)(anchor.kind, key);
  if (reads === null) throw invalid('anchor.key', 'The study has no such point at this revision.');
  return reads;
}
