import { describe, expect, it } from 'vitest';
import { checkModel } from './check';
import type { ModelSpec } from './spec';

const competition: ModelSpec = {
  interaction: 'competition',
  first: { growth: { kind: 'logistic', r: 0.9, K: 420 } },
  second: { growth: { kind: 'logistic', r: 0.6, K: 310 } },
  competition: { form: 'coefficients', alpha12: 0.7, alpha21: 0.5 }
};
const feeding: ModelSpec = {
  interaction: 'consumer-resource',
  first: { growth: { kind: 'logistic', r: 1.4, K: 900 } },
  second: { mortality: 0.35 },
  feeding: { response: 'holling-2', a: 0.02, h: 0.6, e: 0.12 }
};
const paths = (spec: ModelSpec) => checkModel(spec).map((issue) => issue.path);

describe('checkModel', () => {
  it('finds nothing wrong with sound models', () => {
    expect(checkModel(competition)).toEqual([]);
    expect(checkModel(feeding)).toEqual([]);
  });

  it('names the field that is out of range', () => {
    expect(paths({ ...competition, first: { growth: { kind: 'logistic', r: 0, K: -1 } } })).toEqual([
      'first.growth.r',
      'first.growth.K'
    ]);
    expect(paths({ ...feeding, first: { growth: { kind: 'allee', r: 1, K: 10, A: 10 } } })).toEqual(['first.growth.A']);
    expect(paths({ ...feeding, first: { growth: { kind: 'exponential', r: Number.NaN } } })).toEqual([
      'first.growth.r'
    ]);
    expect(paths({ ...feeding, second: { mortality: 0.1, removal: { quota: -1 }, stocking: -2 } })).toEqual([
      'second.removal.quota',
      'second.stocking'
    ]);
  });

  it('refuses numbers that no computer can multiply with one another', () => {
    expect(paths({ ...competition, first: { growth: { kind: 'logistic', r: 1e-308, K: 1e300 } } })).toEqual([
      'first.growth.r',
      'first.growth.K'
    ]);
    expect(paths({ ...feeding, second: { mortality: 5e-324, stocking: 1.7e308 } })).toEqual([
      'second.mortality',
      'second.stocking'
    ]);
    expect(paths({ ...feeding, first: { growth: { kind: 'exponential', r: -1e51 } } })).toEqual(['first.growth.r']);
    expect(paths({ ...competition, first: { growth: { kind: 'logistic', r: 1e-50, K: 1e50 } } })).toEqual([]);
  });

  it('allows any finite rate for exponential growth', () => {
    expect(paths({ ...feeding, first: { growth: { kind: 'exponential', r: -0.3 } } })).toEqual([]);
  });

  it('asks for logistic growth under competition coefficients', () => {
    expect(paths({ ...competition, second: { growth: { kind: 'exponential', r: 1 } } })).toEqual([
      'second.growth.kind'
    ]);
  });

  it('asks for exactly one of mortality and growth', () => {
    expect(paths({ ...feeding, second: {} })).toEqual(['second']);
    expect(paths({ ...feeding, second: { mortality: 1, growth: { kind: 'logistic', r: 1, K: 5 } } })).toEqual([
      'second'
    ]);
  });

  it('asks for handling time where the response saturates, and for none where it does not', () => {
    expect(paths({ ...feeding, feeding: { response: 'holling-3', a: 1, e: 1 } })).toEqual(['feeding.h']);
    expect(paths({ ...feeding, feeding: { response: 'holling-1', a: 1, e: 1, h: 2, interference: 1 } })).toEqual([
      'feeding.h',
      'feeding.interference'
    ]);
  });

  it('lets conversion be 0 only for a consumer with growth of its own', () => {
    const none = { response: 'holling-1', a: 1, e: 0 } as const;
    expect(paths({ ...feeding, feeding: none })).toEqual(['feeding.e']);
    expect(paths({ ...feeding, second: { growth: { kind: 'leslie', r: 1, g: 1 } }, feeding: none })).toEqual([]);
  });
});
