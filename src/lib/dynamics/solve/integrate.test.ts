import { describe, expect, it } from 'vitest';
import { integrate } from './integrate';
import type { Rhs } from './problem';
import { ERROR_WEIGHTS, MATRIX, NODES, WEIGHTS } from './tableau';
import { RADAU_MATRIX, RADAU_NODES, STAGES } from './radauTableau';

/** dy/dt = r y (1 - y/K): closed form below. */
const r = 0.9;
const K = 3;
const logistic: Rhs = (_, y, out) => {
  out[0] = r * y[0]! * (1 - y[0]! / K);
};
const logisticAt = (t: number, y0: number): number => (K * y0) / (y0 + (K - y0) * Math.exp(-r * t));

const circle: Rhs = (_, y, out) => {
  out[0] = -y[1]!;
  out[1] = y[0]!;
};

const sum = (list: readonly number[]): number => list.reduce((a, b) => a + b, 0);
const dot = (a: readonly number[], b: readonly number[]): number => sum(a.map((v, i) => v * (b[i] ?? 0)));

describe('the explicit tableau', () => {
  it('has rows that sum to their nodes and weights that sum to one', () => {
    MATRIX.forEach((row, i) => expect(sum(row)).toBeCloseTo(NODES[i]!, 14));
    expect(sum(WEIGHTS)).toBeCloseTo(1, 14);
    expect(sum(ERROR_WEIGHTS)).toBeCloseTo(0, 14);
  });

  it('meets the quadrature conditions of order 5, and its comparison those of order 4', () => {
    const comparison = WEIGHTS.map((b, i) => b - ERROR_WEIGHTS[i]!);
    for (let k = 1; k <= 5; k++) {
      const moments = NODES.map((c) => c ** (k - 1));
      expect(dot(WEIGHTS, moments)).toBeCloseTo(1 / k, 13);
      if (k <= 4) expect(dot(comparison, moments)).toBeCloseTo(1 / k, 13);
      else expect(Math.abs(dot(comparison, moments) - 1 / k)).toBeGreaterThan(1e-4);
    }
  });

  it('meets the conditions on nested sums', () => {
    const ac = MATRIX.map((row) => dot(row, NODES));
    const ac2 = MATRIX.map((row) =>
      dot(
        row,
        NODES.map((c) => c * c)
      )
    );
    const aac = MATRIX.map((row) => dot(row, ac));
    expect(dot(WEIGHTS, ac)).toBeCloseTo(1 / 6, 13);
    expect(
      dot(
        WEIGHTS,
        NODES.map((c, i) => c * ac[i]!)
      )
    ).toBeCloseTo(1 / 8, 13);
    expect(dot(WEIGHTS, ac2)).toBeCloseTo(1 / 12, 13);
    expect(dot(WEIGHTS, aac)).toBeCloseTo(1 / 24, 13);
    expect(
      dot(
        WEIGHTS,
        MATRIX.map((row) => dot(row, aac))
      )
    ).toBeCloseTo(1 / 120, 13);
    expect(
      dot(
        WEIGHTS,
        ac.map((v) => v * v)
      )
    ).toBeCloseTo(1 / 20, 13);
  });
});

describe('the implicit tableau', () => {
  it('integrates polynomials exactly: degree 4 to every node, degree 8 over the step', () => {
    for (let k = 1; k <= 9; k++) {
      const moments = RADAU_NODES.map((c) => c ** (k - 1));
      for (let i = 0; i < STAGES; i++) {
        const row = RADAU_MATRIX.slice(i * STAGES, (i + 1) * STAGES);
        if (k <= STAGES || i === STAGES - 1) expect(dot(row, moments)).toBeCloseTo(RADAU_NODES[i]! ** k / k, 13);
      }
    }
  });
});

/** Largest error at the steps, and inside them, for a step of 1/2^j on logistic growth. */
function errorsAt(h: number, method: 'dormand-prince' | 'radau'): { end: number; inside: number } {
  const solution = integrate(
    { rhs: logistic, y0: [0.2], span: [0, 8] },
    { method, fixedStep: h, dense: true, rtol: 1e-12, atol: 1e-12 }
  );
  let end = 0;
  solution.t.forEach((t, i) => (end = Math.max(end, Math.abs(solution.y[i]! - logisticAt(t, 0.2)))));
  let inside = 0;
  const out = new Float64Array(1);
  for (let i = 0; i < 4001; i++) {
    const t = (8 * i) / 4000;
    solution.at?.(t, out);
    inside = Math.max(inside, Math.abs(out[0]! - logisticAt(t, 0.2)));
  }
  return { end, inside };
}

describe('measured order', () => {
  it('is five for the explicit steps and at least four inside them', () => {
    const sizes = [0.5, 0.25, 0.125, 0.0625];
    const errors = sizes.map((h) => errorsAt(h, 'dormand-prince'));
    for (let i = 1; i < sizes.length; i++) {
      const steps = Math.log2(errors[i - 1]!.end / errors[i]!.end);
      expect(steps).toBeGreaterThan(4.8);
      expect(steps).toBeLessThan(5.5);
      expect(Math.log2(errors[i - 1]!.inside / errors[i]!.inside)).toBeGreaterThan(4);
    }
  });

  it('is nine for the implicit steps', () => {
    const errors = [1, 0.5].map((h) => errorsAt(h, 'radau'));
    const order = Math.log2(errors[0]!.end / errors[1]!.end);
    expect(order).toBeGreaterThan(8);
    expect(order).toBeLessThan(10.5);
    expect(Math.log2(errors[0]!.inside / errors[1]!.inside)).toBeGreaterThan(5);
  });
});

