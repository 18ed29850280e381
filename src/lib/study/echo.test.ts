import { describe, expect, it } from 'vitest';
import type { RateEntry } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import type { StudyContent } from '$lib/contracts/content';
import { assumptionsOf } from './assumptions';
import { defaultStructure } from './assemble';
import { cautionsOf } from './cautions';
import { echoOf } from './echo';
import { warningsOf, type WarningKey } from './plausibility';
import { crayfish, crayfishContent, fern, fernContent, goatContent, goats, rate } from './testStudies';

/** Spaces made plain, so that the sentences can be read here. */
const plain = (sentences: string[]) => sentences.join(' ').replace(/[\u202f\u00a0]/g, ' ');

function replace(content: StudyContent, entry: RateEntry): StudyContent {
  return { ...content, rates: [...content.rates.filter((other) => other.path !== entry.path), entry] };
}
function echo(entry: RateEntry, question: StudyQuestion, content: StudyContent): string {
  return plain(echoOf(entry.path, question, replace(content, entry)));
}

describe('echoOf', () => {
  it('says what growth means', () => {
    expect(plain(echoOf('second.growth.r', crayfish, crayfishContent()))).toBe(
      'Multiplies by 2.59 a year and doubles in 8.8 months.'
    );
    expect(plain(echoOf('first.growth.r', fern, fernContent()))).toBe('Grows by 7.25 % a day and doubles in 9.9 days.');
  });

  it('says what a share is as a rate', () => {
    const content = goatContent({ effort: 0.1 });
    expect(echo(rate('second.removal.effort', 31.2, '%/a'), goats, content)).toContain(
      '31.2 % lost a year is a rate of 0.374 yr⁻¹.'
    );
    expect(echo(rate('first.growth.r', 0.0012, '/d'), goats, content)).toContain('0.0012 d⁻¹ is 0.438 yr⁻¹.');
    expect(echo(rate('second.mortality', 0.32, '/a'), goats, content)).toBe(
      'Without food 27.4 % a year; half are gone in 2.2 years. A life lasts 3.1 years on average.'
    );
  });

  it('counts abundance on the whole area', () => {
    const content = goatContent({ quota: 60 });
    expect(echo(rate('first.growth.K', 10, 'kg/m2'), fern, fernContent())).toBe('10 kg/m² is 90 t on 9 000 m².');
    const logistic: StudyContent = {
      ...content,
      structure: { ...content.structure, second: { ...content.structure.second, growth: 'logistic' } }
    };
    expect(echo(rate('second.growth.K', 1.483328, '{ind}/har'), goats, logistic)).toBe(
      '1.48 ind/ha is 949 animals on 640 ha (148 per km²).'
    );
    expect(echo(rate('second.removal.quota', 60, '{ind}/a'), goats, content)).toContain(
      'Takes 60 animals a year on 640 ha.'
    );
  });

  it('says what feeding allows', () => {
    const content = goatContent();
    expect(plain(echoOf('feeding.h', goats, content))).toBe(
      'Each individual eats at most 500 kg a year (1.37 kg a day). Feeding is at half its most at 1 800 kg/ha. With all it can eat, e/h − m = 0.38 yr⁻¹: it multiplies by 1.46 a year and doubles in 1.8 years.'
    );
    expect(plain(echoOf('feeding.a', goats, content))).toContain(
      'Each individual clears 0.278 ha a year of ridge broom'
    );
    expect(plain(echoOf('feeding.e', goats, content))).toContain('714 kg of ridge broom make one new individual.');
  });

  it('weighs the harm of a competitor against the room there is', () => {
    expect(plain(echoOf('competition.alpha12', crayfish, crayfishContent()))).toBe(
      'At its own capacity, saddleback crayfish would take up 165 % of the room of stream crayfish: more than there is.'
    );
  });

  it('is silent about what cannot be read', () => {
    expect(echoOf('first.growth.K', crayfish, replace(crayfishContent(), rate('first.growth.K', 5, 'kg/har')))).toEqual(
      []
    );
  });
});

