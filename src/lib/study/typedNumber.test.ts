import { describe, expect, it } from 'vitest';
import { typedNumber } from './typedNumber';

const value = (text: string) => {
  const r = typedNumber(text);
  return r.ok ? r.value : r.message;
};

describe('typedNumber', () => {
  it.each([
    ['12', 12],
    [' 0.35 ', 0.35],
    ['0,35', 0.35],
    ['1 234', 1234],
    ['12 345,6', 12345.6],
    ['−2.5', -2.5],
    ['1.3e-3', 0.0013],
    ['.5', 0.5]
  ])('reads %j', (text, expected) => expect(value(text)).toBe(expected));

  it.each([
    ['', 'Give a number.'],
    ['1,234', 'Write 1234 or 1.234: the comma could mean either.'],
    ['1,234,567', 'Write 1234567.'],
    ['NaN', '“NaN” is not a number.'],
    ['12 apples', '“12 apples” is not a number.'],
    ['1e400', '1e400 is too large to compute with.'],
    ['Infinity', '“Infinity” is not a number.'],
    ['1.2.3', '“1.2.3” is not a number.']
  ])('refuses %j in words', (text, message) => expect(value(text)).toBe(message));
});
