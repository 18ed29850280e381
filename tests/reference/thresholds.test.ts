import { describe, expect, it } from 'vitest';
import { findEquilibria, thresholds, withParameter } from '$lib/dynamics';
import { thresholdCases } from './thresholdCases';

describe('thresholds with known answers', () => {
  it.each(thresholdCases.map((testCase) => [testCase.id, testCase.title, testCase] as const))(
    '%s %s',
    (_id, _title, { document, parameter, range, wanted }) => {
      const report = thresholds(document, parameter, range);
      expect(report.complete, report.completeness).toBe(true);
      // The lists are complete: an extra threshold is as wrong as a missing one.
      expect(report.thresholds.map(({ kind, criticality }) => [kind, criticality])).toEqual(
        wanted.map(({ kind, criticality }) => [kind, criticality])
      );
      wanted.forEach((expected, i) => {
        const found = report.thresholds[i]!;
        const scale = Math.hypot(expected.x, expected.y) || Math.hypot(...report.branches.flatMap(({ x }) => x));
        expect(Math.abs(found.value / expected.value - 1)).toBeLessThan(1e-8);
        expect(Math.hypot(found.x - expected.x, found.y - expected.y)).toBeLessThan(1e-7 * scale);
        if (!expected.unstable) return;
        for (const side of ['below', 'above'] as const) {
          const p = expected.value * (side === 'above' ? 1.01 : 0.99);
          const inside = findEquilibria(withParameter(document, parameter, p)).equilibria.find(
            (e) => e.x > 0 && e.y > 0
          );
          expect(inside?.stability).toBe(side === expected.unstable ? 'unstable' : 'stable');
        }
      });
    }
  );
});
