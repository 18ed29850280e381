import { describe, expect, it } from 'vitest';
import { equations, jacobianExpressions } from './equations';
import type { ModelSpec } from './spec';

const feeding: ModelSpec = {
  interaction: 'consumer-resource',
  first: { growth: { kind: 'logistic', r: 1.4, K: 900 }, removal: { quota: 3 } },
  second: { mortality: 0.35 },
  feeding: { response: 'holling-2', a: 0.02, h: 0.6, e: 0.12 }
};

describe('equations', () => {
  it('prints only the terms that are there, in symbols and in numbers', () => {
    const [resource, consumer] = equations(feeding, { first: 'N', second: 'P' });
    expect(resource.lhs).toBe('\\frac{dN}{dt}');
    expect(resource.latex).toBe(
      'r_1 \\, N \\, \\left(1 - \\frac{N}{K_1}\\right) - \\frac{a \\, N \\, P}{1 + a \\, h \\, N} - Q_1'
    );
    expect(consumer.latexWithNumbers).toBe(
      '\\frac{0.12 \\cdot 0.02 \\, N \\, P}{1 + 0.02 \\cdot 0.6 \\, N} - 0.35 \\, P'
    );
    expect(resource.terms.map((term) => term.meaning)).toEqual([
      'growth that slows towards the carrying capacity',
      'eaten by the consumer',
      'quota'
    ]);
    expect(resource.terms[1]!.evaluate(100, 10)).toBeCloseTo(-(0.02 * 100 * 10) / (1 + 0.02 * 0.6 * 100), 12);
  });

  it('writes small and large numbers with a power of ten', () => {
    const scaled: ModelSpec = {
      ...feeding,
      first: { growth: { kind: 'logistic', r: 2e-8, K: 1.5e9 } }
    };
    expect(equations(scaled)[0].latexWithNumbers).toContain('2 \\times 10^{-8} \\, x');
    expect(equations(scaled)[0].latexWithNumbers).toContain('1.5 \\times 10^{9}');
  });

  it('prints the Jacobian in symbols', () => {
    const classical: ModelSpec = {
      interaction: 'consumer-resource',
      first: { growth: { kind: 'exponential', r: 0.8 } },
      second: { mortality: 0.3 },
      feeding: { response: 'holling-1', a: 0.02, e: 0.25 }
    };
    expect(jacobianExpressions(classical)).toEqual([
      ['r_1 - a \\, y', '-a \\, x'],
      ['e \\, a \\, y', 'e \\, a \\, x - m']
    ]);
  });
});
