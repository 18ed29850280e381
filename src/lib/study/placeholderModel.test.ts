import { expect, it } from 'vitest';
import { checkModel } from '$lib/dynamics';
import { defaultStructure, structureFromModel } from './assemble';
import { placeholderModel } from './placeholderModel';

it('gives every structure a model that the engine accepts and that has the same structure', () => {
  for (const interaction of ['competition', 'consumer-resource'] as const) {
    const seconds =
      interaction === 'competition' ? (['logistic'] as const) : (['mortality', 'logistic', 'leslie'] as const);
    for (const second of seconds)
      for (const response of ['holling-1', 'holling-2', 'holling-3'] as const)
        for (const on of [false, true]) {
          const structure = defaultStructure(interaction);
          structure.second = { ...structure.second, growth: second, effort: on, quota: on, stocking: on };
          structure.first = { ...structure.first, effort: !on, quota: on };
          if (interaction === 'consumer-resource') {
            structure.feeding = { response, interference: on && response !== 'holling-1' };
            structure.second.selfLimitation = on;
          }
          const model = placeholderModel(structure);
          expect(checkModel(model), JSON.stringify(structure)).toEqual([]);
          expect(structureFromModel(model)).toEqual(structure);
        }
  }
});
