/**
 * Requests to the real endpoints through the real `handle` hook, so that sign-in, headers and refusals are what a browser or
 * a script would meet. A small router stands in for the framework's: it reads the same folders.
 */
import type { Cookies, RequestEvent, RequestHandler } from '@sveltejs/kit';
import { with_request_store } from '@sveltejs/kit/internal/server';
import { handle } from '../../src/hooks.server';

type Endpoint = Partial<Record<string, RequestHandler>>;

const modules = import.meta.glob<Endpoint>('../../src/routes/**/+server.ts');

interface Route {
  id: string;
  pattern: RegExp;
  names: string[];
  load: () => Promise<Endpoint>;
}

/** `/api/v1/studies/[studyId]` to a pattern; groups such as `(app)` leave no trace in an address. */
function routeOf(file: string, load: () => Promise<Endpoint>): Route {
  const id = file.replace('../../src/routes', '').replace(/\/\+server\.ts$/, '') || '/';
  const names: string[] = [];
  const source = id
    .split('/')
    .filter((segment) => !/^\(.*\)$/.test(segment))
    .map((segment) =>
      segment
        .split(/(\[[^\]]+\])/)
        .map((piece) => {
          const name = /^\[(\.\.\.)?([^=\]]+)(=.*)?\]$/.exec(piece);
          if (!name) return piece.replace(/[.*+?^${}()|[\]\\]/g, '\\$&');
          names.push(name[2]!);
          return name[1] ? '(.*)' : '([^/]+)';
        })
        .join('')
    )
    .join('/');
  return { id, pattern: new RegExp(`^${source || '/'}$`), names, load };
}

/** Exact addresses before parameters before the rest, as the framework does. */
const routes = Object.entries(modules)
  .map(([file, load]) => routeOf(file, load))
  .sort((a, b) => weight(a.id) - weight(b.id));

function weight(id: string): number {
  return (id.match(/\[\.\.\./g) ?? []).length * 100 + (id.match(/\[/g) ?? []).length;
}

function cookieJar(header: string | null): { cookies: Cookies; set: string[] } {
  const held = new Map(
    (header ?? '')
      .split(/;\s*/)
      .filter(Boolean)
      .map((pair) => {
        const at = pair.indexOf('=');
        return [pair.slice(0, at), decodeURIComponent(pair.slice(at + 1))] as const;
      })
  );
  const set: string[] = [];
  const cookies = {
    get: (name: string) => held.get(name),
    getAll: () => [...held].map(([name, value]) => ({ name, value })),
    set: (name: string, value: string) => {
      held.set(name, value);
      set.push(`${name}=${encodeURIComponent(value)}`);
    },
    delete: (name: string) => {
      held.delete(name);
      set.push(`${name}=; Max-Age=0`);
    },
    serialize: (name: string, value: string) => `${name}=${encodeURIComponent(value)}`
  } as unknown as Cookies;
  return { cookies, set };
}

export const ORIGIN = 'http://localhost:5173';

export interface Asked {
  method?: string;
  /** A bearer token. */
  token?: string;
  /** A `name=value` cookie of a session. */
  cookie?: string;
  /** Sent as JSON, unless it is text already. */
  body?: unknown;
  headers?: Record<string, string>;
}

/** Sends one request and returns its response, with the cookies and headers that were set on the way. */
export async function request(path: string, asked: Asked = {}): Promise<Response> {
  const url = new URL(path, ORIGIN);
  const headers = new Headers(asked.headers);
  if (asked.token) headers.set('authorization', `Bearer ${asked.token}`);
  if (asked.cookie) headers.set('cookie', asked.cookie);
  const method = asked.method ?? (asked.body === undefined ? 'GET' : 'POST');
  if (asked.body !== undefined && !headers.has('content-type')) headers.set('content-type', 'application/json');
  const body = typeof asked.body === 'string' || asked.body === undefined ? asked.body : JSON.stringify(asked.body);
  const sent = new Request(url, { method, headers, body: body ?? null });

  const route = routes.find(({ pattern }) => pattern.test(url.pathname));
  const values = route?.pattern.exec(url.pathname)?.slice(1) ?? [];
  const { cookies, set } = cookieJar(headers.get('cookie'));
  const added = new Headers();
  const event = {
    url,
    request: sent,
    route: { id: route?.id ?? null },
    params: Object.fromEntries((route?.names ?? []).map((name, i) => [name, decodeURIComponent(values[i] ?? '')])),
    cookies,
    locals: {},
    platform: undefined,
    fetch,
    getClientAddress: () => '127.0.0.1',
    setHeaders: (extra: Record<string, string>) => Object.entries(extra).forEach(([k, v]) => added.set(k, v)),
    isDataRequest: false,
    isSubRequest: false,
    isRemoteRequest: false,
    tracing: { enabled: false }
  } as unknown as RequestEvent;

  const resolve = async (resolved: RequestEvent): Promise<Response> => {
    if (!route) return new Response('Not found', { status: 404 });
    const endpoint = await route.load();
    const handler = endpoint[method] ?? endpoint.fallback;
    if (!handler) return new Response(`${method} method not allowed`, { status: 405 });
    return handler(resolved as never);
  };
  const state = {
    tracing: { record_span: ({ fn }: { fn: (span: unknown) => unknown }) => fn({}), tracing: false }
  };
  const response = (await with_request_store({ event, state }, () =>
    handle({ event, resolve: resolve as never })
  )) as Response;
  const answered = new Response(response.body, response);
  added.forEach((value, name) => answered.headers.set(name, value));
  for (const cookie of set) answered.headers.append('set-cookie', cookie);
  return answered;
}

/** The response's status and its JSON. */
export async function requestJson<T = Record<string, unknown>>(
  path: string,
  asked: Asked = {}
): Promise<{ status: number; json: T; headers: Headers }> {
  const response = await request(path, asked);
  const text = await response.text();
  return { status: response.status, json: (text ? JSON.parse(text) : null) as T, headers: response.headers };
}
