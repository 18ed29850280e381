import fc from 'fast-check';
import type { ConsumerSpec, GrowthSpec, ManagedSpec, ModelSpec } from '$lib/dynamics';

/** Units in which one and the same model can be written: abundances and time. */
export interface Scale {
  x: number;
  y: number;
  time: number;
}
export const UNIT: Scale = { x: 1, y: 1, time: 1 };

/** A model without units, and how to write it in any. */
export interface Draft {
  write(scale: Scale): ModelSpec;
  label: string;
}

/** Mostly anywhere, evenly in the exponent; sometimes at the round and extreme values that doubles are drawn from. */
const power = (low: number, high: number) =>
  fc
    .oneof(
      { weight: 5, arbitrary: fc.nat(1_000_000).map((step) => low + ((high - low) * step) / 1_000_000) },
      { weight: 1, arbitrary: fc.double({ min: low, max: high, noNaN: true }) },
      { weight: 1, arbitrary: fc.constant(0) }
    )
    .map((exponent) => 10 ** exponent);
/** Ten decades of abundance for each species, six of time. */
export const scales: fc.Arbitrary<Scale> = fc.record({ x: power(-5, 5), y: power(-5, 5), time: power(-3, 3) });

const rate = power(-1, 0.7);
const amount = power(-1.2, 1);
const sometimes = (value: fc.Arbitrary<number>) =>
  fc.oneof({ weight: 3, arbitrary: fc.constant(0) }, { weight: 1, arbitrary: value });

interface Growth {
  kind: 'exponential' | 'logistic' | 'allee';
  r: number;
  K: number;
  share: number;
}
const growths = (kinds: Growth['kind'][]): fc.Arbitrary<Growth> =>
  fc.record({
    kind: fc.constantFrom(...kinds),
    r: rate,
    K: amount,
    share: fc.double({ min: 0.02, max: 0.9, noNaN: true })
  });

function writeGrowth({ kind, r, K, share }: Growth, n: number, time: number): GrowthSpec {
  if (kind === 'exponential') return { kind, r: r / time };
  if (kind === 'logistic') return { kind, r: r / time, K: K * n };
  return { kind, r: r / time, K: K * n, A: K * share * n };
}

interface Management {
  effort: number;
  quota: number;
  stocking: number;
}
const managements: fc.Arbitrary<Management> = fc.record({
  effort: sometimes(power(-2, 0)),
  quota: sometimes(power(-3, 0)),
  stocking: sometimes(power(-3, 0))
});

function writeManagement({ effort, quota, stocking }: Management, n: number, time: number): ManagedSpec {
  return { removal: { effort: effort / time, quota: (quota * n) / time }, stocking: (stocking * n) / time };
}

const competitions: fc.Arbitrary<Draft> = fc
  .record({
    form: fc.constantFrom('coefficients' as const, 'encounters' as const),
    first: growths(['exponential', 'logistic', 'allee']),
    second: growths(['exponential', 'logistic', 'allee']),
    m1: managements,
    m2: managements,
    c12: fc.oneof({ weight: 6, arbitrary: power(-1, 0.7) }, { weight: 1, arbitrary: fc.constant(0) }),
    c21: fc.oneof({ weight: 6, arbitrary: power(-1, 0.7) }, { weight: 1, arbitrary: fc.constant(0) })
  })
  .map(({ form, first, second, m1, m2, c12, c21 }) => ({
    label: `competition ${form} ${first.kind}/${second.kind}`,
    write({ x, y, time }) {
      const kinds = form === 'coefficients' ? { kind: 'logistic' as const } : {};
      return {
        interaction: 'competition',
        first: { growth: writeGrowth({ ...first, ...kinds }, x, time), ...writeManagement(m1, x, time) },
        second: { growth: writeGrowth({ ...second, ...kinds }, y, time), ...writeManagement(m2, y, time) },
        competition:
          form === 'coefficients'
            ? { form, alpha12: (c12 * x) / y, alpha21: (c21 * y) / x }
            : { form, b12: c12 / (time * y), b21: c21 / (time * x) }
      };
    }
  }));

