import type { z } from 'zod';
import { issuesOf } from '../api/problem';
import { refusal } from '../errors';

/**
 * Checks a value against a schema and returns what the schema makes of it. Throws the 422 refusal that names every field
 * by its dotted path, below `prefix` where one is given, so that a form can set each complaint beside its field.
 */
export function parseInput<S extends z.ZodType>(schema: S, value: unknown, prefix = ''): z.output<S> {
  const parsed = schema.safeParse(value);
  if (parsed.success) return parsed.data;
  const issues = issuesOf(parsed.error).map(({ path, message }) => ({
    path: [prefix, path].filter(Boolean).join('.'),
    message
  }));
  throw refusal('input.invalid', { message: issues[0]?.message, issues });
}
