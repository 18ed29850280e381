import { describe, expect, it } from 'vitest';
import { simulate } from '$lib/dynamics';
import { trajectoryCases, type TrajectoryCase } from './trajectoryCases';

const named = (id: string): TrajectoryCase => {
  const found = trajectoryCases.find((c) => c.id === id);
  if (!found) throw new Error(`no case ${id}`);
  return found;
};

function run(c: TrajectoryCase, rtol: number, atol: number) {
  const last = Math.max(...c.times, ...c.events.map((e) => e.t + 1));
  return simulate(c.document, {
    start: c.start,
    span: [0, last],
    times: c.times,
    rtol,
    atol,
    thresholds: c.events
      .filter((e) => e.level > 0)
      .map((e) => ({ species: e.species, [e.direction === 'up' ? 'above' : 'below']: e.level }))
  });
}

describe('paths with known answers', () => {
  // The accuracy asked for is the one each case states, so the promise itself is what is tested.
  for (const c of trajectoryCases) {
    it(`${c.id}: ${c.title}`, () => {
      const tolerance = c.tolerance.state ?? c.tolerance.logState ?? 1e-8;
      const result = run(c, tolerance, 1e-10);
      expect(result.outcome.status).toBe('reached');
      expect(result.t).toEqual(c.times);
      c.states.forEach(([x, y], i) => {
        if (c.tolerance.state !== null) {
          expect(Math.abs(result.x[i]! / x - 1)).toBeLessThan(c.tolerance.state);
          expect(Math.abs(result.y[i]! / y - 1)).toBeLessThan(c.tolerance.state);
        }
        if (c.tolerance.logState !== null) {
          expect(Math.abs(Math.log(result.x[i]! / x))).toBeLessThan(c.tolerance.logState);
          expect(Math.abs(Math.log(result.y[i]! / y))).toBeLessThan(c.tolerance.logState);
        }
      });
      for (const wanted of c.events) {
        const kind = wanted.level === 0 ? 'ran out' : wanted.direction === 'up' ? 'rose above' : 'fell below';
        const first = result.events.find(
          (e) => e.species === wanted.species && e.kind === kind && e.value === wanted.level
        );
        expect(Math.abs((first?.t ?? NaN) - wanted.t)).toBeLessThan(c.tolerance.eventTime ?? 1e-8);
      }
    });
  }

  it('keeps its printed digits when the tolerance is halved', () => {
    for (const c of trajectoryCases.filter((one) => one.times.length > 0)) {
      const coarse = run(c, 1e-6, 1e-8);
      const fine = run(c, 5e-7, 5e-9);
      const printed = (list: number[]): string[] => list.map((v) => v.toPrecision(5));
      expect(printed(coarse.x)).toEqual(printed(fine.x));
      expect(printed(coarse.y)).toEqual(printed(fine.y));
    }
  });

  it('says that the fast predator is stiff, and that the others are not', () => {
    expect(run(named('S-TR-05'), 1e-7, 1e-10).stiff).toBe(true);
    for (const id of ['S-TR-01', 'S-TR-02', 'S-TR-03', 'S-TR-06', 'S-TR-07', 'S-TR-08']) {
      expect(run(named(id), 1e-8, 1e-10).stiff).toBe(false);
    }
  });
});
