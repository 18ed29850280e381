import type { Ring } from '../numeric/ring';
import type { ConsumerSpec, ModelSpec, SpeciesSpec } from './spec';

/**
 * Every model of the document, in one of two shapes (P and Q are growth per head less effort, s is stocking less quota):
 *
 *   competition        dx/dt = x (P(x) - c12 y) + s1              dy/dt = y (Q(y) - c21 x) + s2
 *   consumer-resource  dx/dt = x P(x) - phi(x) y / D + s1         dy/dt = y (Q(y) - l y/x) + e phi(x) y / D + s2
 *
 * with P(x) = p0 + p1 x + p2 x^2, phi(x) = a x^power and D = 1 + h phi(x) + w y.
 */
export interface Coefficients<T> {
  interaction: ModelSpec['interaction'];
  p: [T, T, T];
  q: [T, T, T];
  s1: T;
  s2: T;
  c12: T;
  c21: T;
  a: T;
  h: T;
  w: T;
  e: T;
  /** 1 for holling-1 and -2, 2 for holling-3. */
  power: 1 | 2;
  /** r/g of leslie growth, zero otherwise. */
  leslie: T;
}

/** a - b, an exact zero when the same number is written twice. */
function difference<T>(ring: Ring<T>, a: number, b: number): T {
  return a === b ? ring.zero : ring.sub(ring.of(a), ring.of(b));
}

function growthPerHead<T>(ring: Ring<T>, species: SpeciesSpec): [T, T, T] {
  const { growth } = species;
  const effort = species.removal?.effort ?? 0;
  const r = ring.of(growth.r);
  const own = difference(ring, growth.r, effort);
  switch (growth.kind) {
    case 'exponential':
      return [own, ring.zero, ring.zero];
    case 'logistic':
      return [own, ring.neg(ring.div(r, ring.of(growth.K))), ring.zero];
    case 'allee': {
      const rOverA = ring.div(r, ring.of(growth.A));
      const rOverK = ring.div(r, ring.of(growth.K));
      return [
        ring.neg(ring.add(r, ring.of(effort))),
        ring.add(rOverA, rOverK),
        ring.neg(ring.div(rOverA, ring.of(growth.K)))
      ];
    }
  }
}

function consumerPerHead<T>(ring: Ring<T>, consumer: ConsumerSpec): { q: [T, T, T]; leslie: T } {
  const effort = consumer.removal?.effort ?? 0;
  const crowding = ring.of(consumer.selfLimitation ?? 0);
  const { growth } = consumer;
  if (growth === undefined) {
    const death = ring.add(ring.of(consumer.mortality ?? 0), ring.of(effort));
    return { q: [ring.neg(death), ring.neg(crowding), ring.zero], leslie: ring.zero };
  }
  const r = ring.of(growth.r);
  const own = difference(ring, growth.r, effort);
  if (growth.kind === 'leslie') {
    return { q: [own, ring.neg(crowding), ring.zero], leslie: ring.div(r, ring.of(growth.g)) };
  }
  const slope = ring.neg(ring.add(ring.div(r, ring.of(growth.K)), crowding));
  return { q: [own, slope, ring.zero], leslie: ring.zero };
}

function netAddition<T>(ring: Ring<T>, species: SpeciesSpec | ConsumerSpec): T {
  return difference(ring, species.stocking ?? 0, species.removal?.quota ?? 0);
}

/** Loss per head per head of the rival: r alpha / K, or b. */
function rivalry<T>(ring: Ring<T>, species: SpeciesSpec, alpha: number): T {
  const { growth } = species;
  if (growth.kind !== 'logistic') return ring.zero;
  return ring.div(ring.mul(ring.of(growth.r), ring.of(alpha)), ring.of(growth.K));
}

/**
 * Coefficients of a model in a ring.
 * @param ring arithmetic to use
 * @param spec a model without issues (see checkModel)
 * @returns coefficients, 1/time times powers of abundance. Never throws on a checked model.
 */
export function coefficientsOf<T>(ring: Ring<T>, spec: ModelSpec): Coefficients<T> {
  const { zero } = ring;
  const p = growthPerHead(ring, spec.first);
  const s1 = netAddition(ring, spec.first);
  const s2 = netAddition(ring, spec.second);
  if (spec.interaction === 'competition') {
    const terms = spec.competition;
    const [c12, c21] =
      terms.form === 'encounters'
        ? [ring.of(terms.b12), ring.of(terms.b21)]
        : [rivalry(ring, spec.first, terms.alpha12), rivalry(ring, spec.second, terms.alpha21)];
    const q = growthPerHead(ring, spec.second);
    return {
      interaction: 'competition',
      p,
      q,
      s1,
      s2,
      c12,
      c21,
      a: zero,
      h: zero,
      w: zero,
      e: zero,
      power: 1,
      leslie: zero
    };
  }
  const { feeding } = spec;
  const saturates = feeding.response !== 'holling-1';
  return {
    interaction: 'consumer-resource',
    p,
    ...consumerPerHead(ring, spec.second),
    s1,
    s2,
    c12: zero,
    c21: zero,
    a: ring.of(feeding.a),
    h: saturates ? ring.of(feeding.h ?? 0) : zero,
    w: saturates ? ring.of(feeding.interference ?? 0) : zero,
    e: ring.of(feeding.e),
    power: feeding.response === 'holling-3' ? 2 : 1
  };
}
