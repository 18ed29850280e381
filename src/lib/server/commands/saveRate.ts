import { RateEntry, ratePaths } from '$lib/contracts/content';
import type { Saved } from '$lib/contracts/views';
import { checkRate, pathsOf } from '$lib/study';
import type { Context } from '../context';
import { invalid, refusal } from '../errors';
import { parseInput } from '../studies/parseInput';
import { revise } from '../studies/revise';

/**
 * Saves one rate as typed: value, unit, uncertainty, source. A unit that cannot be turned into the study's own, a value
 * outside what the model lets it be, or a rate the model does not have is refused, named by its path.
 */
export function saveRate(
  context: Context,
  input: { studyId: string; revision: unknown; rate: unknown }
): Promise<Saved> {
  return revise(context, {
    studyId: input.studyId,
    revision: input.revision,
    change({ question, content }) {
      const rate = parseInput(RateEntry, input.rate, 'rate');
      if (!pathsOf(content.structure).includes(rate.path)) {
        throw invalid('rate.path', 'The model of this study has no such rate: change the model first.');
      }
      const rates = [...content.rates.filter(({ path }) => path !== rate.path), rate];
      rates.sort((a, b) => ratePaths.indexOf(a.path) - ratePaths.indexOf(b.path));
      const next = { ...content, rates };
      const at = `rates.${rate.path}`;
      const issues = checkRate(rate, question, next).map((issue) => ({
        path: issue.path.startsWith(at) ? `rate${issue.path.slice(at.length)}` : issue.path,
        message: issue.message
      }));
      if (issues.length > 0) throw refusal('input.invalid', { message: issues[0]?.message, issues });
      return { question, content: next };
    }
  });
}
