import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import './plainWords';

const said = (schema: z.ZodType, value: unknown) => schema.safeParse(value).error?.issues.map((i) => i.message);

describe('values that a contract has no words for', () => {
  it('are refused with what to give instead', () => {
    expect(said(z.number().max(7), 8)).toEqual(['Must be 7 or less.']);
    expect(said(z.number().lt(7), 7)).toEqual(['Must be below 7.']);
    expect(said(z.number().min(2), 1)).toEqual(['Must be 2 or more.']);
    expect(said(z.number().positive(), 0)).toEqual(['Must be above 0.']);
    expect(said(z.number().int(), 2.5)).toEqual(['Give a whole number.']);
    expect(said(z.number(), '2')).toEqual(['Give a number.']);
    expect(said(z.object({ a: z.number() }), {})).toEqual(['This is missing.']);
    expect(said(z.string().max(3), 'four')).toEqual(['Keep this to 3 characters.']);
    expect(said(z.string().min(1), '')).toEqual(['Fill this in.']);
    expect(said(z.array(z.number()).max(1), [1, 2])).toEqual(['At most 1 of these.']);
    expect(said(z.enum(['a', 'b']), 'c')).toEqual(['Give one of: a, b.']);
  });

  it('keep the words of the field where there are some', () => {
    expect(said(z.number().max(7, { error: 'Seven is enough.' }), 8)).toEqual(['Seven is enough.']);
  });
});
