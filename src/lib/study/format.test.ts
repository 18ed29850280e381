import { describe, expect, it } from 'vitest';
import {
  formatDate,
  formatDuration,
  formatFixed,
  formatNumber,
  formatWithSE,
  inHundred,
  listWords,
  MINUS,
  NARROW,
  plusMinus,
  raised
} from './format';

describe('numbers', () => {
  it.each<[number, string]>([
    [0, '0'],
    [-0, '0'],
    [0.374162, '0.374'],
    [0.3, '0.3'],
    [2.5857, '2.59'],
    [949.33, '949'],
    [999.7, `1${NARROW}000`],
    [1515.668, `1${NARROW}516`],
    [13750, `13${NARROW}750`],
    [-3078.947, `${MINUS}3${NARROW}079`],
    [0.0012, '0.0012'],
    [0.00001234, '1.23\u00a0×\u00a010⁻⁵'],
    [Infinity, 'without limit']
  ])('writes %d as %s', (value, text) => {
    expect(formatNumber(value)).toBe(text);
  });

  it('never shows a minus before a rounded zero', () => {
    expect(formatFixed(-0.0004, 2)).toBe('0.00');
  });

  it.each<[number, number | null, string, string | null]>([
    [1.0603, 0.1612, '1.06', '0.16'],
    [0.55712, 0.06049, '0.557', '0.060'],
    [178.3, 13.62, '178', '14'],
    [1515.668, 134.2, `1${NARROW}520`, '130'],
    [8.21, 0.9951, '8.2', '1.0'],
    [1515.668, null, `1${NARROW}516`, null]
  ])('rounds %d ± %s to two figures of the error', (value, se, shownValue, shownSE) => {
    const shown = formatWithSE(value, se);
    expect([shown.value, shown.se]).toEqual([shownValue, shownSE]);
  });

  it('sets ± between spaces that do not break', () => {
    expect(plusMinus(1.0603, 0.1612)).toBe('1.06\u00a0±\u00a00.16');
  });

  it('speaks of shares in natural frequencies', () => {
    expect([0.56, 0.001, 0.999, 0, 1].map(inHundred)).toEqual([
      '56 in 100',
      'fewer than 1 in 100',
      'more than 99 in 100',
      '0 in 100',
      '100 in 100'
    ]);
  });

  it('raises exponents', () => {
    expect(raised(-12)).toBe('⁻¹²');
  });
});

describe('spans and dates', () => {
  it.each([
    [Math.LN2 / 0.95, 'a', '8.8 months'],
    [83.176, 'a', '83 years'],
    [280.7507, 'd', '281 days'],
    [Math.LN2 / 0.32, 'a', '2.2 years'],
    [Math.LN2 / 0.07, 'd', '9.9 days'],
    [2000, 'd', '5.5 years'],
    [1, 'a', '1 year'],
    [0.5, 'd', '12 hours'],
    [0.003, 'a', '1.1 days']
  ] as const)('writes %d %s as %s', (value, unit, text) => {
    expect(formatDuration(value, unit)).toBe(text);
  });

  it('writes dates in words and never shifts a plain day', () => {
    expect(formatDate('2026-03-03')).toBe('3 March 2026');
    expect(formatDate(new Date(Date.UTC(2026, 11, 31, 23, 59)))).toBe('31 December 2026');
    expect(formatDate('soon')).toBe('soon');
  });

  it('joins words', () => {
    expect(listWords(['a', 'b', 'c'])).toBe('a, b and c');
  });
});