const consumers: fc.Arbitrary<Draft> = fc
  .record({
    response: fc.constantFrom('holling-1' as const, 'holling-2' as const, 'holling-3' as const),
    first: growths(['exponential', 'logistic', 'allee']),
    own: fc.constantFrom('mortality' as const, 'mortality' as const, 'logistic' as const, 'leslie' as const),
    m1: managements,
    m2: managements,
    a: power(-0.7, 0.7),
    h: power(-1, 0.5),
    e: power(-1, 0.3),
    m: rate,
    K: amount,
    w: sometimes(power(-1.5, 0.5)),
    d: sometimes(power(-1.5, 0.3))
  })
  .map(({ response, first, own, m1, m2, a, h, e, m, K, w, d }) => ({
    label: `consumer ${response} ${first.kind} ${own}${w > 0 ? ' w' : ''}${d > 0 ? ' d' : ''}`,
    write({ x, y, time }) {
      const second: ConsumerSpec =
        own === 'mortality'
          ? { mortality: m / time }
          : own === 'logistic'
            ? { growth: { kind: own, r: m / time, K: K * y } }
            : { growth: { kind: own, r: m / time, g: (K * y) / x } };
      const saturating = response === 'holling-1' ? {} : { h: (h * time * y) / x, interference: w / y };
      return {
        interaction: 'consumer-resource',
        first: { growth: writeGrowth(first, x, time), ...writeManagement(m1, x, time) },
        second: { ...second, selfLimitation: d / (time * y), ...writeManagement(m2, y, time) },
        feeding: {
          response,
          a: response === 'holling-3' ? a / (time * x * y) : a / (time * y),
          e: (e * y) / x,
          ...saturating
        }
      };
    }
  }));

/** Every kind of model of the document. */
export const drafts: fc.Arbitrary<Draft> = fc.oneof(competitions, consumers);

/** One seed for all laws: a failure must be the same failure tomorrow. */
export const SEED = 20260104;

/** Digits as people write them: zeros of coefficients, equal rates and merged roots come up by themselves. */
function rounded(value: unknown): unknown {
  if (typeof value === 'number') return Number(value.toPrecision(1));
  if (typeof value !== 'object' || value === null) return value;
  const entries = Object.entries(value).map(([key, inner]) => [key, rounded(inner)] as const);
  const copy = Object.fromEntries(entries) as Record<string, unknown>;
  const { A, K } = copy;
  if (typeof A === 'number' && typeof K === 'number' && A >= K) copy.A = K / 2;
  return copy;
}

/** Models of every kind in round numbers, with removal that often just balances growth. */
export const roundModels: fc.Arbitrary<ModelSpec> = fc
  .record({ draft: drafts, balanced: fc.constantFrom('none', 'none', 'first', 'second', 'both') })
  .map(({ draft, balanced }) => {
    const spec = rounded(draft.write(UNIT)) as ModelSpec;
    const balance = <S extends ManagedSpec & { growth?: { r: number } }>(species: S, at: string): S =>
      balanced === at || balanced === 'both'
        ? { ...species, removal: { ...species.removal, effort: species.growth?.r ?? 0 } }
        : species;
    return { ...spec, first: balance(spec.first, 'first'), second: balance(spec.second, 'second') } as ModelSpec;
  });

/**
 * How many models a law is held against. With SEDGELINE_PROPERTIES=full ten times as many, 25,000 for the laws of equilibria:
 * some minutes, for whoever has changed the search.
 */
export const runs = (usual: number): number => (process.env.SEDGELINE_PROPERTIES === 'full' ? 10 * usual : usual);
/** Side of the grid of starts of the independent search. */
export const STARTS = process.env.SEDGELINE_PROPERTIES === 'full' ? 24 : 12;
/** Milliseconds that a law may take. */
export const PATIENCE = process.env.SEDGELINE_PROPERTIES === 'full' ? 3_600_000 : 60_000;
