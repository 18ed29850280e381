import type { RateEntry } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import { emptyContent, partStates, ratesNeeded } from '$lib/study';
import { expect, it } from 'vitest';
import { partFindings } from './partFindings';

const crayfish: StudyQuestion = {
  title: 'Crayfish of North Arm',
  place: 'North Arm',
  area: { value: 12.5, unit: 'har' },
  interaction: 'competition',
  first: { common: 'stream crayfish', scientific: '', counted: 'adults', unit: '{ind}/har' },
  second: { common: 'saddleback crayfish', scientific: '', counted: 'adults', unit: '{ind}/har' },
  protects: 'first',
  timeUnit: 'a',
  horizon: 20,
  objective: 'How hard to trap.',
  acceptableRisk: 10
};
const blank = emptyContent(crayfish);
const content = {
  ...blank,
  rates: ratesNeeded(blank.structure, crayfish).map(({ path }): RateEntry => ({
    path,
    value: 1,
    unit: path.endsWith('.K') ? '{ind}/har' : path.endsWith('.r') ? '/a' : '1',
    form: 'plain',
    uncertainty: { kind: 'cv', percent: 10 },
    source: { kind: 'own survey', text: 'Summer surveys' },
    note: '',
    overrideReason: ''
  }))
};
const finding = (change: Partial<Parameters<typeof partFindings>[0]> = {}) =>
  partFindings({
    question: crayfish,
    content,
    parts: partStates({ question: crayfish, content }),
    verdict: 'exclusion',
    sketch: null,
    run: null,
    spreads: [],
    threads: [],
    ...change
  });

it('names the rates that are still needed', () => {
  const rates = content.rates.filter((rate) => rate.path !== 'first.growth.K');
  const found = finding({ content: { ...content, rates } }).rates;
  expect(found.says).toBe('Five of six rates entered.');
  expect(found.basis).toBe('Still needed: K₁');
});

it('names the weakest rate once all are entered', () => {
  const spreads = [
    { path: 'first.growth.r', cv: 0.1 },
    { path: 'first.growth.K', cv: 0.29 }
  ];
  const found = finding({ spreads }).rates;
  expect(found.says).toMatch(/^All six rates entered; the weakest is ±\s29\sper cent\.$/);
  expect(found.basis).toMatch(/weakest: K₁$/);
});

it('counts the states that hold', () => {
  const at = (holds: boolean) => ({ x: 0.5, y: 0.5, holds });
  const sketch = { first: [], second: [], path: [], cycle: [], points: [at(true), at(true), at(false)] };
  const found = finding({ sketch, verdict: 'depends' }).equilibria;
  expect(found.says).toBe('Two states hold; which one depends on the start.');
  expect(found.basis).toMatch(/^Three points of rest/);
});

it('says how many questions are open', () => {
  expect(finding({ threads: [{ state: 'open' }, { state: 'resolved' }] }).review.says).toBe(
    'One question open, one resolved.'
  );
});
