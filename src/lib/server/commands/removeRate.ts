import { z } from 'zod';
import { ratePaths } from '$lib/contracts/content';
import type { Saved } from '$lib/contracts/views';
import type { Context } from '../context';
import { parseInput } from '../studies/parseInput';
import { revise } from '../studies/revise';

const Path = z.enum(ratePaths, { error: 'Choose a rate of the model.' });

/** Takes one rate out of the study. It stays in the earlier revisions. */
export function removeRate(
  context: Context,
  input: { studyId: string; revision: unknown; path: unknown }
): Promise<Saved> {
  return revise(context, {
    studyId: input.studyId,
    revision: input.revision,
    change({ question, content }) {
      const path = parseInput(Path, input.path, 'path');
      return { question, content: { ...content, rates: content.rates.filter((entry) => entry.path !== path) } };
    }
  });
}
