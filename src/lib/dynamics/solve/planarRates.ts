/** A model as a vector of rates: what the planar kernels and the ensembles read, written without allocation. */
import type { ConsumerSpec, ModelSpec, SpeciesSpec } from '../model/spec';
import type { PlanarFamily } from './planarKernels';

/**
 * Places in the vector, for
 *   dx/dt = x (p0 + p1 x + p2 x^2 - c y) - phi y/D + s1
 *   dy/dt = y (q0 + q1 y + q2 y^2 - d x - l y/x) + e phi y/D + s2
 * with phi = a x (or a x^2 for holling-3) and D = 1 + h phi + w y. Feeding that never saturates is c = a, d = -e a, a = 0.
 */
export const P0 = 0;
export const P1 = 1;
export const P2 = 2;
export const Q0 = 3;
export const Q1 = 4;
export const Q2 = 5;
export const C = 6;
export const D = 7;
export const A = 8;
export const H = 9;
export const W = 10;
export const E = 11;
export const L = 12;
export const S1 = 13;
export const S2 = 14;
export const PLANAR_RATES = 15;

function writeGrowth(species: SpeciesSpec, out: Float64Array, at: number): void {
  const { growth } = species;
  const effort = species.removal?.effort ?? 0;
  const { r } = growth;
  out[at] = (growth.kind === 'allee' ? -r : r) - effort;
  out[at + 1] =
    growth.kind === 'exponential' ? 0 : growth.kind === 'logistic' ? -r / growth.K : r / growth.A + r / growth.K;
  out[at + 2] = growth.kind === 'allee' ? -r / growth.A / growth.K : 0;
}

function writeConsumer(consumer: ConsumerSpec, out: Float64Array): void {
  const { growth } = consumer;
  const effort = consumer.removal?.effort ?? 0;
  const crowding = consumer.selfLimitation ?? 0;
  out[Q2] = 0;
  out[L] = 0;
  if (growth === undefined) {
    out[Q0] = -((consumer.mortality ?? 0) + effort);
    out[Q1] = -crowding;
    return;
  }
  out[Q0] = growth.r - effort;
  out[Q1] = growth.kind === 'logistic' ? -(growth.r / growth.K + crowding) : -crowding;
  if (growth.kind === 'leslie') out[L] = growth.r / growth.g;
}

/** Loss per head per head of the rival. */
function rivalry(species: SpeciesSpec, alpha: number): number {
  return species.growth.kind === 'logistic' ? (species.growth.r * alpha) / species.growth.K : 0;
}

/**
 * Writes the rates of a model. @param spec a model without issues. @param out PLANAR_RATES long; 1/time times powers of
 * abundance. Never throws, allocates nothing.
 */
export function writePlanarRates(spec: ModelSpec, out: Float64Array): void {
  const { first, second } = spec;
  writeGrowth(first, out, P0);
  out[S1] = (first.stocking ?? 0) - (first.removal?.quota ?? 0);
  out[S2] = (second.stocking ?? 0) - (second.removal?.quota ?? 0);
  if (spec.interaction === 'competition') {
    writeGrowth(spec.second, out, Q0);
    const terms = spec.competition;
    const byHead = terms.form === 'encounters';
    out[C] = byHead ? terms.b12 : rivalry(spec.first, terms.alpha12);
    out[D] = byHead ? terms.b21 : rivalry(spec.second, terms.alpha21);
    out[A] = 0;
    out[H] = 0;
    out[W] = 0;
    out[E] = 0;
    out[L] = 0;
    return;
  }
  writeConsumer(spec.second, out);
  const { feeding } = spec;
  const saturates = feeding.response !== 'holling-1';
  const h = saturates ? (feeding.h ?? 0) : 0;
  const w = saturates ? (feeding.interference ?? 0) : 0;
  const isPlain = h === 0 && w === 0 && feeding.response !== 'holling-3' && out[L] === 0;
  out[C] = isPlain ? feeding.a : 0;
  out[D] = isPlain ? -feeding.e * feeding.a : 0;
  out[A] = isPlain ? 0 : feeding.a;
  out[H] = h;
  out[W] = w;
  out[E] = feeding.e;
}

/**
 * The leanest kernel that serves a model. @param k its rates, whose zeros matter. @returns the family; every model has one.
 */
export function planarFamilyOf(spec: ModelSpec, k: Float64Array): PlanarFamily {
  const isBare = k[P2] === 0 && k[Q2] === 0 && k[S1] === 0 && k[S2] === 0;
  const isSigmoid = spec.interaction === 'consumer-resource' && spec.feeding.response === 'holling-3';
  if (k[L] !== 0) return isSigmoid ? 'ceiling-sigmoid' : 'ceiling-saturating';
  if (k[A] === 0) {
    if (!isBare) return 'cubic';
    return k[P1] === 0 && k[Q1] === 0 ? 'classical' : 'linear';
  }
  const isLean = isBare && k[Q1] === 0 && k[W] === 0;
  if (isSigmoid) return isLean ? 'sigmoid' : 'full-sigmoid';
  return isLean ? 'saturating' : 'full-saturating';
}
