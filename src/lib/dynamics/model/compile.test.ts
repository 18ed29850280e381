import { describe, expect, it } from 'vitest';
import { compile } from './compile';
import type { ModelSpec } from './spec';

const out = new Float64Array(4);

describe('compile', () => {
  it('reads competition coefficients in units of the species that suffers', () => {
    const system = compile({
      interaction: 'competition',
      first: { growth: { kind: 'logistic', r: 0.9, K: 420 }, removal: { effort: 0.1, quota: 3 }, stocking: 1 },
      second: { growth: { kind: 'logistic', r: 0.6, K: 310 } },
      competition: { form: 'coefficients', alpha12: 0.7, alpha21: 0.5 }
    });
    system.rhs(100, 50, out);
    expect(out[0]).toBeCloseTo(0.9 * 100 * (1 - (100 + 0.7 * 50) / 420) - 0.1 * 100 - 3 + 1, 12);
    expect(out[1]).toBeCloseTo(0.6 * 50 * (1 - (50 + 0.5 * 100) / 310), 12);
    expect(system.firstAxisInvariant).toBe(false);
    expect(system.secondAxisInvariant).toBe(true);
  });

  it('reads an Allee effect and encounters', () => {
    const system = compile({
      interaction: 'competition',
      first: { growth: { kind: 'allee', r: 0.4, K: 100, A: 20 } },
      second: { growth: { kind: 'exponential', r: -0.2 } },
      competition: { form: 'encounters', b12: 0.01, b21: 0.02 }
    });
    system.rhs(60, 7, out);
    expect(out[0]).toBeCloseTo(60 * 0.4 * (1 - 0.6) * (3 - 1) - 0.01 * 60 * 7, 12);
    expect(out[1]).toBeCloseTo(7 * -0.2 - 0.02 * 60 * 7, 12);
  });

  it.each(['holling-1', 'holling-2', 'holling-3'] as const)('reads %s with everything on the consumer', (response) => {
    const saturating = response === 'holling-1' ? {} : { h: 0.6, interference: 0.03 };
    const spec: ModelSpec = {
      interaction: 'consumer-resource',
      first: { growth: { kind: 'logistic', r: 1.4, K: 900 } },
      second: { mortality: 0.35, selfLimitation: 0.01, removal: { effort: 0.05 }, stocking: 0.5 },
      feeding: { response, a: 0.02, e: 0.12, ...saturating }
    };
    const [x, y] = [200, 15];
    const power = response === 'holling-3' ? x * x : x;
    const { h = 0, interference = 0 } = saturating as { h?: number; interference?: number };
    const eaten = (0.02 * power * y) / (1 + 0.02 * h * power + interference * y);
    compile(spec).rhs(x, y, out);
    expect(out[0]).toBeCloseTo(1.4 * x * (1 - x / 900) - eaten, 10);
    expect(out[1]).toBeCloseTo(0.12 * eaten - 0.35 * y - 0.01 * y * y - 0.05 * y + 0.5, 10);
  });

  it('gives a consumer a ceiling that follows the resource, and nothing odd on its axis', () => {
    const system = compile({
      interaction: 'consumer-resource',
      first: { growth: { kind: 'logistic', r: 1, K: 100 } },
      second: { growth: { kind: 'leslie', r: 0.3, g: 0.2 } },
      feeding: { response: 'holling-1', a: 0.01, e: 0 }
    });
    system.rhs(50, 4, out);
    expect(out[1]).toBeCloseTo(0.3 * 4 * (1 - 4 / 10), 12);
    system.rhs(0, 0, out);
    expect([out[0], out[1]]).toEqual([0, 0]);
    system.perHead(0, 0, out);
    expect(out[1]).toBe(0.3);
    system.rhs(0, 1, out);
    expect(out[1]).toBe(-Infinity);
  });
});
