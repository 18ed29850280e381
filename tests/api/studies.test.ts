import Papa from 'papaparse';
import { beforeAll, describe, expect, it } from 'vitest';
import {
  CommentAnswer,
  EquilibriaAnswer,
  SavedAnswer,
  StudyAnswer,
  StudyListAnswer,
  StudyPathsAnswer
} from '$lib/contracts/answers';
import { Problem } from '$lib/contracts/problem';
import { sequelize } from '$lib/server/db/connection';
import { archiveStudy } from '$lib/server/commands/archiveStudy';
import { buildTeam, buildToken, type Team } from '../harness/factories/actors';
import { buildStudy, typedRate } from '../harness/factories/studies';
import { request, requestJson } from '../harness/request';

let team: Team;
let studyId: string;
let revision: number;
const tokens = {} as Record<'owner' | 'reviewer' | 'observer' | 'outsider' | 'reading', string>;

beforeAll(async () => {
  team = await buildTeam();
  ({ studyId, revision } = await buildStudy(team.owner.context, {
    shares: [{ userId: team.reviewer.userId, role: 'reviewer' }]
  }));
  for (const who of ['owner', 'reviewer', 'observer', 'outsider'] as const) {
    tokens[who] = await buildToken(team[who].userId);
  }
  tokens.reading = await buildToken(team.owner.userId, ['read']);
});

async function rows(): Promise<string> {
  const [found] = await sequelize().query(
    `select (select json_agg(s order by s.id) from studies s) as studies,
            (select count(*) from study_revisions) as revisions,
            (select count(*) from comments) as comments, (select count(*) from audit_events) as audit`
  );
  return JSON.stringify(found);
}

const change = () => ({ revision, rate: typedRate('first.growth.r', 0.8, '/a') });
const remark = { anchor: { kind: 'rate', key: 'first.growth.r' }, kind: 'question', body: 'Measured when?' };

async function expectRefused(
  method: string,
  address: string,
  body: unknown,
  token: string | undefined,
  status: number
) {
  const answer = await requestJson(address, {
    method,
    ...(body === undefined ? {} : { body }),
    ...(token ? { token } : {})
  });
  expect([method, address, answer.status]).toEqual([method, address, status]);
  expect(Problem.safeParse(answer.json).error).toBeUndefined();
  return answer.json as { code: string; errors?: { path: string }[] };
}

describe('refusals, after which every row is as it was', () => {
  it('401 for nobody and 404 for an outsider, at every address of a study', async () => {
    const before = await rows();
    const at = `/api/v1/studies/${studyId}`;
    for (const [method, address, body] of [
      ['GET', at, undefined],
      ['PATCH', `${at}/rates`, change()],
      ['GET', `${at}/equilibria`, undefined],
      ['GET', `${at}/trajectories`, undefined],
      ['GET', `${at}/trajectories.csv`, undefined],
      ['POST', `${at}/comments`, remark]
    ] as const) {
      await expectRefused(method, address, body, undefined, 401);
      await expectRefused(method, address, body, tokens.outsider, 404);
      await expectRefused(method, address.replace(studyId, 'nonsense'), body, tokens.owner, 404);
    }
    await expectRefused('GET', '/api/v1/studies', undefined, undefined, 401);
    expect(await rows()).toBe(before);
  });

  it('403 for an edit by a reviewer or an observer, for a comment by an observer, and for a token that may only read', async () => {
    const before = await rows();
    const rates = `/api/v1/studies/${studyId}/rates`;
    for (const who of ['reviewer', 'observer'] as const) {
      expect((await expectRefused('PATCH', rates, change(), tokens[who], 403)).code).toBe('policy.forbidden');
      // What may not be done is refused before it is judged.
      await expectRefused('PATCH', rates, 'not even JSON', tokens[who], 403);
    }
    await expectRefused('POST', `/api/v1/studies/${studyId}/comments`, remark, tokens.observer, 403);
    expect((await expectRefused('PATCH', rates, change(), tokens.reading, 403)).code).toBe('auth.scope');
    expect(await rows()).toBe(before);
  });

  it('422 for a rate that cannot be, by its path', async () => {
    const before = await rows();
    const rates = `/api/v1/studies/${studyId}/rates`;
    const bad = async (rate: object) =>
      (await expectRefused('PATCH', rates, { revision, rate }, tokens.owner, 422)).errors?.map(({ path }) => path);
    expect(await bad(typedRate('first.growth.K', -4, '{ind}/har'))).toEqual(['rate.value']);
    expect(await bad(typedRate('first.growth.K', 4, 'kg/har'))).toEqual(['rate.unit']);
    expect(await bad(typedRate('feeding.a', 4, 'har/{ind}/a'))).toEqual(['rate.path']);
    expect(await bad({ ...typedRate('first.growth.r', 1, '/a'), extra: 1 })).toEqual(['rate.extra']);
    expect(await bad({ ...typedRate('first.growth.r', 1, '/a'), source: { kind: 'own survey', text: ' ' } })).toEqual([
      'rate.source.text'
    ]);
    expect(await rows()).toBe(before);
  });
});

