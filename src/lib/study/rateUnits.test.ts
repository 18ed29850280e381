import { describe, expect, it } from 'vitest';
import { ratePaths, type RatePath } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import {
  areaInHectares,
  fromStudyUnit,
  onTheArea,
  studyUnit,
  toStudyUnit,
  unitsFor,
  type UnitContext
} from './rateUnits';
import { crayfish, fern, goats } from './testStudies';

function convert(value: number, code: string, path: RatePath, question: StudyQuestion, context?: UnitContext): number {
  const converted = toStudyUnit(value, code, path, question, context);
  if (!converted.ok) throw new Error(converted.message);
  return converted.value;
}
function refusal(value: number, code: string, path: RatePath, question: StudyQuestion): string {
  const converted = toStudyUnit(value, code, path, question);
  if (converted.ok) throw new Error(`${code} was accepted as ${converted.value}`);
  return converted.message;
}

describe('study units', () => {
  it('derives every unit from the two species and the time', () => {
    expect(studyUnit('feeding.a', goats)).toBe('har/{ind}/a');
    expect(studyUnit('feeding.h', goats)).toBe('a.{ind}/kg');
    expect(studyUnit('feeding.e', goats)).toBe('{ind}/kg');
    expect(studyUnit('feeding.a', fern)).toBe('m2/{ind}/d');
    expect(studyUnit('competition.alpha12', crayfish)).toBe('1');
    expect(studyUnit('competition.b12', crayfish)).toBe('har/{ind}/a');
    expect(studyUnit('second.removal.quota', goats)).toBe('{ind}/har/a');
    expect(studyUnit('first.growth.r', crayfish, { form: 'crowding' })).toBe('har/{ind}/a');
    expect(studyUnit('feeding.a', goats, { response: 'holling-3' })).toBe('har.har/kg/{ind}/a');
  });

  it('offers the study unit first and accepts every unit that it offers', () => {
    for (const question of [crayfish, fern, goats]) {
      for (const path of ratePaths) {
        const options = unitsFor(path, question);
        expect(options[0]?.code, path).toBe(studyUnit(path, question));
        expect(new Set(options.map((option) => option.code)).size).toBe(options.length);
        for (const { code } of options) {
          const value = convert(0.4, code, path, question);
          expect(fromStudyUnit(value, code, path, question), `${path} in ${code}`).toBeCloseTo(0.4, 10);
        }
      }
    }
  });
});

