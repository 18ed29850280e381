import type { StudyContent } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import type { ModelSpec } from '$lib/dynamics';
import { assemble } from '$lib/study';
import { refusal, type FieldIssue } from '../errors';
import type { ResultPart } from './fingerprint';

/** The study's model, or the 422 that names every rate that is missing or wrong, and a missing start for a trajectory. */
export function requireResult(question: StudyQuestion, content: StudyContent, part: ResultPart): ModelSpec {
  const { model, missing, issues } = assemble(question, content);
  const wanting: FieldIssue[] = [
    ...missing.map(({ path, name, symbol }) => ({
      path: `rates.${path}`,
      message: `${name} (${symbol.plain}) is not entered yet.`
    })),
    ...issues
  ];
  if (part === 'trajectories' && content.starts.length === 0) {
    wanting.push({ path: 'starts', message: 'No start is entered yet: give today’s counts.' });
  }
  if (model === null || wanting.length > 0) {
    throw refusal('input.invalid', {
      message: 'The study does not have all it needs for this result yet.',
      issues: wanting
    });
  }
  return model;
}
