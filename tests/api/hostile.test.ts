import { beforeAll, describe, expect, it } from 'vitest';
import { EquilibriaAnswer, TrajectoryAnswer } from '$lib/contracts/answers';
import { Problem } from '$lib/contracts/problem';
import { buildUser, tokenOf } from '../harness/factories/people';
import { request, requestJson } from '../harness/request';

const logistic = (r: number, K: number) => ({ growth: { kind: 'logistic', r, K } });
const competition = (first: object, second: object, alpha12 = 0.7, alpha21 = 0.5) => ({
  interaction: 'competition',
  first,
  second,
  competition: { form: 'coefficients', alpha12, alpha21 }
});
const model = competition(logistic(0.9, 420), logistic(0.6, 310));
const cycling = {
  interaction: 'consumer-resource',
  first: logistic(0.7, 250),
  second: { mortality: 0.025 },
  feeding: { response: 'holling-2', a: 0.02, h: 15, e: 0.1 }
};
const run = { model, start: { x: 10, y: 5 }, span: [0, 100], samples: 201 };
const ANSWER_MS = 5_000;

let token: string;
beforeAll(async () => {
  token = await tokenOf((await buildUser()).id);
});

/** Sends a text as it is, and expects a 422 that says what and where. */
async function refused(address: string, body: unknown) {
  const { status, json } = await requestJson(address, { token, body });
  const problem = Problem.parse(json);
  expect([status, problem.status]).toEqual([422, 422]);
  return problem;
}

describe('the place of a complaint', () => {
  it('is a JSON pointer and a dotted path', async () => {
    const { errors } = await refused('/api/v1/equilibria', { model: competition(logistic(1, -3), logistic(1, 1)) });
    expect(errors).toEqual([
      { pointer: '/model/first/growth/K', path: 'model.first.growth.K', detail: expect.any(String) }
    ]);
  });

  it('escapes what a name of the sender’s may hold', async () => {
    const { errors } = await refused('/api/v1/equilibria', { model, 'a/b~c.d': 1 });
    expect(errors).toMatchObject([{ pointer: '/a~1b~0c.d', path: 'a/b~c.d' }]);
  });

  it('is a line and a column where the body is not JSON', async () => {
    const { errors, detail, code } = await refused('/api/v1/equilibria', '{\n  "model": NaN\n}');
    expect(code).toBe('input.notJson');
    expect(detail).toContain('line 2, column 12');
    expect(errors).toMatchObject([{ pointer: '', line: 2, column: 12 }]);
  });
});

describe('a body made to do harm', () => {
  it('cannot reach a prototype', async () => {
    for (const body of [
      '{"model": {"interaction": "competition", "__proto__": {"polluted": 1}}, "__proto__": {"polluted": 1}}',
      '{"model": {"interaction": "__proto__"}, "constructor": {"prototype": {"polluted": 1}}}',
      `{"model": ${JSON.stringify(model).replace('"first"', '"__proto__": {"polluted": 1}, "first"')}}`
    ]) {
      await refused('/api/v1/equilibria', body);
      expect('polluted' in {}).toBe(false);
    }
  });

  it('may be as deep as it likes', async () => {
    await refused('/api/v1/equilibria', '['.repeat(400_000) + ']'.repeat(400_000));
    await refused('/api/v1/equilibria', '['.repeat(400_000));
    await refused('/api/v1/equilibria', `{"model": ${'{"a":'.repeat(100_000)}1${'}'.repeat(100_000)}}`);
  });

  it('gets an answer no larger than a person can read', async () => {
    const fields = Array.from({ length: 80_000 }, (_, i) => `"k${i}": 1`).join(',');
    const times = { ...run, samples: undefined, times: Array.from({ length: 20_001 }, () => 7) };
    const long = { [`k${'x'.repeat(500_000)}`]: 1 };
    for (const [address, body] of [
      ['/api/v1/equilibria', `{${fields}}`],
      ['/api/v1/equilibria', long],
      ['/api/v1/trajectories', times],
      ['/api/v1/trajectories', `{"times": [${'"x",'.repeat(200_000)}1]}`]
    ] as const) {
      const response = await request(address, { token, body });
      expect(response.status).toBe(422);
      expect((await response.text()).length).toBeLessThan(30_000);
    }
  });
});

