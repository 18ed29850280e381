import { describe, expect, it } from 'vitest';
import {
  findEquilibria,
  limitCycles,
  type CompetitionModel,
  type ConsumerResourceModel,
  type ModelSpec
} from '$lib/dynamics';
import type { StudyQuestion } from '$lib/contracts/study';
import { assemble } from './assemble';
import { factsFor } from './facts';
import { invasionsOf } from './invasions';
import { pointParagraph } from './pointParagraph';
import { pointsOf, type PointErrors } from './points';
import { crayfish, crayfishContent, fern, fernContent, goatContent, goats } from './testStudies';
import { outcomeOf, verdict, type Outcome } from './verdict';

/** Spaces made plain, so that the sentences can be read here. */
const plain = (text: string) => text.replace(/[\u202f\u00a0]/g, ' ');

function modelOf(...args: Parameters<typeof assemble>): ModelSpec {
  const { model } = assemble(...args);
  if (!model) throw new Error('The test study is not whole.');
  return model;
}
const crayfishModel = modelOf(crayfish, crayfishContent()) as CompetitionModel;
const fernModel = modelOf(fern, fernContent()) as ConsumerResourceModel;

function judge(question: StudyQuestion, model: ModelSpec, outcome: Outcome | null = null) {
  const report = findEquilibria(model);
  const cycles = limitCycles(model, report);
  const found = verdict(question, report, { model, cycles, outcome });
  const reading = { question, model, report, cycles };
  return {
    ...found,
    text: plain(found.plain),
    report,
    points: pointsOf(report),
    paragraphs: pointsOf(report).map((point) => {
      const paragraph = pointParagraph(point, reading);
      return { ...paragraph, text: plain(paragraph.sentences.join(' ')), warned: plain(paragraph.warnings.join(' ')) };
    }),
    invasions: invasionsOf(question, report, model),
    facts: factsFor(question, report, found, { model, cycles })
  };
}

