import { describe, expect, it } from 'vitest';
import { ModelDocument } from '$lib/contracts/model';
import { StudyContent, type RateEntry } from '$lib/contracts/content';
import { StudyQuestion } from '$lib/contracts/study';
import { assemble, defaultStructure, emptyContent, structureFromModel } from './assemble';
import { pathsOf, ratesNeeded } from './rates';
import { resolveRate } from './resolve';
import { crayfish, crayfishContent, fern, fernContent, goatContent, goats, rate } from './testStudies';

function resolved(entry: RateEntry, content = crayfishContent(), question = crayfish) {
  const resolution = resolveRate(entry, question, content);
  if (!resolution.ok) throw new Error(resolution.issues.map((issue) => issue.message).join());
  return resolution.rate;
}

describe('resolveRate', () => {
  it('carries a standard error through the unit', () => {
    const found = resolved(rate('second.removal.effort', 31.2, '%/a', { kind: 'se', se: 2 }));
    expect(found.value).toBeCloseTo(0.37397, 5);
    expect(found.se).toBeCloseTo(2 / 68.8, 10);
  });

  it('reads a CV as a share of what was typed, with log-normal limits', () => {
    const found = resolved(rate('first.growth.K', 900, '{ind}/har', { kind: 'cv', percent: 20 }));
    expect(found.se).toBeCloseTo(180, 9);
    expect(found.cv).toBeCloseTo(0.2, 12);
    const s = Math.sqrt(Math.log(1.04));
    expect(found.low).toBeCloseTo((900 / Math.sqrt(1.04)) * Math.exp(-1.644853627 * s), 5);
    expect(found.high).toBeCloseTo((900 / Math.sqrt(1.04)) * Math.exp(1.644853627 * s), 5);
  });

  it('reads a 5–95 % range as log-normal', () => {
    const found = resolved(rate('first.growth.r', 0.5, '/a', { kind: 'range', low: 0.25, high: 1 }));
    const s = Math.log(4) / (2 * 1.6448536269514722);
    expect(found.cv).toBeCloseTo(Math.sqrt(Math.exp(s * s) - 1), 10);
    expect([found.low, found.high]).toEqual([0.25, 1]);
  });

  it('keeps the ends in order where the unit turns them round', () => {
    const entry = rate('second.mortality', 73, '%{kept}/a', { kind: 'range', low: 60, high: 84 });
    const found = resolved(entry, goatContent(), goats);
    expect(found.low).toBeCloseTo(-Math.log(0.84), 10);
    expect(found.high).toBeCloseTo(-Math.log(0.6), 10);
  });

  it('has no error for what is exact', () => {
    const found = resolved(rate('second.removal.effort', 0.22, '/a', { kind: 'exact' }));
    expect(found).toMatchObject({ se: null, cv: null, low: 0.22, high: 0.22 });
  });

  it('turns the crowding form into r = a K with both errors', () => {
    const content = crayfishContent();
    content.rates[1] = rate('first.growth.K', 900, '{ind}/har', { kind: 'cv', percent: 10 });
    const a = 0.55 / 900;
    const found = resolved(rate('first.growth.r', a, 'har/{ind}/a', { kind: 'cv', percent: 20 }, 'crowding'), content);
    expect(found.value).toBeCloseTo(0.55, 12);
    expect(found.cv).toBeCloseTo(Math.hypot(0.1, 0.2), 10);
    expect(found.crowding).toEqual({ value: a, se: expect.closeTo(0.2 * a, 12) });
  });

  it.each<[string, RateEntry, string, RegExp]>([
    ['a capacity of 0', rate('first.growth.K', 0, '{ind}/har'), 'rates.first.growth.K.value', /above 0/],
    ['a negative r', rate('first.growth.r', -0.2, '/a'), 'rates.first.growth.r.value', /above 0/],
    ['a negative alpha', rate('competition.alpha12', -1, '1'), 'rates.competition.alpha12.value', /0 or more/],
    ['a share of 100 %', rate('second.removal.effort', 100, '%/a'), 'rates.second.removal.effort.value', /100 %/],
    ['a wrong unit', rate('first.growth.K', 5, 'kg/har'), 'rates.first.growth.K.unit', /mixed/],
    [
      'a value outside its range',
      rate('first.growth.r', 2, '/a', { kind: 'range', low: 0.2, high: 1 }),
      'rates.first.growth.r.uncertainty.high',
      /outside its own range/
    ],
    [
      'a range that is upside down',
      rate('first.growth.r', 0.5, '/a', { kind: 'range', low: 1, high: 0.2 }),
      'rates.first.growth.r.uncertainty.high',
      /above the lower end/
    ],
    [
      'a range that reaches below 0',
      rate('first.growth.r', 0.5, '/a', { kind: 'range', low: -0.1, high: 1 }),
      'rates.first.growth.r.uncertainty.low',
      /negative/
    ]
  ])('refuses %s', (_, entry, path, message) => {
    const resolution = resolveRate(entry, crayfish, crayfishContent());
    expect(resolution.ok).toBe(false);
    if (resolution.ok) return;
    expect(resolution.issues[0]?.path).toBe(path);
    expect(resolution.issues[0]?.message).toMatch(message);
  });
});

