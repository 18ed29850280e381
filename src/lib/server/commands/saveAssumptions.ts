import { StudyContent } from '$lib/contracts/content';
import type { Saved } from '$lib/contracts/views';
import type { Context } from '../context';
import { parseInput } from '../studies/parseInput';
import { revise } from '../studies/revise';

/** Saves which of the model’s assumptions the author accepts, and why. */
export function saveAssumptions(
  context: Context,
  input: { studyId: string; revision: unknown; assumptions: unknown }
): Promise<Saved> {
  return revise(context, {
    studyId: input.studyId,
    revision: input.revision,
    change({ question, content }) {
      const assumptions = parseInput(StudyContent.shape.assumptions, input.assumptions, 'assumptions');
      return { question, content: { ...content, assumptions } };
    }
  });
}
