import type { RequestEvent } from '@sveltejs/kit';
import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { buildUser, cookieOf, actorOf, tokenOf } from '../../../../tests/harness/factories/people';
import { ORIGIN, request } from '../../../../tests/harness/request';
import { configure } from '../config';
import type { Actor } from '../context';
import { ApiToken } from '../db/models/ApiToken';
import { hashSecret } from '../auth/secrets';
import { refusal } from '../errors';
import { asEndpoint } from './asEndpoint';
import { readJson } from './readJson';

interface Sent {
  headers?: Record<string, string>;
  method?: string;
  body?: string;
  actor?: Actor | null;
}

function eventOf({ headers, method = 'GET', body, actor = null }: Sent = {}): RequestEvent {
  const url = new URL('/api/v1/thing', ORIGIN);
  return {
    url,
    request: new Request(url, { method, headers: headers ?? {}, body: body ?? null }),
    locals: { requestId: 'request-1', actor, session: null, theme: 'system', databaseAway: false },
    getClientAddress: () => '192.0.2.30'
  } as unknown as RequestEvent;
}

const whoAmI = asEndpoint((_event, { actor }) => ({ userId: actor.userId, via: actor.via }));
const Body = z.strictObject({ n: z.number().positive('Give a number above zero.') });
const echo = asEndpoint(async (event) => readJson(event, Body, 1000));

describe('who may ask', () => {
  it('is nobody without a session or a token', async () => {
    const response = await whoAmI(eventOf());
    expect(response.status).toBe(401);
    expect(response.headers.get('content-type')).toBe('application/problem+json');
    expect(response.headers.get('www-authenticate')).toMatch(/^Bearer/);
    expect(await response.json()).toMatchObject({ code: 'auth.required', requestId: 'request-1' });
  });

  it.each(['Bearer nonsense', 'Bearer sdg_nonsense', 'Basic eDp5', 'Bearer', ''])(
    'is nobody with “%s”',
    async (authorization) => {
      const actor = await actorOf((await buildUser()).id);
      // A bad token is not made good by a session that happens to be open.
      const response = await whoAmI(eventOf({ headers: { authorization }, actor }));
      expect(response.status).toBe(401);
    }
  );

  it('is the owner of a token, until it is withdrawn or past its date', async () => {
    const user = await buildUser();
    const secret = await tokenOf(user.id);
    const headers = { authorization: `Bearer ${secret}` };
    const post = () => whoAmI(eventOf({ headers, method: 'POST' }));
    expect(await (await post()).json()).toEqual({ userId: user.id, via: 'token' });
    const row = (await ApiToken.findOne({ where: { tokenHash: hashSecret(secret) } }))!;
    expect(row.lastUsedAt).not.toBeNull();
    await row.update({ expiresAt: new Date(Date.now() - 1000) });
    expect((await post()).status).toBe(401);
    await row.update({ expiresAt: new Date(Date.now() + 100_000), revokedAt: new Date() });
    expect((await post()).status).toBe(401);
  });

  it('is a signed-in person from our own pages, and from no other site’s', async () => {
    const actor = await actorOf((await buildUser()).id);
    const post = (origin?: string) => whoAmI(eventOf({ method: 'POST', actor, headers: origin ? { origin } : {} }));
    expect((await post()).status).toBe(403);
    expect((await post('https://elsewhere.example')).status).toBe(403);
    expect((await post('null')).status).toBe(403);
    expect((await post(ORIGIN)).status).toBe(200);
    expect((await whoAmI(eventOf({ actor }))).status).toBe(200);
  });

  it('is nobody too often', async () => {
    const actor = await actorOf((await buildUser()).id);
    for (let i = 0; i < 600; i += 1) await whoAmI(eventOf({ actor }));
    const response = await whoAmI(eventOf({ actor }));
    expect(response.status).toBe(429);
    expect(Number(response.headers.get('retry-after'))).toBeGreaterThan(0);
  });
});

describe('a body', () => {
  const send = async (body: string) => {
    const actor = await actorOf((await buildUser()).id);
    return echo(eventOf({ method: 'POST', actor, body, headers: { origin: ORIGIN } }));
  };

  it.each([
    ['', '', 'input.notJson'],
    ['{', '', 'input.notJson'],
    ['{"n": NaN}', '', 'input.notJson'],
    ['[]', '', 'input.invalid'],
    ['{"n": 1e400}', 'n', 'input.invalid'],
    ['{"n": -1}', 'n', 'input.invalid'],
    ['{"n": "1"}', 'n', 'input.invalid'],
    ['{"n": 1, "m": 2}', 'm', 'input.invalid'],
    [`{"n": ${'1'.repeat(2000)}}`, '', 'input.tooLarge']
  ])('that cannot be used is a 422 with its path: %s', async (body, path, code) => {
    const response = await send(body);
    expect(response.status).toBe(422);
    expect(await response.json()).toMatchObject({ code, errors: [{ path }] });
  });

  it('that can be used is answered', async () => {
    const response = await send('{"n": 2}');
    expect([response.status, await response.json()]).toEqual([200, { n: 2 }]);
    expect(response.headers.get('cache-control')).toBe('private, no-store');
  });
});

describe('what an endpoint throws', () => {
  it('says nothing of its cause when it is a fault', async () => {
    const actor = await actorOf((await buildUser()).id);
    const broken = asEndpoint(() => {
      throw new Error('select * from secrets');
    });
    const response = await broken(eventOf({ actor }));
    expect(response.status).toBe(500);
    const text = await response.text();
    expect(text).toContain('request-1');
    expect(text).not.toContain('secrets');
  });

  it('is a 503 that says when to come back while the database is away', async () => {
    const actor = await actorOf((await buildUser()).id);
    const away = asEndpoint(() => {
      throw refusal('database.unavailable');
    });
    const response = await away(eventOf({ actor }));
    expect(response.status).toBe(503);
    expect(response.headers.get('retry-after')).toBe('10');
  });
});

describe('every response', () => {
  it('carries the headers that keep it to this site', async () => {
    const response = await request('/health/live');
    expect(Object.fromEntries(response.headers)).toMatchObject({
      'x-content-type-options': 'nosniff',
      'referrer-policy': 'same-origin',
      'x-frame-options': 'DENY',
      'permissions-policy': expect.stringContaining('camera=()')
    });
    expect(response.headers.get('x-request-id')).toMatch(/^[0-9a-f-]{36}$/);
    expect(response.headers.has('strict-transport-security')).toBe(false);
    configure({ origin: 'https://sedge.example' });
    expect((await request('/health/live')).headers.get('strict-transport-security')).toMatch(/max-age=31536000/);
    configure({ origin: ORIGIN });
  });

  it('forgets a session cookie that is not known', async () => {
    const stale = await request('/api/v1/nothing', { cookie: 'sedgeline_session=unknown' });
    expect(stale.headers.getSetCookie().some((cookie) => cookie.startsWith('sedgeline_session='))).toBe(true);
    const good = await request('/api/v1/nothing', { cookie: await cookieOf((await buildUser()).id) });
    expect(good.headers.getSetCookie().some((cookie) => cookie.startsWith('sedgeline_session='))).toBe(false);
  });
});
