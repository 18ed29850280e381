import { describe, expect, it } from 'vitest';
import { QuestionForm, questionField, questionToForm, readQuestion } from './questionForm';

const filled = QuestionForm.parse({
  title: 'Voles on the dyke',
  place: 'Long Dyke',
  areaValue: '12,5',
  interaction: 'competition',
  firstCommon: 'marsh vole',
  firstCounted: 'adults',
  secondCommon: 'field vole',
  secondCounted: 'adults',
  horizon: '10',
  objective: 'Keep the marsh vole for ten years.',
  acceptableRisk: '5'
});

describe('readQuestion', () => {
  it('reads a filled form, decimal comma and all', () => {
    const read = readQuestion(filled);
    expect(read.ok && read.question.area).toEqual({ value: 12.5, unit: 'har' });
  });

  it('names every field that is missing, in one go', () => {
    const read = readQuestion(QuestionForm.parse({}));
    expect(read.ok).toBe(false);
    const fields = read.ok ? [] : read.errors.map((e) => e.field);
    expect(fields).toEqual(
      expect.arrayContaining([
        'title',
        'place',
        'areaValue',
        'interaction',
        'firstCommon',
        'secondCommon',
        'horizon',
        'objective'
      ])
    );
  });

  it('says what is wrong with a number in words', () => {
    const read = readQuestion({ ...filled, areaValue: '1,250', acceptableRisk: '130' });
    const of = (field: string) => (read.ok ? '' : read.errors.find((e) => e.field === field)?.message);
    expect(of('areaValue')).toBe('Write 1250 or 1.250: the comma could mean either.');
    expect(of('acceptableRisk')).toBe('Between 0 and 100 %.');
  });

  it('shows a saved question and reads it back unchanged', () => {
    const read = readQuestion(filled);
    if (!read.ok) throw new Error('the form is valid');
    const again = readQuestion(questionToForm(read.question, 3));
    expect(again.ok && again.question).toEqual(read.question);
  });

  it('finds the field of a nested path', () => {
    expect(questionField('question.first.common')).toBe('firstCommon');
    expect(questionField('area.value')).toBe('areaValue');
    expect(questionField('nowhere')).toBeNull();
  });
});
