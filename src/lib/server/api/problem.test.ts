import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { AppError, refusal } from '../errors';
import { parseValue, problemOf, problemResponse } from './problem';

const Body = z.strictObject({
  model: z.strictObject({ first: z.strictObject({ rate: z.number().positive('Give a rate above zero.') }) }),
  span: z.array(z.number()).optional(),
  start: z
    .discriminatedUnion('kind', [
      z.strictObject({ kind: z.literal('a'), x: z.number() }),
      z.strictObject({ kind: z.literal('b'), y: z.number() })
    ])
    .optional(),
  either: z.union([z.number(), z.strictObject({ value: z.number().positive() })]).optional()
});

function issuesFor(value: unknown) {
  try {
    parseValue(Body, value);
  } catch (error) {
    if (error instanceof AppError) return error.issues;
    throw error;
  }
  return [];
}

const good = { model: { first: { rate: 1 } } };

describe('what a schema refuses', () => {
  it('is nothing for a good value', () => {
    expect(issuesFor(good)).toEqual([]);
  });

  it.each([
    [{ model: { first: { rate: -1 } } }, 'model.first.rate'],
    [{ model: { first: {} } }, 'model.first.rate'],
    [{ model: { first: { rate: Number.POSITIVE_INFINITY } } }, 'model.first.rate'],
    [{ model: { first: { rate: 1, K: 2 } } }, 'model.first.K'],
    [{ ...good, extra: 1 }, 'extra'],
    [{ ...good, span: [0, 'x'] }, 'span.1'],
    [{ ...good, start: { kind: 'b', y: '1' } }, 'start.y'],
    [{ ...good, start: { kind: 'c' } }, 'start.kind'],
    [{ ...good, either: { value: -1 } }, 'either.value'],
    [null, '']
  ])('is named by its path: %j', (value, path) => {
    expect(issuesFor(value).map((issue) => issue.path)).toContain(path);
  });

  it('lists every field at fault, not the first alone', () => {
    expect(issuesFor({ model: { first: { rate: 0 } }, a: 1, b: 2 })).toHaveLength(3);
  });
});

describe('a problem document', () => {
  it('says what, where and how to ask about it', async () => {
    const error = refusal('input.invalid', { issues: [{ path: 'a', message: 'b' }] });
    const response = problemResponse(problemOf(error, 'request-1'));
    expect(response.headers.get('content-type')).toBe('application/problem+json');
    expect(await response.json()).toMatchObject({
      status: 422,
      code: 'input.invalid',
      requestId: 'request-1',
      errors: [{ pointer: '/a', path: 'a', detail: 'b' }]
    });
  });

  it('tells when to come back, and how to sign in', () => {
    const limited = refusal('rate.limited', { retryAfterSeconds: 7 });
    expect(problemResponse(problemOf(limited, ''), limited.retryAfterSeconds).headers.get('retry-after')).toBe('7');
    expect(problemResponse(problemOf(refusal('database.unavailable'), '')).headers.has('retry-after')).toBe(true);
    expect(problemResponse(problemOf(refusal('auth.required'), '')).headers.get('www-authenticate')).toMatch(/^Bearer/);
  });
});