describe('integrate', () => {
  it('keeps the error within some tens of tolerances, forwards and backwards', () => {
    for (const rtol of [1e-5, 1e-8, 1e-11]) {
      const there = integrate({ rhs: circle, y0: [1, 0], span: [0, 20] }, { rtol, atol: rtol });
      expect(there.outcome.status).toBe('reached');
      expect(Math.abs(there.yEnd[0]! - Math.cos(20))).toBeLessThan(60 * rtol);
      const back = integrate({ rhs: circle, y0: there.yEnd, span: [20, 0] }, { rtol, atol: rtol });
      expect(Math.hypot(back.yEnd[0]! - 1, back.yEnd[1]!)).toBeLessThan(120 * rtol);
    }
  });

  it('gives the states asked for, both ends included, and any time when dense', () => {
    const times = [0, 0, 1.5, 3, 20];
    const s = integrate({ rhs: circle, y0: [1, 0], span: [0, 20] }, { rtol: 1e-10, atol: 1e-10, times, dense: true });
    expect([...s.t]).toEqual(times);
    times.forEach((t, i) => expect(s.y[2 * i]).toBeCloseTo(Math.cos(t), 8));
    const out = new Float64Array(2);
    s.at?.(7.77, out);
    expect(out[0]).toBeCloseTo(Math.cos(7.77), 8);
    expect(() => s.at?.(20.1, out)).toThrow(RangeError);
  });

  it('serves more than two components', () => {
    const chain: Rhs = (_, y, out) => {
      for (let i = 0; i < 7; i++) out[i] = (i === 0 ? 0 : y[i - 1]!) - y[i]!;
    };
    const s = integrate({ rhs: chain, y0: [1, 0, 0, 0, 0, 0, 0], span: [0, 3] }, { rtol: 1e-10, atol: 1e-12 });
    let expected = Math.exp(-3);
    for (let i = 0; i < 7; i++) {
      expect(s.yEnd[i]).toBeCloseTo(expected, 9);
      expected *= 3 / (i + 1);
    }
  });

  it('follows time in the right-hand side', () => {
    const forced: Rhs = (t, y, out) => {
      out[0] = Math.cos(t) * y[0]!;
    };
    for (const method of ['dormand-prince', 'radau'] as const) {
      const s = integrate({ rhs: forced, y0: [1], span: [0, 10] }, { rtol: 1e-10, atol: 1e-12, method });
      expect(s.yEnd[0]).toBeCloseTo(Math.exp(Math.sin(10)), 7);
    }
  });

  it('says where it stopped when a budget runs out', () => {
    const few = integrate({ rhs: circle, y0: [1, 0], span: [0, 1e6] }, { maxSteps: 100 });
    expect(few.outcome).toMatchObject({ status: 'failed', reason: 'tooManySteps' });
    expect(few.steps.accepted + few.steps.rejected).toBe(100);
    let asked = 0;
    const stopped = integrate({ rhs: circle, y0: [1, 0], span: [0, 1e6] }, { shouldStop: () => ++asked > 3 });
    expect(stopped.outcome).toMatchObject({ status: 'failed', reason: 'budget' });
    expect(stopped.steps.accepted).toBeGreaterThan(500);
    expect(stopped.steps.accepted).toBeLessThan(1100);
  });

  it('reports a solution that runs to infinity in finite time, with the time', () => {
    const explosion: Rhs = (_, y, out) => {
      out[0] = y[0]! * y[0]!;
    };
    const s = integrate({ rhs: explosion, y0: [1], span: [0, 2] });
    expect(s.outcome.status).toBe('failed');
    expect(s.tEnd).toBeGreaterThan(0.99);
    expect(s.tEnd).toBeLessThan(1.0001);
    expect(s.y.every(Number.isFinite)).toBe(true);
  });

  it('takes a span of no length and refuses one that is not a number', () => {
    const s = integrate({ rhs: circle, y0: [1, 0], span: [2, 2] }, { times: [2] });
    expect(s.outcome.status).toBe('reached');
    expect([...s.y]).toEqual([1, 0]);
    expect(() => integrate({ rhs: circle, y0: [1, 0], span: [0, NaN] })).toThrow(RangeError);
    expect(() => integrate({ rhs: circle, y0: [1, 0], span: [0, 1] }, { rtol: -1 })).toThrow(RangeError);
  });
});

describe('stiffness', () => {
  /** y follows cos t within 1/lambda. */
  const follower =
    (lambda: number): Rhs =>
    (t, y, out) => {
      out[0] = -lambda * (y[0]! - Math.cos(t)) - Math.sin(t);
    };

  it('is said, and met with implicit steps when it would cost very many', () => {
    for (const rtol of [1e-6, 1e-9, 1e-12]) {
      const s = integrate({ rhs: follower(1e5), y0: [2], span: [0, 50] }, { rtol, atol: rtol });
      expect(s.stiff).toBe(true);
      expect(s.method).toBe('radau');
      expect(s.steps.accepted).toBeLessThan(3000);
      expect(Math.abs(s.yEnd[0]! - Math.cos(50))).toBeLessThan(10 * rtol);
    }
  });

  it('is not claimed for a system that has merely settled', () => {
    const s = integrate({ rhs: logistic, y0: [0.1], span: [0, 400] });
    expect(s.stiff).toBe(false);
    expect(s.method).toBe('dormand-prince');
  });

  it('is survived by either method', () => {
    for (const method of ['dormand-prince', 'radau'] as const) {
      const s = integrate({ rhs: follower(500), y0: [2], span: [0, 10] }, { rtol: 1e-9, atol: 1e-9, method });
      expect(s.yEnd[0]).toBeCloseTo(Math.cos(10), 7);
    }
  });
});
