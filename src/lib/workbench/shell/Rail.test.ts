import { render } from 'svelte/server';
import { expect, it } from 'vitest';
import { studyParts, type ShellPart } from './parts';
import Rail from './Rail.svelte';

const states = ['signed', 'signed', 'signed', 'ready', 'ready', 'ready', 'stale', 'stale', 'empty'] as const;
const parts: ShellPart[] = studyParts.map((part, i) => ({
  ...part,
  href: `/studies/1/${part.key}`,
  state: states[i]!,
  summary: `About ${part.key}`
}));
const study = {
  title: 'Crayfish in the ponds',
  place: 'Compartment 4',
  species: [{ common: 'Noble crayfish', scientific: 'Astacus astacus' }, { common: 'Signal crayfish' }] as const
};
const { body } = render(Rail, { props: { study, parts, current: 'rates' } });
const text = body.replace(/<!--.*?-->/gs, '').replace(/<[^>]+>/g, '');

it('says the state of every part in words', () => {
  for (const said of ['Surveys, signed off', 'Equilibria, ready', 'Risk, stale', 'Report, empty'])
    expect(text).toContain(said);
});

it('marks the part one is in, once', () => {
  expect(body.match(/aria-current="page"/g)).toHaveLength(1);
  expect(body).toMatch(/href="\/studies\/1\/rates"[^>]*aria-current="page"/);
});

it('lets a segment take the state of the part it leads to', () => {
  const segments = [...body.matchAll(/seg seg-(\w+)/g)].map(([, state]) => state);
  const expected = states.flatMap((state, i) => [...(i > 0 ? [state] : []), ...(i < 8 ? [states[i + 1]] : [])]);
  expect(segments).toEqual(expected);
});

it('shows the key of both species', () => {
  expect(text).toContain('Astacus astacus');
  expect(text).toContain('Signal crayfish');
});
