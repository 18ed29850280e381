import type { StudyContent } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import { assess, type Surroundings } from './assess';
import { sketchOf } from './sketch';

interface Said {
  question: StudyQuestion;
  content: StudyContent;
  fingerprint: string;
  around: Surroundings;
}

/** What the list shows of a study, worked out from what it says: the columns of its row that follow from its text. */
export function listFields({ question, content, fingerprint, around }: Said) {
  const { assembled, verdict, parts } = assess(question, content, around);
  const { first, second } = question;
  const names = [first.common, first.scientific, second.common, second.scientific];
  return {
    title: question.title,
    place: question.place,
    kind: question.interaction,
    species: {
      first: { common: first.common, scientific: first.scientific },
      second: { common: second.common, scientific: second.scientific }
    },
    fingerprint,
    verdictKind: verdict.kind,
    verdictConsequence: verdict.consequence,
    verdictSentence: verdict.plain,
    partStates: parts,
    sketch: assembled.model ? sketchOf(assembled.model, content) : null,
    searchText: [question.title, question.place, ...names, verdict.plain].join(' ').toLowerCase()
  };
}