describe('ratesNeeded', () => {
  it('names rates with the species of the study', () => {
    const needs = ratesNeeded(defaultStructure('competition'), crayfish);
    expect(needs.map((need) => need.path)).toEqual([
      'first.growth.r',
      'first.growth.K',
      'second.growth.r',
      'second.growth.K',
      'competition.alpha12',
      'competition.alpha21'
    ]);
    expect(needs[4]).toMatchObject({ name: 'Harm from one saddleback crayfish', group: 'between' });
    expect(needs[0]).toMatchObject({ name: 'Growth when rare', crowdingForm: true, symbol: { plain: 'r₁' } });
  });

  it('covers each structure', () => {
    const structure = defaultStructure('consumer-resource');
    structure.first.growth = 'allee';
    structure.second = { growth: 'leslie', selfLimitation: true, effort: true, quota: true, stocking: true };
    structure.feeding = { response: 'holling-3', interference: true };
    expect(pathsOf(structure)).toEqual([
      'first.growth.r',
      'first.growth.K',
      'first.growth.A',
      'second.growth.r',
      'second.growth.g',
      'second.selfLimitation',
      'feeding.a',
      'feeding.h',
      'feeding.e',
      'feeding.interference',
      'second.removal.effort',
      'second.removal.quota',
      'second.stocking'
    ]);
  });
});

describe('assemble', () => {
  it('makes the documents of the three studies', () => {
    expect(assemble(crayfish, crayfishContent()).model).toEqual({
      interaction: 'competition',
      first: { growth: { kind: 'logistic', r: 0.55, K: 900 } },
      second: { growth: { kind: 'logistic', r: 0.95, K: 1100 } },
      competition: { form: 'coefficients', alpha12: 1.35, alpha21: 0.6 }
    });
    const goatModel = assemble(goats, goatContent({ effort: 0.1, quota: 64 })).model;
    expect(goatModel?.second.removal).toEqual({ effort: 0.1, quota: expect.closeTo(0.1, 12) });
    for (const [question, content] of [
      [crayfish, crayfishContent()],
      [fern, fernContent()],
      [goats, goatContent({ effort: 0.1 })]
    ] as const) {
      expect(StudyQuestion.safeParse(question).success).toBe(true);
      expect(StudyContent.safeParse(content).success).toBe(true);
      const { model, issues, missing } = assemble(question, content);
      expect([issues, missing]).toEqual([[], []]);
      expect(ModelDocument.safeParse(model).success).toBe(true);
      expect(model && structureFromModel(model)).toEqual(content.structure);
    }
  });

  it('lists what is missing, and is quiet about a crowding r that waits for K', () => {
    const content = emptyContent(crayfish);
    content.rates = [rate('first.growth.r', 0.0006, 'har/{ind}/a', { kind: 'exact' }, 'crowding')];
    const { model, missing, issues } = assemble(crayfish, content);
    expect(model).toBeNull();
    expect(issues).toEqual([]);
    expect(missing.map((need) => need.path)).not.toContain('first.growth.r');
    expect(missing).toHaveLength(5);
  });

  it('refuses the coefficient form with exponential growth, by the field', () => {
    const content = crayfishContent();
    content.structure.first.growth = 'exponential';
    const { model, issues } = assemble(crayfish, content);
    expect(model).toBeNull();
    expect(issues).toEqual([{ path: 'structure.first.growth', message: expect.stringContaining('stream crayfish') }]);
  });

  it('passes on what the engine finds, by the field of the form', () => {
    const content = crayfishContent();
    content.structure = {
      ...content.structure,
      first: { ...content.structure.first, growth: 'allee' },
      competition: 'encounters'
    };
    content.rates.push(
      rate('first.growth.A', 1200, '{ind}/har'),
      rate('competition.b12', 1e-4, 'har/{ind}/a'),
      rate('competition.b21', 1e-4, 'har/{ind}/a')
    );
    const { issues } = assemble(crayfish, content);
    expect(issues).toHaveLength(1);
    expect(issues[0]).toMatchObject({ path: 'rates.first.growth.A.value' });
    expect(issues[0]?.message).toMatch(/dwindles \(A₁\) must be smaller/);
  });

  it('names a rate that is entered twice and a question that changed its kind', () => {
    const content = crayfishContent();
    content.rates.push(rate('first.growth.r', 0.5, '/a'));
    const { issues } = assemble({ ...crayfish, interaction: 'consumer-resource' }, content);
    expect(issues.map((issue) => issue.path)).toEqual(['structure.interaction', 'rates.first.growth.r']);
  });
});