describe('conversion', () => {
  it('changes time units by a year of 365.25 days', () => {
    expect(convert(0.0012, '/d', 'first.growth.r', crayfish)).toBeCloseTo(0.4383, 12);
    expect(convert(1, '/wk', 'first.growth.r', crayfish)).toBeCloseTo(365.25 / 7, 10);
    expect(convert(1, '/mo', 'first.growth.r', crayfish)).toBeCloseTo(12, 12);
  });

  it('turns a yearly share into a rate', () => {
    expect(convert(31.2, '%/a', 'second.removal.effort', crayfish)).toBeCloseTo(0.37397, 5);
    expect(convert(38.3, '%/a', 'second.removal.effort', crayfish)).toBeCloseTo(0.4829, 4);
    expect(convert(10.07, '%/a', 'second.removal.effort', goats)).toBeCloseTo(0.10614, 5);
    expect(convert(73, '%{kept}/a', 'second.mortality', goats)).toBeCloseTo(0.31471, 5);
  });

  it('turns multipliers, growth and doubling times into r', () => {
    expect(convert(Math.exp(0.95), '{lambda}/a', 'second.growth.r', crayfish)).toBeCloseTo(0.95, 12);
    expect(convert(158.571, '%+/a', 'second.growth.r', crayfish)).toBeCloseTo(0.95, 5);
    expect(convert((12 * Math.LN2) / 0.95, '{doubling}.mo', 'second.growth.r', crayfish)).toBeCloseTo(0.95, 12);
  });

  it('counts whole-area numbers by the area of the study', () => {
    expect(areaInHectares({ ...goats, area: { value: 6.4, unit: 'km2' } })).toBeCloseTo(640, 9);
    expect(convert(949.3, '{ind}', 'second.growth.K', goats)).toBeCloseTo(1.48328, 5);
    expect(convert(60.19, '{ind}/a', 'second.removal.quota', goats)).toBeCloseTo(0.094047, 6);
    expect(convert(148.3, '{ind}/km2', 'second.growth.K', goats)).toBeCloseTo(1.483, 12);
    expect(onTheArea(1.483328, 'second', goats)).toEqual({ amount: expect.closeTo(949.33, 2), thing: 'individuals' });
    expect(onTheArea(2, 'first', fern)).toEqual({ amount: expect.closeTo(18000, 6), thing: 'mass' });
  });

  it('takes a ration for a handling time', () => {
    expect(convert(500, 'kg/{ind}/a', 'feeding.h', goats)).toBeCloseTo(0.002, 12);
    expect(convert(500 / 365.25, 'kg/{ind}/d', 'feeding.h', goats)).toBeCloseTo(0.002, 12);
  });

  it('weighs animals one for one even where the two species are counted on different areas', () => {
    const mixed: StudyQuestion = { ...crayfish, second: { ...crayfish.second, unit: '{ind}/km2' } };
    // 1.35 for one means that 100 per km², one a hectare, weigh as 1.35 a hectare.
    const alpha = convert(1.35, '1', 'competition.alpha12', mixed);
    expect(alpha * 100).toBeCloseTo(1.35, 12);
  });

  it('gives the slope that carries a standard error', () => {
    for (const [value, code, path] of [
      [31, '%/mo', 'second.removal.effort'],
      [73, '%{kept}/a', 'second.mortality'],
      [2.6, '{lambda}/wk', 'first.growth.r'],
      [60, '%+/a', 'first.growth.r'],
      [8.8, '{doubling}.mo', 'first.growth.r'],
      [1.9, '{halving}.a', 'second.mortality'],
      [1.4, 'kg/{ind}/d', 'feeding.h'],
      [3, '{ind}/km2', 'second.growth.K']
    ] as const) {
      const at = (v: number) => convert(v, code, path, goats);
      const step = 1e-5 * value;
      const converted = toStudyUnit(value, code, path, goats);
      const slope = (at(value + step) - at(value - step)) / (2 * step);
      expect(converted.ok && converted.derivative / slope, code).toBeCloseTo(1, 7);
    }
  });
});

describe('refusals', () => {
  it('will not mix kilograms and individuals', () => {
    expect(refusal(4200, '{ind}/har', 'first.growth.K', goats)).toMatch(/individuals.*mass.*cannot be mixed.*kg\/ha/);
    expect(refusal(2, 'kg/har', 'second.growth.K', goats)).toMatch(/mass.*individuals.*cannot be mixed.*ind\/ha/);
    expect(refusal(2, '{pair}/har', 'second.growth.K', goats)).toContain('a pair is not an individual');
  });
  it('says what would do', () => {
    expect(refusal(0.3, '{ind}/har', 'first.growth.r', goats)).toContain('yr⁻¹');
    expect(refusal(0.3, '/yr', 'first.growth.r', goats)).toContain('not a unit Sedgeline knows');
    expect(refusal(1, '{ind}/har', 'second.removal.quota', goats)).toContain('has no time in it');
  });
  it('knows where shares and multipliers end', () => {
    expect(refusal(100, '%/a', 'second.mortality', goats)).toContain('leaves nothing');
    expect(refusal(-4, '%/a', 'second.mortality', goats)).toContain('0 % or more');
    expect(refusal(0, '{lambda}/a', 'first.growth.r', goats)).toContain('above 0');
    expect(refusal(-100, '%+/a', 'first.growth.r', goats)).toContain('100 %');
    expect(refusal(30, '%/a', 'first.growth.r', goats)).toContain('Give it in');
  });
  it('answers what is not finite in words', () => {
    for (const value of [Number.NaN, Infinity])
      expect(refusal(value, '/a', 'first.growth.r', goats)).toContain('finite');
    expect(refusal(1e308, '/d', 'first.growth.r', goats)).toContain('too large or too small');
  });
});
