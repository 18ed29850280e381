import { describe, expect, it } from 'vitest';
import { integrate } from './integrate';
import type { EventSpec, Rhs } from './problem';

/** The event functions below are functions of time alone, so that every time is known exactly. */
const clock: Rhs = (_, __, out) => {
  out[0] = 1;
};
const event = (value: (t: number) => number, direction: -1 | 0 | 1 = 0, terminal = false): EventSpec => ({
  value,
  direction,
  terminal
});
const run = (events: EventSpec[], span: [number, number] = [0, 10], maxStep = Infinity) =>
  integrate({ rhs: clock, y0: [span[0]], span, events }, { maxStep });

describe('events', () => {
  it('are located to 1e-10, in order, in both directions of time', () => {
    const zeros = [1, 2, 3, 4, 5, 6].map((k) => (k * Math.PI) / 2).filter((t) => t < 10);
    const events = [event((t) => Math.sin(t)), event((t) => Math.cos(t))];
    const forwards = run(events, [0, 10], 0.5).events.map((e) => e.t);
    expect(forwards).toHaveLength(zeros.length);
    forwards.forEach((t, i) => expect(Math.abs(t - zeros[i]!)).toBeLessThan(1e-10));
    const backwards = run(events, [10, 0.5], 0.5).events.map((e) => e.t);
    expect(backwards).toHaveLength(zeros.length);
    backwards.forEach((t, i) => expect(Math.abs(t - zeros[zeros.length - 1 - i]!)).toBeLessThan(1e-10));
  });

  it('are found when several fall into one step', () => {
    const found = run([event((t) => t - 3), event((t) => t - 2), event((t) => (t - 1) * (t - 9))]).events;
    expect(found.map((e) => Math.round(e.t))).toEqual([1, 2, 3, 9]);
  });

  it('keep both sides of a dip inside one step', () => {
    const found = run([event((t) => (t - 4.1) ** 2 - 1e-4)]).events;
    expect(found).toHaveLength(2);
    expect(found[0]!.t).toBeCloseTo(4.09, 9);
    expect(found[1]!.t).toBeCloseTo(4.11, 9);
  });

  it('do not fire where a function touches zero and turns back', () => {
    expect(run([event((t) => (t - 4) ** 2)], [0, 10], 0.5).events).toHaveLength(0);
    expect(run([event((t) => (t - 4) ** 2 + 1e-9)], [0, 10], 0.5).events).toHaveLength(0);
  });

  it('respect the direction asked for', () => {
    const wave = (t: number): number => Math.sin(t);
    expect(run([event(wave, -1)], [0, 10], 0.5).events.map((e) => e.t.toFixed(6))).toEqual(['3.141593', '9.424778']);
    expect(run([event(wave, 1)], [0, 10], 0.5).events.map((e) => e.t.toFixed(6))).toEqual(['6.283185']);
  });

  it('do not count a start at zero, which has crossed nothing yet', () => {
    const found = run([event((t) => t, 0, true), event((t) => t * (t - 5), 0)]).events;
    expect(found).toHaveLength(1);
    expect(found[0]!.t).toBeCloseTo(5, 10);
  });

  it('count a crossing that falls exactly on the end of a step or of the span', () => {
    const hits = run([event((t) => t - 5)], [0, 10], 1).events;
    expect(hits).toHaveLength(1);
    expect(hits[0]!.t).toBeCloseTo(5, 10);
    expect(run([event((t) => t - 10, 1, true)]).outcome).toMatchObject({ status: 'event', t: 10 });
  });

  it('may be looked at between steps only, and are located as well', () => {
    const wave: EventSpec = { ...event((t) => Math.sin(t), -1), betweenSteps: true };
    const found = run([wave], [0, 10], 0.5).events.map((e) => e.t);
    expect(found).toHaveLength(2);
    found.forEach((t, i) => expect(Math.abs(t - Math.PI * (2 * i + 1))).toBeLessThan(1e-10));
    const stop: EventSpec = { ...event((t) => t - 7, 1, true), betweenSteps: true };
    expect(run([stop]).tEnd).toBeCloseTo(7, 10);
  });

  it('stop the integration when terminal, with nothing recorded beyond', () => {
    const s = integrate(
      { rhs: clock, y0: [0], span: [0, 10], events: [event((t) => t - 7), event((t) => t - Math.PI, 1, true)] },
      { times: [0, 1, 2, 3, 4, 5] }
    );
    expect(s.outcome).toMatchObject({ status: 'event', event: 1 });
    expect(Math.abs(s.tEnd - Math.PI)).toBeLessThan(1e-10);
    expect([...s.t]).toEqual([0, 1, 2, 3]);
    expect(s.events).toHaveLength(1);
  });

  it('locate a crossing of an oscillator through dense output', () => {
    const circle: Rhs = (_, y, out) => {
      out[0] = -y[1]!;
      out[1] = y[0]!;
    };
    const s = integrate(
      {
        rhs: circle,
        y0: [1, 0],
        span: [0, 100],
        events: [{ value: (_, y) => y[0]!, direction: -1, terminal: false }]
      },
      { rtol: 1e-12, atol: 1e-13 }
    );
    expect(s.events).toHaveLength(16);
    s.events.forEach((e, k) => expect(Math.abs(e.t - (Math.PI / 2 + 2 * Math.PI * k))).toBeLessThan(1e-9));
  });
});
