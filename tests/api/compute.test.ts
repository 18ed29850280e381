import Papa from 'papaparse';
import { beforeAll, describe, expect, it } from 'vitest';
import { EquilibriaAnswer, TrajectoryAnswer } from '$lib/contracts/answers';
import { Problem } from '$lib/contracts/problem';
import { startSession } from '$lib/server/auth/sessions';
import { buildSomeone, buildToken } from '../harness/factories/actors';
import { ORIGIN, request, requestJson } from '../harness/request';

const competition = {
  interaction: 'competition',
  first: { growth: { kind: 'logistic', r: 0.9, K: 420 }, removal: { effort: 0, quota: 0 }, stocking: 0 },
  second: { growth: { kind: 'logistic', r: 0.6, K: 310 } },
  competition: { form: 'coefficients', alpha12: 0.7, alpha21: 0.5 }
};
const consumer = {
  interaction: 'consumer-resource',
  first: { growth: { kind: 'logistic', r: 1.4, K: 900 } },
  second: { mortality: 0.35, selfLimitation: 0 },
  feeding: { response: 'holling-2', a: 0.02, h: 0.6, e: 0.12, interference: 0 }
};
const path = { model: competition, start: { x: 10, y: 5 }, span: [0, 100], samples: 201 };

let token: string;
let reading: string;
let cookie: string;
beforeAll(async () => {
  const someone = await buildSomeone(null);
  token = await buildToken(someone.userId);
  reading = await buildToken(someone.userId, ['read']);
  const session = await startSession(someone.userId, { ip: '127.0.0.1', userAgent: 'test' });
  cookie = `${session.name}=${session.value}`;
});

interface Refused {
  status: number;
  code: string;
  detail: string;
  errors?: { pointer: string; path: string; detail: string; line?: number; column?: number }[];
}

/** Asks and expects a problem document of that status. */
async function refused(address: string, asked: Parameters<typeof request>[1], status: number): Promise<Refused> {
  const answer = await requestJson<Refused>(address, { token, ...asked });
  expect([answer.status, answer.json.detail]).toEqual([status, expect.any(String)]);
  expect(answer.headers.get('content-type')).toContain('application/problem+json');
  expect(Problem.safeParse(answer.json).error).toBeUndefined();
  return answer.json;
}
const paths = ({ errors }: Refused) => (errors ?? []).map(({ path: at }) => at);

describe('who may compute', () => {
  for (const [address, body] of [
    ['/api/v1/equilibria', { model: competition }],
    ['/api/v1/trajectories', path]
  ] as const) {
    it(`${address}: 401 for nobody and for a wrong token, 403 for another site, 200 for token and session`, async () => {
      expect((await request(address, { body })).status).toBe(401);
      expect((await request(address, { body, token: 'sdg_nonsense' })).status).toBe(401);
      const foreign = { origin: 'https://elsewhere.example' };
      expect((await request(address, { body, cookie, headers: foreign })).status).toBe(403);
      expect((await request(address, { body, cookie, headers: { origin: ORIGIN } })).status).toBe(200);
      expect((await request(address, { body, token })).status).toBe(200);
      // Computing changes nothing, so a token that may only read may ask.
      expect((await request(address, { body, token: reading })).status).toBe(200);
    });
  }
});