describe('the studies of a reader', () => {
  it('are listed as described, each reader seeing their own', async () => {
    for (const [who, expected] of [
      ['owner', [studyId]],
      ['reviewer', [studyId]],
      ['outsider', []]
    ] as const) {
      const { status, json } = await requestJson<{ studies: { id: string }[] }>('/api/v1/studies', {
        token: tokens[who]
      });
      expect(status).toBe(200);
      expect(StudyListAnswer.safeParse(json).error).toBeUndefined();
      expect(json.studies.map(({ id }) => id)).toEqual(expected);
    }
    const none = await requestJson<{ total: number }>('/api/v1/studies?q=walrus', { token: tokens.owner });
    expect(none.json.total).toBe(0);
  });

  it('are read as described, with what the reader may do', async () => {
    const { json } = await requestJson<{ abilities: string[] }>(`/api/v1/studies/${studyId}`, {
      token: tokens.reviewer
    });
    expect(StudyAnswer.safeParse(json).error).toBeUndefined();
    expect(json.abilities).toContain('study.comment');
    expect(json.abilities).not.toContain('study.edit');
  });

  it('give equilibria and paths as described, and paths as CSV', async () => {
    const at = `/api/v1/studies/${studyId}`;
    const equilibria = await requestJson(`${at}/equilibria`, { token: tokens.observer });
    expect(EquilibriaAnswer.safeParse(equilibria.json).error).toBeUndefined();
    const { json } = await requestJson<{ paths: { t: number[]; x: number[] }[] }>(`${at}/trajectories`, {
      token: tokens.observer
    });
    expect(StudyPathsAnswer.safeParse(json).error).toBeUndefined();
    for (const [address, headers] of [
      [`${at}/trajectories?units=header`, { accept: 'text/csv' }],
      [`${at}/trajectories.csv?units=header`, {}]
    ] as const) {
      const csv = await request(address, { token: tokens.observer, headers });
      expect(csv.headers.get('content-disposition')).toMatch(
        new RegExp(`filename="two-newts-of-ash-pond-v${revision}-trajectories-\\d{4}-\\d\\d-\\d\\d\\.csv"`)
      );
      const { data } = Papa.parse<string[]>(await csv.text(), { skipEmptyLines: true });
      expect(data[0]).toEqual(['start', 'time (yr)', 'banded newt (ind/ha)', 'crested newt (ind/ha)']);
      expect(data.slice(1).map((row) => Number(row[2]))).toEqual(json.paths[0]?.x);
    }
  });

  it('name every missing rate where a result is asked for too early', async () => {
    const early = await buildStudy(team.owner.context, { rates: [], starts: [] });
    const problem = await expectRefused(
      'GET',
      `/api/v1/studies/${early.studyId}/trajectories`,
      undefined,
      tokens.owner,
      422
    );
    expect(problem.errors?.map(({ path }) => path)).toEqual(expect.arrayContaining(['rates.first.growth.K', 'starts']));
  });
});

describe('changes through the API', () => {
  it('save a rate, refuse the same again from the revision before, and refuse all of an archived study', async () => {
    const own = await buildStudy(team.owner.context);
    const address = `/api/v1/studies/${own.studyId}/rates`;
    const body = { revision: own.revision, rate: typedRate('first.growth.r', 0.8, '/a') };
    const saved = await requestJson<{ revision: number }>(address, { method: 'PATCH', token: tokens.owner, body });
    expect(saved.status).toBe(200);
    expect(SavedAnswer.safeParse(saved.json).error).toBeUndefined();
    expect(saved.json.revision).toBe(own.revision + 1);
    const stale = await expectRefused('PATCH', address, body, tokens.owner, 409);
    expect(stale).toMatchObject({
      code: 'study.stale',
      errors: [{ pointer: '/rates/first/growth/r', path: 'rates.first.growth.r' }]
    });
    await archiveStudy(team.owner.context, own);
    const closed = { ...body, revision: saved.json.revision };
    expect((await expectRefused('PATCH', address, closed, tokens.owner, 409)).code).toBe('study.archived');
  });

  it('open a thread for a reviewer', async () => {
    const { status, json } = await requestJson(`/api/v1/studies/${studyId}/comments`, {
      token: tokens.reviewer,
      body: remark
    });
    expect(status).toBe(201);
    expect(CommentAnswer.safeParse(json).error).toBeUndefined();
  });
});