describe('competition', () => {
  it('says who excludes whom', () => {
    const found = judge(crayfish, crayfishModel);
    expect(found).toMatchObject({ kind: 'exclusion', consequence: 'lost' });
    expect(found.text).toBe(
      'At these rates saddleback crayfish will exclude stream crayfish. The resting level of saddleback crayfish is then 1 100 ind/ha (13 750 adults on 12.5 ha).'
    );
    expect(found.parts.slice(0, 5)).toEqual([
      { text: 'At these rates ' },
      { species: 'second', text: 'saddleback crayfish' },
      { text: ' will ' },
      { strong: 'exclude' },
      { text: ' ' }
    ]);
    expect(judge({ ...crayfish, protects: 'second' }, crayfishModel).consequence).toBe('holds');
  });

  it('letters the points and says who invades whom', () => {
    const { points, invasions, facts } = judge(crayfish, crayfishModel);
    expect(points.map(({ letter, who }) => letter + who)).toEqual(['Aneither', 'Bfirst', 'Csecond']);
    expect(invasions.map(({ invader, letter }) => [invader, letter])).toEqual([
      ['second', 'B'],
      ['first', 'C']
    ]);
    // Growth when rare of each species at the other's capacity, worked by hand: r (1 - alpha K/K').
    expect(invasions[0]?.rate).toBeCloseTo(0.95 * (1 - (0.6 * 900) / 1100), 12);
    expect(invasions[1]?.rate).toBeCloseTo(0.55 * (1 - (1.35 * 1100) / 900), 12);
    expect(plain(invasions[0]?.sentence ?? '')).toBe(
      'With stream crayfish at rest at 900 ind/ha, a rare population of saddleback crayfish multiplies by 1.62 a year and doubles in 1.4 years (0.484 yr⁻¹): it can invade.'
    );
    expect(facts.length).toBeLessThanOrEqual(4);
    expect(plain(facts.find((fact) => fact.label.includes('saddleback crayfish when rare'))?.note ?? '')).toContain(
      '38.3 %'
    );
  });

  it('finds both under removal, and says that the return outlasts the horizon', () => {
    const found = judge(crayfish, {
      ...crayfishModel,
      second: { ...crayfishModel.second, removal: { effort: 0.45 } }
    });
    expect(found).toMatchObject({ kind: 'coexistence', consequence: 'holds' });
    expect(found.text).toMatch(
      /^At this removal stream crayfish and saddleback crayfish settle together, at 623 ind\/ha and 205 ind\/ha/
    );
    expect(found.text).toContain('42 years, longer than the horizon of 20 years');
    expect(found.paragraphs[3]?.text).toContain('Every start with both species present ends here.');
  });

  const rivals: CompetitionModel = {
    ...crayfishModel,
    competition: { form: 'coefficients', alpha12: 1.5, alpha21: 1.6 }
  };
  it('says that the start decides, and on which side today stands', () => {
    const found = judge(crayfish, rivals, { ends: 'second' });
    expect(found).toMatchObject({ kind: 'depends', consequence: 'depends' });
    expect(found.text).toMatch(
      /^Which of stream crayfish and saddleback crayfish persists at these rates depends on where you start, and today’s counts start on the losing side: they lead to saddleback crayfish alone\./
    );
    expect(found.paragraphs[3]?.text).toContain('lies on the divide');
    expect(judge(crayfish, rivals).text).not.toContain('today');
  });

  it('calls a line of resting points fragile', () => {
    const found = judge(crayfish, {
      ...crayfishModel,
      second: crayfishModel.first,
      competition: { form: 'coefficients', alpha12: 1, alpha21: 1 }
    });
    expect(found).toMatchObject({ kind: 'undecided', consequence: 'unknown' });
    expect(found.text).toContain('undecided, fragile: a whole line of states');
  });

  const exponential: CompetitionModel = {
    interaction: 'competition',
    first: { growth: { kind: 'exponential', r: 0.5 } },
    second: { growth: { kind: 'exponential', r: 0.4 } },
    competition: { form: 'encounters', b12: 0.01, b21: 0.02 }
  };
  it('has no stable mixture for two that grow exponentially', () => {
    const found = judge(crayfish, exponential);
    expect(found).toMatchObject({ kind: 'unbounded', consequence: 'unknown' });
    expect(found.text).toContain('no stable mixture at all');
  });

  it('lists growth without limit among the ends', () => {
    const found = judge(crayfish, { ...exponential, second: { growth: { kind: 'logistic', r: 0.4, K: 100 } } });
    expect(found.kind).toBe('depends');
    expect(found.text).toContain('or with stream crayfish growing without limit');
  });

  it('says that both are lost where removal outruns both', () => {
    const found = judge(crayfish, {
      ...crayfishModel,
      first: { ...crayfishModel.first, removal: { effort: 0.6 } },
      second: { ...crayfishModel.second, removal: { effort: 1 } }
    });
    expect(found).toMatchObject({ kind: 'crash', consequence: 'lost' });
    expect(found.text).toBe('At this removal stream crayfish and saddleback crayfish are both lost.');
  });
});

