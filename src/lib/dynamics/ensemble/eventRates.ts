/** A model of whole individuals: which events there are, and how often. */
import type { ConsumerSpec, ModelSpec, SpeciesSpec } from '../model/spec';

/**
 * Births that deaths of the same rate make up for, 1/time per head, >= 0. The equations only know the difference of births
 * and deaths; chance depends on both. Default 0: what grows has no deaths but those of crowding.
 */
export interface Turnover {
  first?: number;
  second?: number;
}

/**
 * Places in the vector of events, for n individuals of a species and m of the other:
 *   gain    n (B + B1 n) + S
 *   loss    n (D + D1 n + D2 n^2 + X m) + Q while n > 0, and R n^2/m where a ceiling follows the resource
 *   feeding PHI m with PHI = a n^power / (1 + ah n^power + w m): one resource less, and e consumers more in the mean
 */
export const B = 0;
export const B1 = 1;
export const S = 2;
export const D = 3;
export const D1 = 4;
export const D2 = 5;
export const X = 6;
export const Q = 7;
/** Numbers a species; those of the second follow those of the first. */
export const SPECIES_WIDTH = 8;
export const A = 16;
export const AH = 17;
export const W = 18;
/** Consumers that every meal brings for certain, and the chance of one more. */
export const WHOLE = 19;
export const CHANCE = 20;
export const R = 21;
/** 1 for holling-3. */
export const IS_SIGMOID = 22;
export const EVENT_RATES = 23;

function writeSpecies(species: SpeciesSpec | ConsumerSpec, turnover: number, out: Float64Array, at: number): void {
  const { growth } = species;
  const effort = species.removal?.effort ?? 0;
  out[at + B] = turnover;
  out[at + D] = turnover + effort;
  out[at + S] = species.stocking ?? 0;
  out[at + Q] = species.removal?.quota ?? 0;
  if (growth === undefined) out[at + D] = out[at + D]! + ((species as ConsumerSpec).mortality ?? 0);
  else if (growth.kind === 'allee') {
    // r (1 - n/K)(n/A - 1): the terms that add are births, those that take are deaths.
    out[at + B1] = growth.r / growth.A + growth.r / growth.K;
    out[at + D] = out[at + D]! + growth.r;
    out[at + D2] = growth.r / growth.A / growth.K;
  } else {
    if (growth.r >= 0) out[at + B] = turnover + growth.r;
    else out[at + D] = out[at + D]! - growth.r;
    if (growth.kind === 'logistic') out[at + D1] = growth.r / growth.K;
  }
}

/**
 * Events of a model whose abundances are counts. @param spec a model without issues, in individuals.
 * @param turnover see Turnover. @returns EVENT_RATES numbers. @throws RangeError for a turnover that is negative.
 */
export function eventRatesOf(spec: ModelSpec, turnover: Turnover = {}): Float64Array {
  const { first = 0, second = 0 } = turnover;
  if (!(first >= 0) || !(second >= 0)) throw new RangeError('a turnover must be 0 or more');
  const k = new Float64Array(EVENT_RATES);
  writeSpecies(spec.first, first, k, 0);
  writeSpecies(spec.second, second, k, SPECIES_WIDTH);
  if (spec.interaction === 'competition') {
    const terms = spec.competition;
    const lossOf = (species: SpeciesSpec, alpha: number): number =>
      species.growth.kind === 'logistic' ? (species.growth.r * alpha) / species.growth.K : 0;
    k[X] = terms.form === 'encounters' ? terms.b12 : lossOf(spec.first, terms.alpha12);
    k[SPECIES_WIDTH + X] = terms.form === 'encounters' ? terms.b21 : lossOf(spec.second, terms.alpha21);
    return k;
  }
  const { feeding, second: consumer } = spec;
  const saturates = feeding.response !== 'holling-1';
  k[A] = feeding.a;
  k[AH] = saturates ? feeding.a * (feeding.h ?? 0) : 0;
  k[W] = saturates ? (feeding.interference ?? 0) : 0;
  k[WHOLE] = Math.floor(feeding.e);
  k[CHANCE] = feeding.e - Math.floor(feeding.e);
  k[IS_SIGMOID] = feeding.response === 'holling-3' ? 1 : 0;
  k[SPECIES_WIDTH + D1] = k[SPECIES_WIDTH + D1]! + (consumer.selfLimitation ?? 0);
  if (consumer.growth?.kind === 'leslie') k[R] = consumer.growth.r / consumer.growth.g;
  return k;
}
