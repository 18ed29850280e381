import type { Saved } from '$lib/contracts/views';
import type { Context } from '../context';
import { readRevision } from '../studies/access';
import { revise } from '../studies/revise';

/** Makes an earlier revision the newest: the undo that loses nothing, since what it replaces stays in the history. */
export function restoreRevision(
  context: Context,
  input: { studyId: string; revision: unknown; number: number }
): Promise<Saved> {
  return revise(context, {
    studyId: input.studyId,
    revision: input.revision,
    lead: `Back to revision ${input.number}`,
    async change(_current, study) {
      const { question, content } = await readRevision(study, input.number);
      return { question, content };
    }
  });
}
