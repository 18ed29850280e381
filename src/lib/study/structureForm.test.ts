import { describe, expect, it } from 'vitest';
import { ModelStructure } from '$lib/contracts/content';
import { StructureForm, readStructure, structureToForm } from './structureForm';

describe('the structure form', () => {
  it('reads back what it shows', () => {
    const structure = ModelStructure.parse(
      readStructure(
        StructureForm.parse({
          interaction: 'consumer-resource',
          firstGrowth: 'logistic',
          secondGrowth: 'mortality',
          secondSelfLimitation: 'on',
          secondQuota: 'on',
          response: 'holling-2',
          interference: 'on'
        })
      )
    );
    expect(structure.second).toEqual({
      growth: 'mortality',
      selfLimitation: true,
      effort: false,
      quota: true,
      stocking: false
    });
    expect(ModelStructure.parse(readStructure(structureToForm(structure, 2)))).toEqual(structure);
  });

  it('drops what the other interaction or response has no place for', () => {
    const read = ModelStructure.parse(
      readStructure(StructureForm.parse({ secondSelfLimitation: true, interference: true, response: 'holling-1' }))
    );
    expect(read.second.selfLimitation).toBe(false);
    expect(read.feeding.interference).toBe(false);
  });
});