describe('POST /api/v1/equilibria', () => {
  it('answers as it describes, for both interactions', async () => {
    for (const model of [competition, consumer]) {
      const { status, json } = await requestJson('/api/v1/equilibria', { token, body: { model } });
      expect(status).toBe(200);
      expect(EquilibriaAnswer.safeParse(json).error).toBeUndefined();
      expect(json).toMatchObject({ continua: [], absorbing: [], complete: true, engine: '1.0.0' });
    }
    const { json } = await requestJson<{ equilibria: unknown[] }>('/api/v1/equilibria', {
      token,
      body: { model: competition }
    });
    expect(json.equilibria[0]).toMatchObject({
      x: 0,
      y: 0,
      jacobian: [
        [0.9, 0],
        [0, 0.6]
      ],
      trace: 1.5,
      class: 'unstable node',
      returnTime: null,
      period: null
    });
  });

  it('lists points that are not feasible only when asked', async () => {
    const model = { ...competition, competition: { form: 'coefficients', alpha12: 1.5, alpha21: 0.2 } };
    const count = async (extra: object) =>
      (
        await requestJson<{ equilibria: { feasible: boolean }[] }>('/api/v1/equilibria', {
          token,
          body: { model, ...extra }
        })
      ).json.equilibria.filter(({ feasible }) => !feasible).length;
    expect(await count({})).toBe(0);
    expect(await count({ includeInfeasible: true })).toBe(1);
  });

  const bad: [string, unknown, string][] = [
    ['a negative K', with_(competition, 'first.growth.K', -3), 'model.first.growth.K'],
    ['a zero K', with_(competition, 'first.growth.K', 0), 'model.first.growth.K'],
    ['no K for a logistic', with_(competition, 'first.growth.K', undefined), 'model.first.growth.K'],
    ['a rate as text', with_(competition, 'first.growth.r', '0.9'), 'model.first.growth.r'],
    ['a negative coefficient', with_(competition, 'competition.alpha12', -0.1), 'model.competition.alpha12'],
    [
      'coefficients with exponential growth',
      with_(competition, 'first.growth', { kind: 'exponential', r: 0.4 }),
      'model.first.growth.kind'
    ],
    ['an unknown field', with_(competition, 'first.carryingCapacity', 5), 'model.first.carryingCapacity'],
    ['an unknown kind', with_(competition, 'first.growth.kind', 'gompertz'), 'model.first.growth.kind'],
    ['an unknown interaction', with_(competition, 'interaction', 'mutualism'), 'model.interaction'],
    [
      'an Allee threshold above K',
      with_(consumer, 'first.growth', { kind: 'allee', r: 1, K: 10, A: 20 }),
      'model.first.growth.A'
    ],
    ['no handling time', with_(consumer, 'feeding.h', undefined), 'model.feeding.h'],
    ['neither mortality nor growth', with_(consumer, 'second.mortality', undefined), 'model.second'],
    ['no model', undefined, 'model']
  ];
  it.each(bad)('refuses %s by its path', async (_name, model, at) => {
    expect(paths(await refused('/api/v1/equilibria', { body: { model } }, 422))).toContain(at);
  });

  it('refuses a field beside the model', async () => {
    const problem = await refused('/api/v1/equilibria', { body: { model: competition, modle: 1 } }, 422);
    expect(paths(problem)).toContain('modle');
  });

  it('refuses numbers beyond numbers: 1e400, NaN, Infinity, and JSON that is none', async () => {
    const text = JSON.stringify({ model: competition });
    const beyond = await refused('/api/v1/equilibria', { body: text.replace('420', '1e400') }, 422);
    expect(paths(beyond)).toEqual(['model.first.growth.K']);
    for (const broken of [text.replace('420', 'NaN'), text.replace('420', '-Infinity'), text.slice(0, -1), '']) {
      expect((await refused('/api/v1/equilibria', { body: broken }, 422)).code).toBe('input.notJson');
    }
    for (const other of ['[]', 'null', '7']) await refused('/api/v1/equilibria', { body: other }, 422);
  });

  it('refuses ten megabytes without reading them all', async () => {
    const body = `{"model": "${'x'.repeat(10 * 1024 * 1024)}"}`;
    const problem = await refused('/api/v1/equilibria', { body }, 422);
    expect(problem).toMatchObject({ code: 'input.tooLarge', errors: [{ pointer: '', path: '' }] });
  });

  it('refuses rates too far apart in size to write an answer with', async () => {
    const model = with_(with_(consumer, 'feeding.a', 1e-300), 'first.growth.K', 1e300);
    const answer = await requestJson('/api/v1/equilibria', { token, body: { model } });
    expect([200, 422]).toContain(answer.status);
    if (answer.status === 200) expect(EquilibriaAnswer.safeParse(answer.json).error).toBeUndefined();
  });
});

