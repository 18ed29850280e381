import type { ModelStructure } from '$lib/contracts/content';
import type { ConsumerSpec, GrowthSpec, ManagedSpec, ModelSpec } from '$lib/dynamics';

/**
 * A model of this structure in which every number is a stand-in, so that its equations can be written in symbols before a
 * single rate is known. Its numbers mean nothing and must never reach a result.
 */
export function placeholderModel(structure: ModelStructure): ModelSpec {
  const growth = (kind: string): GrowthSpec =>
    kind === 'exponential'
      ? { kind: 'exponential', r: 1 }
      : kind === 'allee'
        ? { kind: 'allee', r: 1, K: 2, A: 1 }
        : { kind: 'logistic', r: 1, K: 2 };
  const managed = (s: { effort: boolean; quota: boolean; stocking: boolean }): ManagedSpec => ({
    ...(s.effort || s.quota ? { removal: { ...(s.effort && { effort: 1 }), ...(s.quota && { quota: 1 }) } } : {}),
    ...(s.stocking ? { stocking: 1 } : {})
  });
  const first = { growth: growth(structure.first.growth), ...managed(structure.first) };
  if (structure.interaction === 'competition') {
    return {
      interaction: 'competition',
      first,
      second: { growth: growth(structure.second.growth), ...managed(structure.second) },
      competition:
        structure.competition === 'coefficients'
          ? { form: 'coefficients', alpha12: 1, alpha21: 1 }
          : { form: 'encounters', b12: 1, b21: 1 }
    };
  }
  const { response, interference } = structure.feeding;
  const own: Pick<ConsumerSpec, 'mortality' | 'growth'> =
    structure.second.growth === 'leslie'
      ? { growth: { kind: 'leslie', r: 1, g: 1 } }
      : structure.second.growth === 'logistic'
        ? { growth: { kind: 'logistic', r: 1, K: 2 } }
        : { mortality: 1 };
  return {
    interaction: 'consumer-resource',
    first,
    second: { ...own, ...(structure.second.selfLimitation ? { selfLimitation: 1 } : {}), ...managed(structure.second) },
    feeding: {
      response,
      a: 1,
      e: 1,
      ...(response === 'holling-1' ? {} : { h: 1, ...(interference ? { interference: 1 } : {}) })
    }
  };
}
