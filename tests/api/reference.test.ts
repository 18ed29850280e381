/** Every case with a known answer, asked through the API as a program would ask it. */
import { beforeAll, describe, expect, it } from 'vitest';
import { EquilibriaAnswer, TrajectoryAnswer } from '$lib/contracts/answers';
import type { EquilibriaReport } from '$lib/dynamics';
import { buildSomeone, buildToken } from '../harness/factories/actors';
import { requestJson } from '../harness/request';
import equilibria from '../reference/equilibria.json';
import { expectEquilibria, type EquilibriaCase } from '../reference/expectEquilibria';
import published from '../reference/published.json';
import { limitCycleCase, trajectoryCases, type TrajectoryCase } from '../reference/trajectoryCases';

let token: string;
beforeAll(async () => {
  token = await buildToken((await buildSomeone(null)).userId);
});

/** Three of the published examples state formulas and orbits rather than a list of points; they follow below. */
const stationary = [...equilibria.cases, ...published.cases].filter(
  (testCase) => 'equilibria' in testCase
) as unknown as EquilibriaCase[];

describe('POST /api/v1/equilibria on cases with exact and published answers', () => {
  it.each(stationary.map((testCase) => [testCase.id, testCase.title, testCase] as const))(
    '%s %s',
    async (_id, _title, testCase) => {
      const { status, json } = await requestJson('/api/v1/equilibria', {
        token,
        body: { model: testCase.document }
      });
      expect([status, json.detail]).toEqual([200, undefined]);
      expect(EquilibriaAnswer.safeParse(json).error).toBeUndefined();
      expectEquilibria(testCase, json as unknown as EquilibriaReport);
    }
  );
});

interface Path {
  t: number[];
  x: number[];
  y: number[];
  events: { t: number; species: string; kind: string; value: number }[];
  crossCheck: { largestRelativeDifference: number | null; reason: string | null };
}

function questionOf(c: TrajectoryCase) {
  const last = Math.max(...c.times, ...c.events.map((event) => event.t + 1));
  const rtol = c.tolerance.state ?? c.tolerance.logState ?? 1e-8;
  return {
    model: c.document,
    start: c.start,
    span: [0, last],
    ...(c.times.length > 0 ? { times: c.times } : { samples: 2 }),
    rtol,
    atol: 1e-10,
    thresholds: c.events
      .filter(({ level }) => level > 0)
      .map(({ species, direction, level }) => ({ species, [direction === 'up' ? 'above' : 'below']: level }))
  };
}

describe('POST /api/v1/trajectories on paths with known answers', () => {
  it.each(trajectoryCases.map((testCase) => [testCase.id, testCase.title, testCase] as const))(
    '%s %s',
    async (_id, _title, c) => {
      const { status, json } = await requestJson<Path & { detail?: string }>('/api/v1/trajectories', {
        token,
        body: questionOf(c)
      });
      expect([status, json.detail]).toEqual([200, undefined]);
      expect(TrajectoryAnswer.safeParse(json).error).toBeUndefined();
      if (c.times.length > 0) expect(json.t).toEqual(c.times);
      c.states.forEach(([x, y], i) => {
        const { state, logState } = c.tolerance;
        for (const [found, wanted] of [
          [json.x[i]!, x],
          [json.y[i]!, y]
        ] as const) {
          if (state !== null) expect(Math.abs(found - wanted)).toBeLessThanOrEqual(state * Math.abs(wanted));
          if (logState !== null) expect(Math.abs(Math.log(found / wanted))).toBeLessThanOrEqual(logState);
        }
      });
      for (const wanted of c.events) {
        const kind = wanted.level === 0 ? 'ran out' : wanted.direction === 'up' ? 'rose above' : 'fell below';
        const first = json.events.find(
          (event) => event.species === wanted.species && event.kind === kind && event.value === wanted.level
        );
        expect(Math.abs((first?.t ?? Number.NaN) - wanted.t)).toBeLessThanOrEqual(c.tolerance.eventTime ?? 1e-8);
      }
      // The other method is explicit: where rates differ a thousandfold it may give up, and must then say why.
      const { largestRelativeDifference, reason } = json.crossCheck;
      if (largestRelativeDifference === null) expect([c.id, reason]).toEqual(['S-TR-05', expect.any(String)]);
      else expect(largestRelativeDifference).toBeLessThan(1e-6);
    }
  );

  it(`${limitCycleCase.id} returns to its start after one period`, async () => {
    const { document, pointX, pointY, period } = limitCycleCase;
    const { status, json } = await requestJson<Path>('/api/v1/trajectories', {
      token,
      body: { model: document, start: { x: pointX, y: pointY }, span: [0, period], samples: 4001, rtol: 1e-10 }
    });
    expect(status).toBe(200);
    const { extremes, means } = limitCycleCase.tolerance;
    const within = (found: number, wanted: number, tolerance: number) =>
      expect(Math.abs(found / wanted - 1)).toBeLessThan(tolerance);
    within(json.x.at(-1)!, pointX, 1e-5);
    within(json.y.at(-1)!, pointY, 1e-5);
    within(Math.max(...json.x), limitCycleCase.xMax, Math.max(extremes, 1e-4));
    const mean = (values: number[]) =>
      values.reduce((sum, value, i) => sum + value * (i === 0 || i === values.length - 1 ? 0.5 : 1), 0) /
      (values.length - 1);
    within(mean(json.x), limitCycleCase.xMean, Math.max(means, 1e-4));
    within(mean(json.y), limitCycleCase.yMean, Math.max(means, 1e-4));
  });
});

