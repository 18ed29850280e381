import { beforeAll, describe, expect, it } from 'vitest';
import { Problem } from '$lib/contracts/problem';
import { ThresholdsAnswer } from '$lib/contracts/thresholds';
import { buildSomeone, buildToken } from '../harness/factories/actors';
import { request, requestJson } from '../harness/request';
import { thresholdCases } from '../reference/thresholdCases';

const ADDRESS = '/api/v1/thresholds';
const model = {
  interaction: 'consumer-resource',
  first: { growth: { kind: 'logistic', r: 1, K: 100 } },
  second: { mortality: 0.2 },
  feeding: { response: 'holling-1', a: 0.02, e: 0.25 }
};
const question = { model, parameter: 'first.removal.effort', range: [0, 1.5] };

let token: string;
let reading: string;
beforeAll(async () => {
  const someone = await buildSomeone(null);
  token = await buildToken(someone.userId);
  reading = await buildToken(someone.userId, ['read']);
});

interface Refused {
  code: string;
  detail: string;
  errors?: { path: string }[];
}

async function refused(body: unknown): Promise<Refused> {
  const { status, headers, json } = await requestJson<Refused>(ADDRESS, { token, body: body as object });
  expect([status, headers.get('content-type')]).toEqual([422, 'application/problem+json']);
  expect(Problem.safeParse(json).error).toBeUndefined();
  return json;
}

describe('POST /api/v1/thresholds', () => {
  it('answers nobody and a wrong token with 401', async () => {
    expect((await request(ADDRESS, { body: question })).status).toBe(401);
    expect((await request(ADDRESS, { body: question, token: 'sdg_nonsense' })).status).toBe(401);
  });

  const bad: [string, object, string][] = [
    ['an unknown parameter', { parameter: 'first.growth.A' }, 'parameter'],
    ['a parameter of another shape of model', { parameter: 'competition.alpha12' }, 'parameter'],
    ['a path that is no number', { parameter: 'first.growth' }, 'parameter'],
    ['a path into the language', { parameter: '__proto__.x' }, 'parameter'],
    ['no parameter', { parameter: undefined }, 'parameter'],
    ['a range that ends before it starts', { range: [1, 0] }, 'range.1'],
    ['a range without length', { range: [1, 1] }, 'range.1'],
    ['a range that starts where there is no model', { range: [-1, 1] }, 'range.0'],
    ['a range that ends where there is no model', { parameter: 'first.growth.K', range: [-2, -1] }, 'range.0'],
    ['one value', { range: [1] }, 'range'],
    ['words for numbers', { range: ['0', 1] }, 'range.0'],
    ['no range', { range: undefined }, 'range'],
    ['no model', { model: undefined }, 'model'],
    ['a model with a hole', { model: { ...model, second: {} } }, 'model.second'],
    [
      'a field that is missing elsewhere',
      { model: { ...model, feeding: { response: 'holling-1', e: 1 } } },
      'model.feeding.a'
    ],
    ['an unknown field', { steps: 10 }, 'steps']
  ];
  it.each(bad)('refuses %s by its path', async (_name, change, at) => {
    const { code, errors } = await refused({ ...question, ...change });
    expect(code).toBe('input.invalid');
    expect((errors ?? []).map(({ path }) => path)).toContain(at);
  });

  it('names the parameters there are', async () => {
    expect((await refused({ ...question, parameter: 'effort' })).detail).toContain('first.removal.effort');
  });

  it('answers as it describes, also a token that may only read', async () => {
    for (const one of [token, reading]) {
      const { status, json } = await requestJson(ADDRESS, { token: one, body: question });
      expect(status).toBe(200);
      expect(ThresholdsAnswer.safeParse(json).error).toBeUndefined();
    }
  });

  it.each(thresholdCases.map((testCase) => [testCase.id, testCase.title, testCase] as const))(
    '%s %s',
    async (_id, _title, { document, parameter, range, wanted }) => {
      const { status, json } = await requestJson(ADDRESS, { token, body: { model: document, parameter, range } });
      expect([status, json.detail]).toEqual([200, undefined]);
      const answer = ThresholdsAnswer.parse(json);
      expect(answer.complete).toBe(true);
      expect(answer.thresholds.map(({ kind, criticality }) => [kind, criticality])).toEqual(
        wanted.map(({ kind, criticality }) => [kind, criticality])
      );
      wanted.forEach(({ value }, i) => expect(Math.abs(answer.thresholds[i]!.value / value - 1)).toBeLessThan(1e-8));
      for (const { parameter: values, x, y, stable } of answer.branches) {
        expect(new Set([values.length, x.length, y.length, stable.length]).size).toBe(1);
        expect(Math.min(...values, range[0])).toBe(range[0]);
        expect(Math.max(...values, range[1])).toBe(range[1]);
        expect(Math.min(...x, ...y, 0)).toBe(0);
      }
    }
  );

  it('needs no value for the number that is swept', async () => {
    const swept = { interaction: 'competition', first: { growth: { kind: 'logistic', r: 1.2, K: 100 } } };
    const body = {
      model: {
        ...swept,
        second: { growth: { kind: 'logistic', r: 0.8, K: 80 } },
        competition: { form: 'coefficients', alpha21: 0.5 }
      },
      parameter: 'competition.alpha12',
      range: [0, 2]
    };
    const { status, json } = await requestJson<{ thresholds: { value: number }[] }>(ADDRESS, { token, body });
    expect(status).toBe(200);
    expect(json.thresholds.map(({ value }) => value)).toEqual([expect.closeTo(1.25, 10)]);
    const starved = { ...question, model: { ...model, second: {} }, parameter: 'second.mortality', range: [0.07, 0.9] };
    expect((await request(ADDRESS, { token, body: starved })).status).toBe(200);
  });
});
