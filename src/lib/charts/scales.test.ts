import { describe, expect, it } from 'vitest';
import {
  decimalFill,
  decimalsOf,
  formatValue,
  groupDigits,
  linearScale,
  logScale,
  logTickFormat,
  logTicks,
  niceCeiling,
  niceTicks,
  tickFormat,
  withUnit
} from './scales';

describe('ticks', () => {
  it('are round, inside the interval and evenly spaced', () => {
    expect(niceTicks(0, 215, 5)).toEqual([0, 50, 100, 150, 200]);
    expect(niceTicks(0, 262, 5)).toEqual([0, 50, 100, 150, 200, 250]);
    expect(niceTicks(-3, 3, 6)).toEqual([-3, -2, -1, 0, 1, 2, 3]);
    expect(niceTicks(2025, 2065, 8)).toEqual([2025, 2030, 2035, 2040, 2045, 2050, 2055, 2060, 2065]);
  });
  it('carry no binary dust', () => {
    expect(niceTicks(0, 1, 10)).toEqual([0, 0.1, 0.2, 0.3, 0.4, 0.5, 0.6, 0.7, 0.8, 0.9, 1]);
    expect(niceTicks(0, 3e-7, 3)).toEqual([0, 1e-7, 2e-7, 3e-7]);
  });
  it('are none on an interval without width or end', () => {
    expect(niceTicks(1, 1)).toEqual([]);
    expect(niceTicks(0, Infinity)).toEqual([]);
    expect(niceTicks(NaN, 1)).toEqual([]);
  });
  it('on a log axis are decades, or 1, 2 and 5 where decades are few', () => {
    expect(logTicks(0.1, 1000)).toEqual([0.1, 1, 10, 100, 1000]);
    expect(logTicks(10, 200)).toEqual([10, 20, 50, 100, 200]);
    expect(logTicks(1e-12, 1e3).length).toBeLessThanOrEqual(6);
    expect(logTicks(0, 10)).toEqual([]);
  });
  it('leave an axis that ends on or just above the largest value', () => {
    expect(niceCeiling(224)).toBe(225);
    expect(niceCeiling(100)).toBe(100);
    expect(niceCeiling(0)).toBe(1);
    for (const max of [0.003, 1, 7.7, 19, 88, 1234, 5e6]) {
      expect(niceCeiling(max)).toBeGreaterThanOrEqual(max);
      expect(niceCeiling(max)).toBeLessThanOrEqual(max * 1.25);
    }
  });
});

describe('scales', () => {
  it('map the ends to the ends and back', () => {
    const Y = linearScale(0, 250, 400, 20);
    expect([Y(0), Y(250), Y(125)]).toEqual([400, 20, 210]);
    expect(Y.invert(Y(73))).toBeCloseTo(73, 10);
    const L = logScale(1, 1000, 0, 300);
    expect(L(10)).toBeCloseTo(100, 10);
    expect(L.invert(200)).toBeCloseTo(100, 8);
    expect(L(0)).toBe(0);
  });
  it('keep still on a domain without width', () => {
    expect(linearScale(5, 5, 10, 90)(7)).toBe(10);
  });
});

describe('numbers', () => {
  it('have a true minus and thin spaces from five digits on', () => {
    expect(groupDigits('-1234.5')).toBe('−1234.5');
    expect(groupDigits('12400')).toBe('12\u2009400');
    expect(groupDigits('1234567.125')).toBe('1\u2009234\u2009567.125');
  });
  it('share their decimals along an axis', () => {
    expect([0, 0.5, 1].map(tickFormat([0, 0.5, 1]))).toEqual(['0.0', '0.5', '1.0']);
    expect([0, 25, 50].map(tickFormat([0, 25, 50]))).toEqual(['0', '25', '50']);
    expect(tickFormat([0, 2e9])(2e9)).toBe('2\u2009×\u200910⁹');
  });
  it('keep the significant figures asked for', () => {
    expect(formatValue(0.0042)).toBe('0.00420');
    expect(formatValue(144.27, 4)).toBe('144.3');
    expect(formatValue(178)).toBe('178');
    expect(formatValue(-0.56, 2)).toBe('−0.56');
    expect(formatValue(1.2345e-9)).toBe('1.23\u2009×\u200910⁻⁹');
    expect(formatValue(Infinity)).toBe('no limit');
  });
  it('on a log axis take the decimals they need', () => {
    expect([0.01, 0.1, 1, 1000].map(logTickFormat)).toEqual(['0.01', '0.1', '1', '1000']);
  });
  it('line up on the decimal point', () => {
    const texts = ['178', '0.5', '1.25'];
    const decimals = decimalsOf(texts);
    expect(texts.map((t) => t + decimalFill(t, decimals))).toEqual(['178.00', '0.50', '1.25']);
  });
  it('are followed by a unit that reads on, or one set off', () => {
    expect(withUnit('Noble crayfish', 'per 100 m')).toBe('Noble crayfish per 100 m');
    expect(withUnit('Goats', 'head')).toBe('Goats, head');
    expect(withUnit('Goats', '')).toBe('Goats');
  });
});