describe('numbers at the edge', () => {
  const models: [string, unknown][] = [
    ['rates of 1e-308', competition(logistic(1e-308, 1), logistic(1, 1))],
    ['a capacity of 1e308', competition(logistic(1, 1e308), logistic(1, 1))],
    ['rates 600 orders apart', competition(logistic(5e-324, 1e300), logistic(1e300, 1e-300), 1e200, 1e-200)],
    ['rates at the limits', competition(logistic(1e-50, 1e50), logistic(1e50, 1e-50), 1e50, 1e-50)],
    [
      'all that differs by 1e100',
      {
        interaction: 'consumer-resource',
        first: { growth: { kind: 'allee', r: 1e50, K: 1e50, A: 1e-50 }, removal: { quota: 1e50 }, stocking: 1e-50 },
        second: { growth: { kind: 'leslie', r: 1e-50, g: 1e50 }, removal: { quota: 1e-50 } },
        feeding: { response: 'holling-3', a: 1e50, h: 1e-50, e: 1e50, interference: 1e50 }
      }
    ],
    ['quotas beyond everything', competition({ ...logistic(1, 1), removal: { quota: 1e300 } }, logistic(1, 1))]
  ];
  it.each(models)('equilibria of %s: an answer or a reason, in time', async (_name, extreme) => {
    const from = performance.now();
    const { status, json } = await requestJson('/api/v1/equilibria', {
      token,
      body: { model: extreme, includeInfeasible: true }
    });
    expect(performance.now() - from).toBeLessThan(ANSWER_MS);
    expect([200, 422]).toContain(status);
    const schema = status === 200 ? EquilibriaAnswer : Problem;
    expect(schema.safeParse(json).error).toBeUndefined();
  });

  const thresholds = Array.from({ length: 8 }, (_, i) => ({ species: i % 2 ? 'first' : 'second', below: 10 + i }));
  const runs: [string, object, number | number[]][] = [
    ['no absolute tolerance', { atol: 0 }, 200],
    ['the least absolute tolerance', { atol: 5e-324 }, 200],
    [
      'no absolute tolerance under a quota',
      { atol: 0, model: { ...model, first: { ...model.first, removal: { quota: 90 } } } },
      200
    ],
    ['a span longer than numbers', { span: [-1e308, 1e308] }, 422],
    ['a huge span', { span: [0, 1e308] }, [200, 422]],
    ['a span of a few roundings', { span: [1e15, 1e15 + 4] }, 422],
    ['a span below numbers', { span: [0, 1e-320] }, 422],
    ['a span without length', { span: [3, 3] }, 422],
    ['a time twice', { samples: undefined, times: [0, 1, 1, 2] }, 422],
    ['times that turn back', { samples: undefined, times: [0, 2, 1] }, 422],
    ['times outside the span', { samples: undefined, times: [-1, 101] }, 422],
    ['a start of 1e308', { start: { x: 1e308, y: 1e308 } }, [200, 422]],
    ['a start of 5e-324', { start: { x: 5e-324, y: 5e-324 } }, [200, 422]],
    ['rates of 1e-308', { model: competition(logistic(1e-308, 1), logistic(1, 1)) }, 422],
    ['a fast cycle for ever', { model: cycling, span: [0, 1e7], samples: 20_001, rtol: 1e-13, thresholds }, [200, 422]],
    ['20 001 times and eight thresholds', { samples: 20_001, thresholds }, 200],
    ['a stiff model', { model: competition(logistic(1e12, 1), logistic(1e-12, 1)), span: [0, 1e12] }, [200, 422]]
  ];
  it.each(runs)('a path with %s: an answer or a reason, in time', async (_name, change, wanted) => {
    const from = performance.now();
    const { status, json } = await requestJson('/api/v1/trajectories', { token, body: { ...run, ...change } });
    expect(performance.now() - from).toBeLessThan(ANSWER_MS);
    expect([wanted].flat()).toContain(status);
    const schema = status === 200 ? TrajectoryAnswer : Problem;
    expect(schema.safeParse(json).error).toBeUndefined();
  });
});

describe('the theme', () => {
  it('never leads to another site', async () => {
    for (const referer of ['//elsewhere.example/x', '/.//elsewhere.example', '/\\elsewhere.example']) {
      const headers = {
        referer: `http://localhost:5173${referer}`,
        'content-type': 'application/x-www-form-urlencoded'
      };
      // The harness lets a redirect through as what it is: something thrown.
      const thrown = await request('/theme', { method: 'POST', body: 'theme=dark', headers }).then(
        () => null,
        (error: { location: string }) => error
      );
      expect(new URL(thrown!.location, 'http://localhost:5173').host).toBe('localhost:5173');
    }
  });
});
