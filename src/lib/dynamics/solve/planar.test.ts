import { describe, expect, it } from 'vitest';
import { compile } from '../model/compile';
import type { ModelSpec } from '../model/spec';
import { integratePlanar, makePlanarIntegrator, planarModelOf, planarTimes, primePlanar } from './planar';
import { integrate } from './integrate';
import { randomStream } from '../numeric/random';
import { simulateMany } from './planarMany';
import type { PlanarFamily } from './planarKernels';

const logistic = { kind: 'logistic', r: 1.4, K: 900 } as const;
const managed = { removal: { effort: 0.1 }, stocking: 2 };
const feeding2 = { response: 'holling-2', a: 0.02, h: 0.6, e: 0.12 } as const;
const feeding3 = { response: 'holling-3', a: 0.0002, h: 0.6, e: 0.12 } as const;

const models: [PlanarFamily, ModelSpec][] = [
  [
    'classical',
    {
      interaction: 'consumer-resource',
      first: { growth: { kind: 'exponential', r: 1.1 } },
      second: { mortality: 0.4 },
      feeding: { response: 'holling-1', a: 0.01, e: 0.25 }
    }
  ],
  [
    'linear',
    {
      interaction: 'competition',
      first: { growth: logistic, removal: { effort: 0.2 } },
      second: { growth: { kind: 'logistic', r: 0.6, K: 310 } },
      competition: { form: 'coefficients', alpha12: 0.7, alpha21: 0.2 }
    }
  ],
  [
    'cubic',
    {
      interaction: 'competition',
      first: { growth: { kind: 'allee', r: 0.8, K: 400, A: 30 }, ...managed },
      second: { growth: { kind: 'logistic', r: 0.6, K: 310 } },
      competition: { form: 'encounters', b12: 0.0004, b21: 0.0002 }
    }
  ],
  [
    'saturating',
    { interaction: 'consumer-resource', first: { growth: logistic }, second: { mortality: 0.1 }, feeding: feeding2 }
  ],
  [
    'sigmoid',
    { interaction: 'consumer-resource', first: { growth: logistic }, second: { mortality: 0.1 }, feeding: feeding3 }
  ],
  [
    'full-saturating',
    {
      interaction: 'consumer-resource',
      first: { growth: { kind: 'allee', r: 0.8, K: 400, A: 30 }, ...managed },
      second: { growth: { kind: 'logistic', r: 0.3, K: 40 }, selfLimitation: 0.001 },
      feeding: { ...feeding2, interference: 0.05 }
    }
  ],
  [
    'full-sigmoid',
    {
      interaction: 'consumer-resource',
      first: { growth: logistic, ...managed },
      second: { mortality: 0.1, selfLimitation: 0.001 },
      feeding: { ...feeding3, interference: 0.05 }
    }
  ],
  [
    'ceiling-saturating',
    {
      interaction: 'consumer-resource',
      first: { growth: logistic },
      second: { growth: { kind: 'leslie', r: 0.4, g: 0.1 } },
      feeding: { response: 'holling-1', a: 0.01, e: 0 }
    }
  ],
  [
    'ceiling-sigmoid',
    {
      interaction: 'consumer-resource',
      first: { growth: logistic },
      second: { growth: { kind: 'leslie', r: 0.4, g: 0.1 } },
      feeding: feeding3
    }
  ]
];
const start = { x: 120, y: 20 };
const span = [0, 40] as const;
const times = Array.from({ length: 81 }, (_, i) => i / 2);