describe('POST /api/v1/trajectories', () => {
  it('answers as it describes: both ends counted, events located, checked by another method', async () => {
    const thresholds = [{ species: 'first', above: 200 }];
    const { json } = await requestJson<{ t: number[]; events: unknown[]; crossCheck: Record<string, number> }>(
      '/api/v1/trajectories',
      { token, body: { ...path, thresholds } }
    );
    expect(TrajectoryAnswer.safeParse(json).error).toBeUndefined();
    expect([json.t.length, json.t[0], json.t.at(-1)]).toEqual([201, 0, 100]);
    expect(json.events).toMatchObject([{ species: 'first', kind: 'rose above', value: 200 }]);
    expect(json.crossCheck).toMatchObject({ method: 'odex' });
    expect(json.crossCheck.largestRelativeDifference).toBeLessThan(1e-7);
  });

  it('does not change its printed digits when the tolerance is halved', async () => {
    const digits = async (rtol: number) =>
      (await requestJson<{ x: number[] }>('/api/v1/trajectories', { token, body: { ...path, rtol } })).json.x.map(
        (value) => value.toPrecision(6)
      );
    expect(await digits(5e-9)).toEqual(await digits(1e-8));
  });

  it('gives CSV by Accept: a plain table that reads back to the same numbers, units on request', async () => {
    const ask = (query = '', accept = 'text/csv') =>
      request(`/api/v1/trajectories${query}`, { token, body: path, headers: { accept } });
    const plain = await ask();
    expect(plain.headers.get('content-type')).toContain('text/csv');
    expect(plain.headers.get('content-disposition')).toContain('trajectory.csv');
    const text = await plain.text();
    expect(text.endsWith('\r\n')).toBe(true);
    const { data, errors } = Papa.parse<string[]>(text, { skipEmptyLines: true });
    expect(errors).toEqual([]);
    expect([data[0], data.length]).toEqual([['t', 'x', 'y'], 202]);
    const { json } = await requestJson<{ x: number[] }>('/api/v1/trajectories', { token, body: path });
    expect(data.slice(1).map((row) => Number(row[1]))).toEqual(json.x);
    expect((await (await ask('?units=header')).text()).split('\r\n')[0]).toContain('t (study time unit)');
    expect((await (await ask('?units=row')).text()).split('\r\n')[1]).toContain('study abundance unit');
    expect((await ask('?units=nonsense')).status).toBe(422);
    expect((await ask('', 'application/json, text/csv;q=0.5')).headers.get('content-type')).toContain('json');
    expect((await ask('', '*/*')).headers.get('content-type')).toContain('json');
  });

  const bad: [string, object, string][] = [
    ['a negative start', { start: { x: -1, y: 5 } }, 'start.x'],
    ['a span that ends before it starts', { span: [10, 0] }, 'span.1'],
    ['neither samples nor times', { samples: undefined }, 'samples'],
    ['both samples and times', { times: [0, 1] }, 'times'],
    ['times that fall', { samples: undefined, times: [0, 5, 4] }, 'times.2'],
    ['a time outside the span', { samples: undefined, times: [0, 101] }, 'times.1'],
    ['one sample', { samples: 1 }, 'samples'],
    ['more samples than anybody reads', { samples: 1e7 }, 'samples'],
    ['a tolerance of 1', { rtol: 1 }, 'rtol'],
    ['a threshold with no level', { thresholds: [{ species: 'first' }] }, 'thresholds.0'],
    ['an unknown field', { tolerance: 1e-6 }, 'tolerance']
  ];
  it.each(bad)('refuses %s by its path', async (_name, change, at) => {
    expect(paths(await refused('/api/v1/trajectories', { body: { ...path, ...change } }, 422))).toContain(at);
  });

  it('stops a run that grows beyond all numbers, and says when', async () => {
    const model = {
      interaction: 'competition',
      first: { growth: { kind: 'exponential', r: 5 } },
      second: { growth: { kind: 'exponential', r: 1 } },
      competition: { form: 'encounters', b12: 0, b21: 0 }
    };
    const problem = await refused('/api/v1/trajectories', { body: { ...path, model, span: [0, 1000] } }, 422);
    expect(problem).toMatchObject({ code: 'engine.failed', errors: [{ pointer: '/span/1', path: 'span.1' }] });
    expect(problem.detail).toMatch(/stopped at time 13\d/);
  });

  it('stops a run that would take too long, and stays able to answer', async () => {
    const model = with_(with_(consumer, 'first.growth.K', 9000), 'first.growth.r', 4);
    const started = performance.now();
    const problem = await refused(
      '/api/v1/trajectories',
      { body: { ...path, model, span: [0, 1e9], samples: 2, rtol: 1e-12 } },
      422
    );
    expect(problem.code).toBe('engine.tooLong');
    expect(performance.now() - started).toBeLessThan(30_000);
    expect((await request('/api/v1/equilibria', { token, body: { model } })).status).toBe(200);
  });
});

describe('addresses that are none', () => {
  it('are told so in the words of the API', async () => {
    expect((await refused('/api/v1/nothing', {}, 404)).code).toBe('page.notFound');
  });
});

/** A copy of a document with one value changed, or taken out where it is undefined. */
function with_<T extends object>(document: T, at: string, value: unknown): T {
  const copy = structuredClone(document) as Record<string, unknown>;
  const keys = at.split('.');
  const last = keys.pop()!;
  const holder = keys.reduce((inner, key) => inner[key] as Record<string, unknown>, copy);
  if (value === undefined) delete holder[last];
  else holder[last] = value;
  return copy as T;
}
