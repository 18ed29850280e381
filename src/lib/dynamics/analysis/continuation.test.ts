import { describe, expect, it } from 'vitest';
import { correct, locate, tangentAt, walk, type CurveEquations, type CurvePoint } from './continuation';

/** x^2 + p^2 = 1. */
const circle: CurveEquations = {
  n: 1,
  evaluate([x = 0, p = 0], values, slopes) {
    values[0] = x * x + p * p - 1;
    slopes.set([2 * x, 2 * p]);
  },
  scale: (_, out) => out.fill(1)
};

/** The helix x = cos p, y = sin p, as two equations in x, y and p. */
const helix: CurveEquations = {
  n: 2,
  evaluate([x = 0, y = 0, p = 0], values, slopes) {
    values.set([x - Math.cos(p), y - Math.sin(p)]);
    slopes.set([1, 0, Math.sin(p), 0, 1, -Math.cos(p)]);
  },
  scale: (_, out) => out.fill(1)
};

function points(curve: CurveEquations, start: number[], longest: number, maxPoints: number): CurvePoint[] {
  const z = Float64Array.from(start);
  return [...walk(curve, z, tangentAt(curve, z)!, { longest, maxPoints })];
}

describe('continuation', () => {
  it('goes round a circle through both turning points and stays on it', () => {
    const path = points(circle, [1, 0], 0.1, 400);
    for (const { z } of path) expect(Math.abs(Math.hypot(z[0]!, z[1]!) - 1)).toBeLessThan(1e-13);
    const turns = path.slice(1).filter(({ z }, i) => Math.sign(z[0]!) !== Math.sign(path[i]!.z[0]!));
    expect(turns.length).toBeGreaterThan(4);
  });

  it('locates a turning point to rounding', () => {
    const path = points(circle, [1, 0], 0.1, 400);
    const at = path.findIndex(({ z }, i) => i > 0 && z[0]! * path[i - 1]!.z[0]! < 0);
    const found = locate(circle, path[at - 1]!, path[at]!, (z) => z[0]!)!;
    expect(Math.abs(found.z[1]!)).toBeCloseTo(1, 14);
    expect(Math.abs(found.z[0]!)).toBeLessThan(1e-13);
  });

  it('follows two equations in three unknowns, forwards and not back', () => {
    const path = points(helix, [1, 0, 0], 0.2, 100);
    const p = path.map(({ z }) => Math.abs(z[2]!));
    for (let i = 1; i < p.length; i++) expect(p[i]).toBeGreaterThan(p[i - 1]!);
    const end = path.at(-1)!.z;
    expect(end[0]).toBeCloseTo(Math.cos(end[2]!), 12);
  });

  it('steps by the bend: a tight turn is walked in short steps', () => {
    // A hyperbola that turns within 0.001 of the origin.
    const tight: CurveEquations = {
      ...circle,
      evaluate([x = 0, p = 0], values, slopes) {
        values[0] = x * x - p * p - 1e-6;
        slopes.set([2 * x, -2 * p]);
      }
    };
    const z = correct(tight, Float64Array.of(1, -1), Float64Array.of(0, 1))!;
    const path = [...walk(tight, z, tangentAt(tight, z, Float64Array.of(0, 1))!, { longest: 0.05, maxPoints: 120 })];
    expect(Math.max(...path.map(({ z: at }) => at[1]!))).toBeGreaterThan(0.5);
    expect(Math.min(...path.map(({ z: at }) => at[0]!))).toBeGreaterThan(0);
  });

  it('goes straight on where two curves truly cross', () => {
    const cross: CurveEquations = {
      ...circle,
      evaluate([x = 0, p = 0], values, slopes) {
        values[0] = x * (p - 0.37);
        slopes.set([p - 0.37, x]);
      }
    };
    const path = [...walk(cross, Float64Array.of(0, 0), Float64Array.of(0, 1), { longest: 0.05, maxPoints: 100 })];
    expect(path.at(-1)!.z[1]).toBeGreaterThan(1);
    for (const { z } of path) expect(z[0]).toBe(0);
  });

  it('says that it is lost where the equations end', () => {
    const end: CurveEquations = {
      ...circle,
      evaluate([x = 0, p = 0], values, slopes) {
        values[0] = p < 1 ? x : NaN;
        slopes.set([1, 0]);
      }
    };
    const steps = walk(end, Float64Array.of(0, 0), Float64Array.of(0, 1), { longest: 0.1 });
    let last = steps.next();
    let reached = 0;
    while (!last.done) {
      reached = last.value.z[1]!;
      last = steps.next();
    }
    expect(last.value).toBe('lost');
    expect(reached).toBeCloseTo(1, 6);
  });
});