describe('planar integration', () => {
  it.each(models)('of a %s model has its slopes and follows the path of the general integrator', (family, spec) => {
    const model = planarModelOf(spec);
    expect(model.kernel.family).toBe(family);
    const system = compile(spec);
    const [ours, theirs] = [new Float64Array(2), new Float64Array(2)];
    for (const [x, y] of [
      [120, 20],
      [3, 400],
      [0.01, 0.02]
    ] as const) {
      model.kernel.slopes(x, y, model.rates, ours);
      system.rhs(x, y, theirs);
      for (const i of [0, 1]) expect(Math.abs(ours[i]! - theirs[i]!)).toBeLessThan(1e-12 * (1 + Math.abs(theirs[i]!)));
    }
    const rhs = (_: number, z: Float64Array, out: Float64Array): void => system.rhs(z[0]!, z[1]!, out);
    const exact = integrate({ rhs, y0: [start.x, start.y], span }, { rtol: 1e-13, atol: 1e-13, times });
    primePlanar(model.kernel, model.rates, start.x, start.y, span[1]);
    const path = integratePlanar(model, start, span, times, { rtol: 1e-9 });
    expect(path.end).toBe('reached');
    expect(path.written).toBe(times.length);
    path.values.forEach((value, i) => expect(Math.abs(value / exact.y[i]! - 1)).toBeLessThan(2e-6));
    const tight = integratePlanar(model, start, span, times, { rtol: 1e-12 });
    tight.values.forEach((value, i) => expect(Math.abs(value / exact.y[i]! - 1)).toBeLessThan(4e-9));
  });

  it('is of order five at the ends of steps, and keeps it between them', () => {
    const [, spec] = models[0]!;
    const model = planarModelOf(spec);
    const system = compile(spec);
    const rhs = (_: number, z: Float64Array, out: Float64Array): void => system.rhs(z[0]!, z[1]!, out);
    const inside = Array.from({ length: 201 }, (_, i) => 2 + 0.03 * i);
    const exact = integrate({ rhs, y0: [100, 60], span: [0, 8] }, { rtol: 1e-14, atol: 1e-14, times: inside }).y;
    const worst = (values: (i: number) => number): number =>
      Math.max(...inside.map((_, i) => Math.abs(values(i) / exact[2 * i]! - 1)));
    const errors = [1 / 8, 1 / 16].map((maxStep) => {
      const options = { rtol: 1e3, atol: 1e6, maxStep };
      const path = integratePlanar(model, { x: 100, y: 60 }, [0, 8], inside, options);
      const ends = inside.map((t) => integratePlanar(model, { x: 100, y: 60 }, [0, t], [], options).x);
      return [worst((i) => path.values[2 * i]!), worst((i) => ends[i]!)];
    });
    for (const i of [0, 1]) {
      const order = Math.log2(errors[0]![i]! / errors[1]![i]!);
      expect(order).toBeGreaterThan(4.8);
      expect(order).toBeLessThan(5.4);
    }
  });

  it('gives the same bytes whatever came before, primed or not', () => {
    const integrator = makePlanarIntegrator({ rtol: 1e-8 });
    const padded = planarTimes(times);
    const runs = models.map(([, spec]) => {
      const model = planarModelOf(spec);
      const out = new Float64Array(2 * times.length);
      integrator.run(model.kernel, model.rates, start.x, start.y, ...span, padded, out, 0);
      return out;
    });
    [...models].reverse().forEach(([, spec], i) => {
      const again = integratePlanar(planarModelOf(spec), start, span, times, { rtol: 1e-8 });
      expect(again.values).toEqual(runs[models.length - 1 - i]);
    });
  });

  it('keeps an absent species absent', () => {
    for (const [, spec] of models.slice(0, 5)) {
      const path = integratePlanar(planarModelOf(spec), { x: 50, y: 0 }, [0, 10], [0, 5, 10]);
      expect(path.end).toBe('reached');
      if (spec.second.stocking === undefined)
        expect([path.values[1], path.values[3], path.values[5]]).toEqual([0, 0, 0]);
    }
  });

  it('says what it cannot finish', () => {
    const doomed: ModelSpec = {
      interaction: 'consumer-resource',
      first: { growth: { kind: 'exponential', r: -40 } },
      second: { mortality: 0.4 },
      feeding: { response: 'holling-1', a: 0.01, e: 0.25 }
    };
    expect(integratePlanar(planarModelOf(doomed), start, [0, 100], []).end).toBe('underflow');
    const growing: ModelSpec = {
      interaction: 'competition',
      first: { growth: { kind: 'exponential', r: 40 } },
      second: { growth: { kind: 'exponential', r: 1 } },
      competition: { form: 'encounters', b12: 0, b21: 0 }
    };
    expect(integratePlanar(planarModelOf(growing), start, [0, 100], []).end).not.toBe('reached');
    const [, plain] = models[1]!;
    expect(integratePlanar(planarModelOf(plain), start, span, [], { maxSteps: 5 })).toMatchObject({
      end: 'tooManySteps',
      accepted: 5
    });
    const fast: ModelSpec = { ...plain, first: { growth: { kind: 'logistic', r: 5000, K: 900 } } } as ModelSpec;
    expect(integratePlanar(planarModelOf(fast), start, [0, 1000], []).end).toBe('stiff');
    expect(integratePlanar(planarModelOf(fast), start, [0, 1000], [], { shouldStop: () => true }).end).not.toBe(
      'reached'
    );
  });
});

