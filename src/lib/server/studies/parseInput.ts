import type { z } from 'zod';
import { issuesOf } from '../api/problem';
import { refusal, type FieldIssue } from '../errors';

/**
 * Checks a value against a schema and returns what the schema makes of it. Throws the 422 refusal that names every field
 * by its dotted path, below `prefix` where one is given, so that a form can set each complaint beside its field.
 */
export function parseInput<S extends z.ZodType>(schema: S, value: unknown, prefix = ''): z.output<S> {
  const parsed = schema.safeParse(value);
  const complaints = parsed.success ? unstorable(parsed.data) : issuesOf(parsed.error);
  if (parsed.success && complaints.length === 0) return parsed.data;
  const before = prefix === '' ? [] : prefix.split('.');
  const issues = complaints.map(({ path, message, steps }) => ({
    path: [prefix, path].filter(Boolean).join('.'),
    message,
    ...(steps && { steps: [...before, ...steps] })
  }));
  throw refusal('input.invalid', { message: issues[0]?.message, issues });
}

/** Texts that PostgreSQL cannot hold: with a zero character, or half of a pair. */
function unstorable(value: unknown, path: string[] = []): FieldIssue[] {
  if (typeof value === 'string') {
    const isGood = value.isWellFormed() && !value.includes('\u0000');
    return isGood ? [] : [{ path: path.join('.'), message: 'There is a character in this that cannot be kept.' }];
  }
  if (typeof value !== 'object' || value === null) return [];
  return Object.entries(value).flatMap(([key, inner]) => unstorable(inner, [...path, key]));
}
