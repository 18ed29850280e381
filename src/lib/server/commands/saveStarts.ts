import { StudyContent } from '$lib/contracts/content';
import type { Saved } from '$lib/contracts/views';
import type { Context } from '../context';
import { parseInput } from '../studies/parseInput';
import { revise } from '../studies/revise';

/** Saves the starting states; the first is today’s counts. */
export function saveStarts(
  context: Context,
  input: { studyId: string; revision: unknown; starts: unknown }
): Promise<Saved> {
  return revise(context, {
    studyId: input.studyId,
    revision: input.revision,
    change({ question, content }) {
      const starts = parseInput(StudyContent.shape.starts, input.starts, 'starts');
      return { question, content: { ...content, starts } };
    }
  });
}