describe('consumer and resource', () => {
  it('reports the cycle and not its resting point', () => {
    const found = judge({ ...fern, protects: 'first' }, fernModel);
    expect(found).toMatchObject({ kind: 'cycles', consequence: 'cycles' });
    expect(found.text).toBe(
      'At these rates raft-fern and raft-fern weevil cycle. They swing every 281 days, and the low point leaves 0.222 kg/m² of raft-fern.'
    );
    expect(found.paragraphs[2]?.warned).toBe(
      'This is not the mean of the cycle, which is 3.28 kg/m² and 60.5 ind/m²: report the cycle, not this point.'
    );
    expect(found.facts.map((fact) => plain(fact.value))).toEqual(['281 days', '0.222', '7.58', '3.28']);
  });

  it('says so when the cycle has not been measured', () => {
    const report = findEquilibria(fernModel);
    const found = verdict(fern, report, { model: fernModel });
    expect(found.kind).toBe('cycles');
    expect(found.plain).toContain('does not hold, and paths keep swinging around it');
  });

  it('settles once the ceiling is below 7.2857', () => {
    const found = judge(fern, { ...fernModel, first: { growth: { kind: 'logistic', r: 0.07, K: 7 } } });
    expect(found.kind).toBe('coexistence');
  });

  it('calls closed loops undecided, fragile', () => {
    const found = judge(fern, {
      interaction: 'consumer-resource',
      first: { growth: { kind: 'exponential', r: 0.07 } },
      second: { mortality: 0.025 },
      feeding: { response: 'holling-1', a: 0.001, e: 15 }
    });
    expect(found).toMatchObject({ kind: 'undecided', consequence: 'unknown' });
    expect(found.text).toContain('undecided, fragile: their swings keep the size that the start gave them');
    expect(found.paragraphs[1]?.text).toContain('only the memory of the start');
  });

  it('grows without limit where nothing holds the swings', () => {
    const found = judge(fern, { ...fernModel, first: { growth: { kind: 'exponential', r: 0.07 } } });
    expect(found.kind).toBe('unbounded');
    expect(found.text).toContain('the swings of raft-fern and raft-fern weevil grow without limit');
  });

  it('says where the goats rest and that it is no use for six years', () => {
    const found = judge(goats, modelOf(goats, goatContent()));
    expect(found).toMatchObject({ kind: 'coexistence', consequence: 'holds' });
    expect(found.text).toBe(
      'At these rates ridge broom and ridge goats settle together, at 1 516 kg/ha and 1.48 ind/ha (949 animals on 640 ha). The return takes about 83 years, longer than the horizon of 6 years: look at the path, not the resting point.'
    );
    expect(found.paragraphs[2]?.text).toContain('in swings of 32 years that die away');
  });

  it('clears the goats above 0.17 a year, not below', () => {
    expect(judge(goats, modelOf(goats, goatContent({ effort: 0.169 }))).kind).toBe('coexistence');
    const found = judge(goats, modelOf(goats, goatContent({ effort: 0.171 })));
    expect(found).toMatchObject({ kind: 'exclusion', consequence: 'holds' });
    expect(found.text).toContain('ridge goats cannot persist on ridge broom');
  });

  it('sees the state in which a fixed take has run the goats out', () => {
    const below = judge({ ...goats, protects: 'second' }, modelOf(goats, goatContent({ quota: 65 })), {
      ends: 'first'
    });
    expect(below).toMatchObject({ kind: 'depends', consequence: 'depends' });
    expect(below.text).toMatch(
      /^Whether ridge goats will persist with this take depends on where you start, and today’s/
    );
    expect(below.paragraphs.at(-1)?.text).toContain('Nothing is left of ridge goats');
    const above = judge(goats, modelOf(goats, goatContent({ quota: 74 })));
    expect(above.kind).toBe('exclusion');
    expect(above.text).toContain('ridge goats will run out, and the fixed take keeps it so');
  });

  it('does not read less than one animal as survival', () => {
    const small: StudyQuestion = { ...goats, area: { value: 0.5, unit: 'har' } };
    const found = judge(small, modelOf(goats, goatContent()));
    expect(found.text).toContain('That is fewer than one of ridge goats on 0.5 ha.');
    expect(found.paragraphs[2]?.warned).toContain('do not read it as survival');
  });

  it('marks levels that were never surveyed', () => {
    const model = modelOf(goats, goatContent());
    const report = findEquilibria(model);
    const point = pointsOf(report)[2];
    if (!point) throw new Error('No third point.');
    const errors: Record<string, PointErrors> = { C: { seX: 210, seY: null } };
    const surveyed = { first: { low: 1800, high: 2600 } };
    const paragraph = pointParagraph(point, { question: goats, model, report, surveyed, errors });
    expect(paragraph.warnings).toEqual([
      'The level of ridge broom is below anything ever surveyed: it is extrapolated.'
    ]);
    expect(plain(paragraph.sentences[0] ?? '')).toContain('ridge broom at 1 520 ± 210 kg/ha');
  });
});

describe('outcomeOf', () => {
  const model = modelOf(goats, goatContent({ quota: 65 }));
  const report = findEquilibria(model);
  it('names who is there at the end of a path', () => {
    const stable = report.equilibria.findIndex((point) => point.stability === 'stable');
    const empty = report.absorbing.findIndex((state) => state.stability === 'stable');
    expect(outcomeOf({ kind: 'equilibrium', index: stable }, report, model)).toEqual({ ends: 'both' });
    expect(outcomeOf({ kind: 'absorbing', index: empty }, report, model)).toEqual({ ends: 'first' });
    expect(outcomeOf({ kind: 'cycle', index: 0 }, report, model)).toEqual({ ends: 'cycle' });
  });
  it('says nothing where the path decides nothing', () => {
    expect(outcomeOf({ kind: 'undecided' }, report, model)).toBeNull();
    expect(outcomeOf({ kind: 'unbounded' }, report, model)).toBeNull();
  });
});
