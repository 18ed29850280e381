import { z } from 'zod';
import type { ModelStructure } from '$lib/contracts/content';

/** The structure of a model as a form posts it; a box that is not ticked is not posted. */
const ticked = z.union([z.boolean(), z.string().transform((v) => v === 'on' || v === 'true')]).default(false);
export const StructureForm = z.object({
  revision: z.string().default(''),
  interaction: z.string().default('competition'),
  firstGrowth: z.string().default('logistic'),
  firstEffort: ticked,
  firstQuota: ticked,
  firstStocking: ticked,
  secondGrowth: z.string().default('logistic'),
  secondSelfLimitation: ticked,
  secondEffort: ticked,
  secondQuota: ticked,
  secondStocking: ticked,
  competition: z.string().default('coefficients'),
  response: z.string().default('holling-1'),
  interference: ticked
});
export type StructureForm = z.infer<typeof StructureForm>;

/** The structure a form says; the schema of the content judges it. Fields that the other interaction uses keep their default. */
export function readStructure(form: StructureForm): Record<string, unknown> {
  return {
    interaction: form.interaction,
    first: {
      growth: form.firstGrowth,
      effort: form.firstEffort,
      quota: form.firstQuota,
      stocking: form.firstStocking
    },
    second: {
      growth: form.secondGrowth,
      selfLimitation: form.interaction === 'consumer-resource' && form.secondSelfLimitation,
      effort: form.secondEffort,
      quota: form.secondQuota,
      stocking: form.secondStocking
    },
    competition: form.competition,
    feeding: { response: form.response, interference: form.response !== 'holling-1' && form.interference }
  };
}

/** The form that shows a structure as it was saved. */
export function structureToForm(structure: ModelStructure, revision: number): StructureForm {
  return {
    revision: String(revision),
    interaction: structure.interaction,
    firstGrowth: structure.first.growth,
    firstEffort: structure.first.effort,
    firstQuota: structure.first.quota,
    firstStocking: structure.first.stocking,
    secondGrowth: structure.second.growth,
    secondSelfLimitation: structure.second.selfLimitation,
    secondEffort: structure.second.effort,
    secondQuota: structure.second.quota,
    secondStocking: structure.second.stocking,
    competition: structure.competition,
    response: structure.feeding.response,
    interference: structure.feeding.interference
  };
}