describe('deep cycles', () => {
  it('keep their phase at a loose tolerance, as an absolute one would not let them', () => {
    const { uniform } = randomStream(33);
    const between = (low: number, high: number): number => low + (high - low) * uniform();
    const long = Array.from({ length: 401 }, (_, i) => i / 2);
    const worst = (found: Float64Array, exact: Float64Array): number =>
      Math.max(
        ...[0, 1].map((species) => {
          let [peak, error] = [0, 0];
          for (let j = species; j < exact.length; j += 2) {
            peak = Math.max(peak, exact[j]!);
            error = Math.max(error, Math.abs(found[j]! - exact[j]!));
          }
          return error / peak;
        })
      );
    let deepest = Infinity;
    const errors = Array.from({ length: 200 }, () => {
      const K = between(20, 120);
      const model = planarModelOf({
        interaction: 'consumer-resource',
        first: { growth: { kind: 'logistic', r: between(0.4, 1.6), K } },
        second: { mortality: between(0.1, 0.5) },
        feeding: { response: 'holling-2', a: between(0.02, 0.2), h: between(0.2, 1.5), e: between(0.2, 0.8) }
      });
      const at = { x: between(0.1, 0.9) * K, y: between(1, 15) };
      const exact = integratePlanar(model, at, [0, 200], long, { rtol: 1e-12 }).values;
      deepest = Math.min(
        deepest,
        exact.reduce((low, n) => Math.min(low, n))
      );
      return worst(integratePlanar(model, at, [0, 200], long, { rtol: 1e-6 }).values, exact);
    }).sort((a, b) => a - b);
    // Some must dip below anything an absolute tolerance would resolve, or this shows nothing.
    expect(deepest).toBeLessThan(1e-12);
    expect(errors[197]).toBeLessThan(1e-3);
    expect(errors[100]).toBeLessThan(2e-5);
  });
});

describe('many paths', () => {
  it('are each what one alone is', () => {
    const all = models.map(([, spec]) => planarModelOf(spec));
    const starts = all.flatMap((_, i) => [100 + i, 20 + i]);
    const many = simulateMany(all, starts, span, times, { rtol: 1e-7 });
    all.forEach((model, i) => {
      const alone = integratePlanar(model, { x: 100 + i, y: 20 + i }, span, times, { rtol: 1e-7 });
      expect(many.values.slice(2 * times.length * i, 2 * times.length * (i + 1))).toEqual(alone.values);
      expect([many.ends[i], many.last[2 * i], many.last[2 * i + 1]]).toEqual([alone.end, alone.x, alone.y]);
    });
    const one = simulateMany([all[0]!], [1, 2, 3, 4], [0, 5], []);
    expect(one.last[2]).toBe(integratePlanar(all[0]!, { x: 3, y: 4 }, [0, 5], []).x);
    expect(() => simulateMany(all, [1, 2], span, times)).toThrow(RangeError);
  });
});
