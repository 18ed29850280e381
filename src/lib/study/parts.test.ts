import { describe, expect, it } from 'vitest';
import { emptyContent } from './assemble';
import { canonicalJson, changesBetween, changeWords, partInputs, partKeys, partStates, type PartsInput } from './parts';
import { crayfish, crayfishContent, goatContent, goats, rate } from './testStudies';

const rail = (input: PartsInput) => Object.fromEntries(partStates(input).map((part) => [part.key, part]));

describe('partStates', () => {
  it('is empty throughout for a new study', () => {
    const parts = partStates({ question: crayfish, content: emptyContent(crayfish) });
    expect(parts.map((part) => part.key)).toEqual([...partKeys]);
    expect(parts.map((part) => part.state)).toEqual(Array(9).fill('empty'));
    expect(rail({ question: crayfish, content: emptyContent(crayfish) })).toMatchObject({
      rates: { summary: 'None entered yet' },
      equilibria: { summary: 'After Rates' },
      report: { name: 'Report', summary: 'After Review' }
    });
  });

  it('counts what is entered and names the weakest', () => {
    const content = crayfishContent();
    content.rates[5] = rate('competition.alpha21', 0.6, '1', { kind: 'cv', percent: 29 });
    expect(rail({ question: crayfish, content, verdict: 'depends' })).toMatchObject({
      rates: { state: 'ready', summary: 'Six entered, weakest ± 29\u202f%' },
      model: { state: 'ready', summary: 'Competition' },
      equilibria: { state: 'ready', summary: 'Depends on the start' },
      trajectories: { state: 'ready', summary: 'One start, 20 years' }
    });
    content.rates.pop();
    expect(rail({ question: crayfish, content }).rates).toMatchObject({
      state: 'empty',
      summary: 'Five of six entered'
    });
  });

  it('turns a read part stale when a number under it moves, and says which', () => {
    const content = goatContent({ effort: 0.1 });
    const readings = { equilibria: { inputs: partInputs('equilibria', goats, content) } };
    expect(rail({ question: goats, content, readings }).equilibria?.state).toBe('ready');
    const moved = structuredClone(content);
    const effort = moved.rates.find((entry) => entry.path === 'second.removal.effort');
    if (effort) effort.value = 0.2;
    const { equilibria, trajectories } = rail({ question: goats, content: moved, readings });
    expect(equilibria).toMatchObject({ state: 'stale', changed: ['rates.second.removal.effort.value'] });
    expect(trajectories?.state).toBe('empty');
    expect(changeWords('rates.second.removal.effort.value', goats, moved)).toBe(
      'Removal of ridge goats, as a rate (E₂)'
    );
  });

  it('does not mind a note, a source or a name', () => {
    const content = goatContent();
    const readings = { equilibria: { inputs: partInputs('equilibria', goats, content) } };
    const noted = structuredClone(content);
    if (noted.rates[0]) noted.rates[0].note = 'Checked again.';
    const question = { ...goats, title: 'Another title' };
    expect(rail({ question, content: noted, readings }).equilibria?.state).toBe('ready');
  });

  it('shows signatures only on what still holds', () => {
    const content = crayfishContent();
    expect(rail({ question: crayfish, content, signed: ['rates'] }).rates?.state).toBe('signed');
    content.rates.pop();
    expect(rail({ question: crayfish, content, signed: ['rates'] }).rates?.state).toBe('empty');
  });

  it('says what review waits for', () => {
    const content = crayfishContent();
    const review = (comments?: { open: number; total: number }, reviewers = 0) =>
      rail({ question: crayfish, content, comments, reviewers }).review;
    expect(review()).toMatchObject({ state: 'empty', summary: 'Not asked yet' });
    expect(review(undefined, 1)).toMatchObject({ state: 'ready', summary: 'Asked, no comments yet' });
    expect(review({ open: 2, total: 5 })).toMatchObject({ state: 'ready', summary: 'Two comments open' });
  });
});

describe('changesBetween', () => {
  it('finds leaves, additions and removals', () => {
    expect(changesBetween({ a: 1, b: { c: 2, d: [1, 2] } }, { b: { c: 3, d: [1, 4] }, e: 5 })).toEqual([
      'a',
      'b.c',
      'b.d.1',
      'e'
    ]);
    expect(changesBetween({ list: [1] }, { list: [1, 2] })).toEqual(['list']);
    expect(changesBetween({ a: { b: 1 } }, { a: { b: 1 } })).toEqual([]);
  });

  it('does not depend on the order of keys', () => {
    expect(canonicalJson({ b: 1, a: [{ d: 1, c: 2 }] })).toBe('{"a":[{"c":2,"d":1}],"b":1}');
  });
});