describe('warningsOf', () => {
  const keys = (question: StudyQuestion, content: StudyContent): WarningKey[] =>
    warningsOf(question, content).map((warning) => warning.key);

  it('has nothing to say about the crayfish and the goats', () => {
    expect(keys(crayfish, crayfishContent())).toEqual([]);
    expect(keys(goats, goatContent({ effort: 0.106 }))).toEqual([]);
  });

  it.each<[WarningKey, RateEntry]>([
    ['growth-fast', rate('first.growth.r', 6, '/a')],
    ['doubling-under-a-week', rate('first.growth.r', 0.15, '/d')],
    ['rate-or-multiplier', rate('first.growth.r', 1.4, '/a')],
    ['capacity-below-counts', rate('first.growth.K', 700, '{ind}/har')],
    ['capacity-below-one-animal', rate('second.growth.K', 0.05, '{ind}/har')],
    ['harm-over-ten', rate('competition.alpha12', 12, '1')],
    ['spread-over-100-per-cent', rate('first.growth.r', 0.5, '/a', { kind: 'cv', percent: 120 })],
    ['measured-without-error', rate('first.growth.r', 0.5, '/a', { kind: 'exact' })]
  ])('warns of %s among competitors', (key, entry) => {
    const found = warningsOf(crayfish, replace(crayfishContent(), entry)).filter((warning) => warning.key === key);
    expect(found).toHaveLength(1);
    expect(found[0]).toMatchObject({ path: entry.path, reason: '' });
    expect(found[0]?.sentence).toMatch(/^\S.*[.]$/);
  });

  it.each<[WarningKey, RateEntry]>([
    ['consumer-cannot-persist', rate('feeding.e', 0.0006, '{ind}/kg')],
    ['consumer-starves-at-capacity', rate('feeding.e', 0.0009, '{ind}/kg')],
    ['ration-very-large', rate('feeding.h', 120, 'kg/{ind}/d')],
    ['share-or-rate', rate('second.removal.effort', 0.3, '/a', { kind: 'exact' })],
    ['loss-very-fast', rate('second.mortality', 8, '/a')]
  ])('warns of %s among consumers', (key, entry) => {
    const content = goatContent({ effort: 0.1 });
    const found = warningsOf(goats, replace(content, entry)).filter((warning) => warning.key === key);
    expect(found.length).toBeGreaterThan(0);
  });

  it('warns of removal beyond what growth can replace', () => {
    const content = crayfishContent();
    content.structure.second.effort = true;
    content.structure.first.quota = true;
    content.rates.push(
      rate('second.removal.effort', 0.95, '/a', { kind: 'exact' }),
      rate('first.removal.quota', 124, '{ind}/har/a', { kind: 'exact' })
    );
    expect(keys(crayfish, content)).toEqual(['take-above-growth', 'share-or-rate', 'removal-above-growth']);
  });

  it('carries the reason that settles it', () => {
    const entry = { ...rate('first.growth.r', 6, '/a'), overrideReason: 'Summer annual.' };
    expect(warningsOf(crayfish, replace(crayfishContent(), entry))[0]).toMatchObject({
      key: 'growth-fast',
      needsReason: true,
      reason: 'Summer annual.'
    });
  });
});

describe('assumptions and cautions', () => {
  it('keeps keys unique and stable for every structure', () => {
    for (const interaction of ['competition', 'consumer-resource'] as const) {
      const structure = defaultStructure(interaction);
      for (const key of ['first', 'second'] as const) {
        Object.assign(structure[key], { effort: true, quota: true, stocking: true });
      }
      const list = assumptionsOf(structure, crayfish);
      expect(new Set(list.map((item) => item.key)).size).toBe(list.length);
      expect(list.map((item) => item.key)).toEqual(
        expect.arrayContaining(['well-mixed', 'chance', 'second-fixed-take'])
      );
      expect(list.every((item) => item.key.length <= 60 && item.text.length > 20)).toBe(true);
    }
  });

  it('says both sentences about growth without a ceiling', () => {
    const competitors = defaultStructure('competition');
    competitors.first.growth = 'exponential';
    competitors.second.growth = 'exponential';
    competitors.competition = 'encounters';
    expect(assumptionsOf(competitors, crayfish).map((item) => item.key)).toContain('no-stable-mixture');
    const loops = defaultStructure('consumer-resource');
    loops.first.growth = 'exponential';
    loops.feeding.response = 'holling-1';
    expect(assumptionsOf(loops, goats).find((item) => item.key === 'loops-remember-start')?.text).toContain(
      'undecided, fragile'
    );
  });

  it('defers to law and permits where animals are removed or stocked', () => {
    const structure = defaultStructure('competition');
    expect(cautionsOf(structure, crayfish).map((caution) => caution.key)).not.toContain('removal');
    structure.second.effort = true;
    structure.first.stocking = true;
    const cautions = cautionsOf(structure, crayfish);
    expect(cautions.map((caution) => caution.key)).toEqual([
      'advice-not-permit',
      'removal',
      'stocking',
      'where-not-when',
      'sensitive-places'
    ]);
    expect(cautions[0]?.text).toContain('come first');
  });
});
