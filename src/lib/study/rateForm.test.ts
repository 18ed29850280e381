import { describe, expect, it } from 'vitest';
import { RateForm, rateField, rateToForm, readRate } from './rateForm';

const filled = RateForm.parse({
  path: 'first.growth.r',
  value: '0,56',
  unit: '/a',
  uncertainty: 'cv',
  percent: '12',
  sourceKind: 'own survey',
  sourceText: 'North Arm, 2013 to 2024'
});

describe('readRate', () => {
  it('reads what was typed', () => {
    const read = readRate(filled);
    expect(read.ok && read.entry).toMatchObject({ value: 0.56, uncertainty: { kind: 'cv', percent: 12 } });
  });

  it('asks for value, error and source in one go', () => {
    const read = readRate(RateForm.parse({ path: 'first.growth.r', unit: '/a' }));
    expect(read.ok ? [] : read.errors.map((e) => e.field).sort()).toEqual(['se', 'sourceKind', 'sourceText', 'value']);
  });

  it('names the end of a range that is not a number', () => {
    const read = readRate({ ...filled, uncertainty: 'range', low: '0.2', high: 'NaN' });
    expect(read.ok ? [] : read.errors).toEqual([{ field: 'high', message: '“NaN” is not a number.' }]);
  });

  it('shows a saved rate and reads it back unchanged', () => {
    const read = readRate(filled);
    if (!read.ok) throw new Error('the form is valid');
    const again = readRate(rateToForm(read.entry, 'first.growth.r', '/a', 4));
    expect(again.ok && again.entry).toEqual(read.entry);
  });

  it('finds the field of a path from any door', () => {
    expect(rateField('rate.uncertainty.low', 'first.growth.r')).toBe('low');
    expect(rateField('rates.first.growth.r.value', 'first.growth.r')).toBe('value');
    expect(rateField('rate.source.text', 'first.growth.r')).toBe('sourceText');
  });
});
