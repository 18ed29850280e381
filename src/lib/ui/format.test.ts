import { describe, expect, it } from 'vitest';
import {
  decimalsFor,
  formatDate,
  formatExact,
  formatNumber,
  formatQuantity,
  formatShare,
  pointPadding,
  unitPieces,
  unitText
} from './format';

describe('formatQuantity', () => {
  it('gives the error two significant figures and the value the same decimals', () => {
    expect(formatQuantity(0.3953, 0.0461)).toEqual({ value: '0.395', se: '0.046', decimals: 3 });
    expect(formatQuantity(177.6, 13.9)).toEqual({ value: '178', se: '14', decimals: 0 });
    expect(formatQuantity(8.23, 0.6)).toEqual({ value: '8.23', se: '0.60', decimals: 2 });
  });
  it('counts significant figures after rounding', () => {
    expect(formatQuantity(1.2345, 0.0996)).toEqual({ value: '1.23', se: '0.10', decimals: 2 });
    expect(decimalsFor(9.96)).toBe(0);
  });
  it('rounds to tens where the error is that large', () => {
    expect(formatQuantity(-12345.6, 143)).toEqual({ value: '−12,350', se: '140', decimals: -1 });
  });
  it('takes a missing, zero or unknown error as exact', () => {
    for (const se of [undefined, null, 0, Number.NaN]) expect(formatQuantity(0.22, se).se).toBeNull();
    expect(formatQuantity(178).value).toBe('178');
    expect(formatQuantity(0.5, null, 3)).toEqual({ value: '0.500', se: null, decimals: 3 });
  });
});

describe('formatNumber', () => {
  it('sets a true minus, but none on a rounded zero', () => {
    expect(formatNumber(-0.05, 2)).toBe('−0.05');
    expect(formatNumber(-0.001, 2)).toBe('0.00');
  });
  it('parts thousands and shows a dash for what is not a number', () => {
    expect(formatNumber(1234567.8, 1)).toBe('1,234,567.8');
    expect(formatNumber(Number.NaN, 2)).toBe('–');
    expect(formatNumber(Number.POSITIVE_INFINITY, 0)).toBe('–');
  });
});

describe('formatExact', () => {
  it('drops trailing zeros and keeps four figures', () => {
    expect(formatExact(0.22)).toBe('0.22');
    expect(formatExact(1 / 3)).toBe('0.3333');
    expect(formatExact(1200)).toBe('1,200');
    expect(formatExact(0)).toBe('0');
  });
  it('sets very small and very large numbers as powers of ten', () => {
    expect(formatExact(3.1e-9)).toBe('3.1 × 10⁻⁹');
    expect(formatExact(-2.5e12)).toBe('−2.5 × 10¹²');
  });
});

describe('pointPadding', () => {
  it('fills a column up to its decimal point', () => {
    expect(pointPadding('178', 3)).toBe('.000');
    expect(pointPadding('1.06', 3)).toBe('0');
    expect(pointPadding('0.557', 3)).toBe('');
  });
});

describe('formatShare', () => {
  it('speaks in natural frequencies', () => {
    expect(formatShare(0.56)).toBe('56 in 100');
    expect(formatShare(0.002)).toBe('under 1 in 100');
    expect(formatShare(0.999)).toBe('over 99 in 100');
    expect(formatShare(1, 800)).toBe('all 800');
    expect(formatShare(0)).toBe('none in 100');
  });
});

describe('units', () => {
  it('raises exponents however they were typed', () => {
    for (const unit of ['yr-1', 'yr^-1', 'yr⁻¹', 'yr−1']) expect(unitText(unit)).toBe('yr⁻¹');
    expect(unitText('individuals/km2')).toBe('individuals/km²');
    expect(unitText('ha-1 d-1')).toBe('ha⁻¹ d⁻¹');
  });
  it('leaves words and counts alone', () => {
    for (const unit of ['per 100 m', 'moor-grass', 'SE', '% more']) expect(unitText(unit)).toBe(unit);
    expect(unitPieces('per 100 m')).toEqual([{ text: 'per 100 m', raised: false }]);
  });
});

it('writes dates in full, the same on every machine', () => {
  expect(formatDate('2026-03-03T23:59:00Z')).toBe('3 March 2026');
});
