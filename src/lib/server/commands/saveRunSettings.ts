import { StudyContent } from '$lib/contracts/content';
import type { Saved } from '$lib/contracts/views';
import type { Context } from '../context';
import { parseInput } from '../studies/parseInput';
import { revise } from '../studies/revise';

/** Saves how long and how finely trajectories are run, and which levels to watch. */
export function saveRunSettings(
  context: Context,
  input: { studyId: string; revision: unknown; run: unknown }
): Promise<Saved> {
  return revise(context, {
    studyId: input.studyId,
    revision: input.revision,
    change({ question, content }) {
      const run = parseInput(StudyContent.shape.run, input.run, 'run');
      return { question, content: { ...content, run } };
    }
  });
}