async function reportOf(model: unknown): Promise<EquilibriaReport> {
  const { status, json } = await requestJson('/api/v1/equilibria', { token, body: { model } });
  expect(status).toBe(200);
  return json as unknown as EquilibriaReport;
}
const inside = ({ equilibria: points }: EquilibriaReport) => points.find(({ x, y }) => x > 0 && y > 0);
const near = (found: number | null | undefined, wanted: number, tolerance: number) =>
  expect(Math.abs((found ?? Number.NaN) / wanted - 1)).toBeLessThanOrEqual(tolerance);
const named = (id: string) => {
  const found = published.cases.find((testCase) => testCase.id === id);
  if (!found?.values) throw new Error(`no published example ${id}`);
  return { document: found.document, values: found.values };
};

describe('published orbits and formulas', () => {
  it('PUB-06 Shih 2005: period, extremes and conserved quantity of a closed orbit', async () => {
    const { document, values } = named('PUB-06');
    const centre = inside(await reportOf(document));
    expect(centre).toMatchObject({ class: 'centre', stability: 'neutral' });
    near(centre?.x, 60, 1e-9);
    near(centre?.y, 40, 1e-9);
    near(centre?.period, values.small_amplitude_period ?? 0, 1e-9);

    const period = values.period ?? 0;
    const path = async (span: number, samples: number) =>
      (
        await requestJson<Path>('/api/v1/trajectories', {
          token,
          body: { model: document, start: { x: values.N_max, y: 40 }, span: [0, span], samples, rtol: 1e-11 }
        })
      ).json;
    const turn = await path(period, 20_001);
    near(turn.x.at(-1), values.N_max ?? 0, 1e-9);
    near(turn.y.at(-1), 40, 1e-9);
    // Samples miss an extreme by at most the square of their spacing.
    near(Math.min(...turn.x), values.N_min ?? 0, 1e-6);
    near(Math.max(...turn.y), values.P_max ?? 0, 1e-6);
    near(Math.min(...turn.y), values.P_min ?? 0, 1e-6);

    const long = await path(100 * period, 101);
    const conserved = long.x.map(
      (n, i) => 0.25 * 0.02 * n - 0.3 * Math.log(n) + 0.02 * long.y[i]! - 0.8 * Math.log(long.y[i]!)
    );
    for (const value of conserved) near(value, values.conserved_quantity ?? 0, 1e-6);
  });

  it('PUB-07 Carpenter 2018: what the posterior means of hare and lynx imply', async () => {
    const { document, values } = named('PUB-07');
    const centre = inside(await reportOf(document));
    near(centre?.x, values.equilibrium?.[0] ?? 0, 1e-9);
    near(centre?.y, values.equilibrium?.[1] ?? 0, 1e-9);
    near(centre?.period, values.small_amplitude_period_years ?? 0, 1e-9);
  });

  it('PUB-08 Rosenzweig 1971: persistence and onset of cycles as formulas', async () => {
    const { document, values } = named('PUB-08');
    const at = (K: number) => reportOf({ ...document, first: { growth: { kind: 'logistic', r: 1, K } } });
    const [nStar, kHopf] = [values.N_star ?? 0, values.K_hopf ?? 0];
    expect(inside(await at(nStar * 0.99))).toBeUndefined();
    for (const K of [nStar * 1.01, 40, 59, 61, 150]) {
      const found = inside(await at(K));
      near(found?.x, nStar, 1e-10);
      near(found?.y, (1 / 0.1) * (1 - nStar / K) * (1 + 0.1 * 0.5 * nStar), 1e-10);
      expect([K, found?.stability]).toEqual([K, K < kHopf ? 'stable' : 'unstable']);
    }
    const onset = inside(await at(kHopf));
    expect(onset).toMatchObject({
      class: 'non-hyperbolic',
      stability: 'stable',
      decidedBy: 'first Lyapunov coefficient'
    });
    near(onset?.period, values.period_at_hopf ?? 0, 1e-10);
  });
});
