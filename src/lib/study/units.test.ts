import { describe, expect, it } from 'vitest';
import { composeCode, displayUnit, parseUnit } from './units';

describe('unit codes', () => {
  it('reads products and quotients of known atoms', () => {
    expect(parseUnit('{ind}/har')).toMatchObject({ factor: 1, dimensions: { individuals: 1, area: -1 } });
    expect(parseUnit('g/m2')?.factor).toBeCloseTo(10, 12);
    expect(parseUnit('t/km2')?.factor).toBeCloseTo(10, 12);
    expect(parseUnit('a.{ind}/kg')).toMatchObject({ dimensions: { time: 1, individuals: 1, mass: -1 } });
    expect(parseUnit('/d')?.factor).toBeCloseTo(365.25, 10);
  });

  it('knows nothing outside its table', () => {
    for (const code of ['ha', '/yr', 'kg//a', '{trap-night}', '.a', '', 'constructor', 'kg/', 'kg har']) {
      expect(parseUnit(code), code).toBeNull();
    }
  });

  it('leaves out what cancels when units are multiplied', () => {
    expect(
      composeCode([
        ['a', 1],
        ['{ind}/har', 1],
        ['kg/har', -1]
      ])
    ).toBe('a.{ind}/kg');
    expect(
      composeCode([
        ['{ind}/har', 1],
        ['{ind}/har', -1]
      ])
    ).toBe('1');
  });

  it.each([
    ['/a', 'yr⁻¹'],
    ['/d', 'd⁻¹'],
    ['{ind}/har', 'ind/ha'],
    ['{ind}/m2', 'ind/m²'],
    ['har/{ind}/a', 'ha ind⁻¹ yr⁻¹'],
    ['{ind}/har/a', 'ind ha⁻¹ yr⁻¹'],
    ['m2/{ind}/d', 'm² ind⁻¹ d⁻¹'],
    ['kg/m2', 'kg/m²'],
    ['a.{ind}/kg', 'yr ind kg⁻¹'],
    ['%/a', '% lost a year'],
    ['{lambda}/a', 'times a year'],
    ['{doubling}.mo', 'months to double'],
    ['1', ''],
    ['%', '%']
  ])('shows %s as %s', (code, text) => {
    expect(displayUnit(code).text).toBe(text);
  });

  it('gives raised pieces apart', () => {
    expect(displayUnit('/a').parts).toEqual([{ text: 'yr' }, { text: '−1', raised: true }]);
    expect(displayUnit('{ind}/m2').parts).toEqual([{ text: 'ind/m' }, { text: '2', raised: true }]);
  });
});
