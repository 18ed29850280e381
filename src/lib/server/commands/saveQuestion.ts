import { StudyQuestion } from '$lib/contracts/study';
import type { Saved } from '$lib/contracts/views';
import { defaultStructure } from '$lib/study';
import type { Context } from '../context';
import { parseInput } from '../studies/parseInput';
import { revise } from '../studies/revise';

/**
 * Saves the question. Asking about another interaction opens the model anew with that interaction's usual terms; the rates
 * that were typed are kept, and those the new model does not use wait in case it is changed back.
 */
export function saveQuestion(
  context: Context,
  input: { studyId: string; revision: unknown; question: unknown }
): Promise<Saved> {
  return revise(context, {
    studyId: input.studyId,
    revision: input.revision,
    change({ content }) {
      const question = parseInput(StudyQuestion, input.question, 'question');
      const structure =
        question.interaction === content.structure.interaction
          ? content.structure
          : defaultStructure(question.interaction);
      return { question, content: { ...content, structure } };
    }
  });
}
