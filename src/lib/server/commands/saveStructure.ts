import { ModelStructure } from '$lib/contracts/content';
import type { Saved } from '$lib/contracts/views';
import { assemble } from '$lib/study';
import type { Context } from '../context';
import { refusal } from '../errors';
import { parseInput } from '../studies/parseInput';
import { revise } from '../studies/revise';

/** Saves which terms the model has. Terms that cannot stand together are refused, each named by its path. */
export function saveStructure(
  context: Context,
  input: { studyId: string; revision: unknown; structure: unknown }
): Promise<Saved> {
  return revise(context, {
    studyId: input.studyId,
    revision: input.revision,
    change({ question, content }) {
      const structure = parseInput(ModelStructure, input.structure, 'structure');
      const next = { ...content, structure };
      const issues = assemble(question, next).issues.filter(({ path }) => path.startsWith('structure'));
      if (issues.length > 0) throw refusal('input.invalid', { message: issues[0]?.message, issues });
      return { question, content: next };
    }
  });
}
