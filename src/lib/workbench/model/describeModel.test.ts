import { expect, it } from 'vitest';
import { defaultStructure } from '$lib/study';
import { describeModel } from './describeModel';

const words = (structure: Parameters<typeof describeModel>[0]) =>
  describeModel(structure)
    .map((p) => ('text' in p ? p.text : 'strong' in p ? p.strong : p.species === 'first' ? 'vole' : 'mink'))
    .join('');

it('says how two competitors meet', () => {
  expect(words(defaultStructure('competition'))).toBe('The vole and the mink compete; each grows towards a ceiling.');
});

it('says who eats whom and what is taken', () => {
  const structure = defaultStructure('consumer-resource');
  structure.feeding.response = 'holling-2';
  structure.second.quota = true;
  structure.first.stocking = true;
  expect(words(structure)).toBe(
    'The mink eats the vole up to a ration; the first grows towards a ceiling, the second lives on it alone. ' +
      'Management: stocking on the vole, and a quota on the mink.'
  );
});
