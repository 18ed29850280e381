import { simulate, type ModelSpec } from '$lib/dynamics';
import { describe, expect, it } from 'vitest';
import { trajectoryCases } from '../../../../tests/reference/trajectoryCases';
import { crossCheck } from './crossCheck';

const logistic: ModelSpec = {
  interaction: 'consumer-resource',
  first: { growth: { kind: 'logistic', r: 1, K: 100 }, removal: { quota: 30 } },
  second: { mortality: 0.3 },
  feeding: { response: 'holling-1', a: 0.01, e: 0.1 }
};

describe('crossCheck', () => {
  for (const c of trajectoryCases) {
    it(`agrees on ${c.id}, or says why it cannot tell`, () => {
      const result = simulate(c.document, { start: c.start, span: [0, c.times.at(-1) ?? 12], rtol: 1e-9 });
      const check = crossCheck(c.document, result, { rtol: 1e-9 });
      if (check.largestRelativeDifference === null) expect(check.reason).toMatch(/^It /);
      else expect(check.largestRelativeDifference).toBeLessThan(1e-7);
      // Only the stiff case may be beyond an explicit method.
      if (!result.stiff) expect(check.largestRelativeDifference).not.toBeNull();
    });
  }

  it('notices a path that is wrong by one part in ten thousand', () => {
    const result = simulate(logistic, { start: { x: 80, y: 10 }, span: [0, 8] });
    const wrong = { ...result, x: result.x.map((v, i) => (i === 100 ? v * 1.0001 : v)) };
    expect(crossCheck(logistic, wrong).largestRelativeDifference).toBeGreaterThan(1e-5);
  });

  it('follows a species that runs out', () => {
    const result = simulate(logistic, { start: { x: 80, y: 10 }, span: [0, 40] });
    expect(result.events.some((e) => e.kind === 'ran out')).toBe(true);
    expect(crossCheck(logistic, result).largestRelativeDifference).toBeLessThan(1e-8);
  });

  it('gives up within its budget and says so', () => {
    const result = simulate(logistic, { start: { x: 80, y: 10 }, span: [0, 8] });
    const check = crossCheck(logistic, result, { maxEvaluations: 50 });
    expect(check.largestRelativeDifference).toBeNull();
    expect(check.reason).toBe('It needed too many steps.');
  });
});
