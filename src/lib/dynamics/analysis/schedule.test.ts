import { Outcome, Solver } from 'odex';
import { describe, expect, it } from 'vitest';
import { compile } from '../model/compile';
import type { ModelSpec } from '../model/spec';
import type { Pulse } from './schedule';
import { simulate } from './trajectory';

const r = 0.8;
const K = 100;
/** Two species that do not touch each other: each has a closed form. */
const logistic: ModelSpec = {
  interaction: 'competition',
  first: { growth: { kind: 'logistic', r, K } },
  second: { growth: { kind: 'exponential', r: 0.1 } },
  competition: { form: 'encounters', b12: 0, b21: 0 }
};
const grown = (n: number, t: number) => K / (1 + (K / n - 1) * Math.exp(-r * t));
const goats: ModelSpec = {
  interaction: 'consumer-resource',
  first: { growth: { kind: 'logistic', r: 0.35, K: 4200 } },
  second: { mortality: 0.32 },
  feeding: { response: 'holling-2', a: 0.2778, h: 0.002, e: 0.0014 }
};

describe('a schedule', () => {
  it('of culls on a logistic stock follows the closed form piece by piece', () => {
    const schedule: Pulse[] = [
      { t: 5, species: 'first', removeShare: 0.4 },
      { t: 2, species: 'first', remove: 30 },
      { t: 7.5, species: 'first', add: 12 },
      { t: 7.5, species: 'second', removeShare: 0.5 }
    ];
    const result = simulate(logistic, {
      start: { x: 60, y: 10 },
      span: [0, 10],
      times: [1, 2, 3, 5, 7.5, 10],
      rtol: 1e-10,
      schedule
    });
    const at2 = grown(60, 2) - 30;
    const at5 = 0.6 * grown(at2, 3);
    const at75 = grown(at5, 2.5) + 12;
    const wanted = [grown(60, 1), at2, grown(at2, 1), at5, at75, grown(at75, 2.5)];
    expect(result.t).toEqual([1, 2, 3, 5, 7.5, 10]);
    wanted.forEach((value, i) => expect(Math.abs(result.x[i]! / value - 1)).toBeLessThan(1e-9));
    expect(Math.abs(result.y.at(-1)! / (5 * Math.exp(1)) - 1)).toBeLessThan(1e-9);
    expect(result.pulses!.map(({ t, species }) => [t, species])).toEqual([
      [2, 'first'],
      [5, 'first'],
      [7.5, 'first'],
      [7.5, 'second']
    ]);
    expect(result.pulses![0]!.before - result.pulses![0]!.after).toBeCloseTo(30, 10);
  });

  it('agrees with another method on five culls of a coupled model', () => {
    const schedule = [6.55, 7.56, 8.56, 9.55, 10.55].map((t, i): Pulse => ({
      t,
      species: 'second',
      remove: 0.15 + 0.02 * i
    }));
    const result = simulate(goats, { start: { x: 1500, y: 1.5 }, span: [0, 11], samples: 23, rtol: 1e-10, schedule });
    const rhs = compile(goats).rhs;
    const out = new Float64Array(2);
    let state = [1500, 1.5];
    let from = 0;
    for (const stop of [...schedule.map(({ t }) => t), 11]) {
      const solver = new Solver(2);
      solver.relativeTolerance = 1e-12;
      solver.absoluteTolerance = 1e-12;
      const solved = solver.solve(
        (_, [x = 0, y = 0]) => {
          rhs(x, y, out);
          return [out[0]!, out[1]!];
        },
        from,
        state,
        stop
      );
      expect(solved.outcome).toBe(Outcome.Converged);
      state = solved.y;
      const pulse = schedule.find(({ t }) => t === stop);
      if (pulse) state[1] = state[1]! - pulse.remove!;
      from = stop;
    }
    expect(Math.abs(result.x.at(-1)! / state[0]! - 1)).toBeLessThan(1e-9);
    expect(Math.abs(result.y.at(-1)! / state[1]! - 1)).toBeLessThan(1e-9);
  });

  it('shows the state after a pulse at both ends of the span', () => {
    const schedule: Pulse[] = [
      { t: 0, species: 'first', remove: 10 },
      { t: 4, species: 'first', add: 5 }
    ];
    const result = simulate(logistic, { start: { x: 60, y: 1 }, span: [0, 4], times: [0, 4], schedule });
    expect(result.x[0]).toBe(50);
    expect(result.x[1]).toBeCloseTo(grown(50, 4) + 5, 5);
    const end = result.pulses!.at(-1)!;
    expect(result.x[1]).toBe(end.after);
  });

  it('crosses levels in the instant of a pulse, and a species taken to nothing has run out until it is added', () => {
    const schedule: Pulse[] = [
      { t: 1, species: 'first', remove: 1000 },
      { t: 3, species: 'first', add: 20 }
    ];
    const thresholds = [{ species: 'first', below: 30 } as const, { species: 'first', above: 15 } as const];
    const result = simulate(logistic, {
      start: { x: 60, y: 1 },
      span: [0, 4],
      times: [0, 1, 2, 3, 4],
      thresholds,
      schedule
    });
    expect(result.x.slice(1, 3)).toEqual([0, 0]);
    expect(result.x[4]).toBeCloseTo(grown(20, 1), 5);
    expect(result.events.map(({ t, kind, value }) => [t, kind, value])).toEqual([
      [1, 'fell below', 30],
      [1, 'ran out', 0],
      [3, 'rose above', 15]
    ]);
  });

  it('changes nothing when it is empty, nor when it adds nothing', () => {
    const plain = simulate(goats, { start: { x: 900, y: 1 }, span: [0, 30], samples: 7, rtol: 1e-10 });
    expect(simulate(goats, { start: { x: 900, y: 1 }, span: [0, 30], samples: 7, rtol: 1e-10, schedule: [] })).toEqual(
      plain
    );
    const idle = simulate(goats, {
      start: { x: 900, y: 1 },
      span: [0, 30],
      samples: 7,
      rtol: 1e-10,
      schedule: [{ t: 12.34, species: 'second', add: 0 }]
    });
    idle.x.forEach((value, i) => expect(Math.abs(value / plain.x[i]! - 1)).toBeLessThan(1e-9));
  });

  it('refuses acts outside the span, of no kind or of two', () => {
    const ask = (pulse: Omit<Pulse, 'species'>, span: [number, number] = [0, 4]) =>
      simulate(logistic, { start: { x: 60, y: 1 }, span, schedule: [{ species: 'first', ...pulse }] });
    expect(() => ask({ t: 5, add: 1 })).toThrow(RangeError);
    expect(() => ask({ t: 1 })).toThrow(RangeError);
    expect(() => ask({ t: 1, add: 1, remove: 1 })).toThrow(RangeError);
    expect(() => ask({ t: 1, remove: -1 })).toThrow(RangeError);
    expect(() => ask({ t: 1, removeShare: 1.2 })).toThrow(RangeError);
    expect(() => ask({ t: -1, add: 1 }, [0, -4])).toThrow(RangeError);
  });
});
