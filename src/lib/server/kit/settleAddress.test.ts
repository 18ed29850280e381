import type { RequestEvent } from '@sveltejs/kit';
import { describe, expect, it } from 'vitest';
import { settleAddress } from './settleAddress';

async function ask(address: string, headers: Record<string, string>, method = 'GET'): Promise<Response> {
  const url = new URL(address);
  const event = { url, request: new Request(url, { method, headers }) } as RequestEvent;
  return settleAddress({ event, resolve: () => new Response('page') });
}

const page = { accept: 'text/html,*/*' };

describe('settleAddress', () => {
  it('sends another name of this machine to the one forms are accepted from', async () => {
    const response = await ask('http://127.0.0.1:4173/sign-in?next=/studies', { ...page, host: 'localhost:4173' });
    expect(response.status).toBe(307);
    expect(response.headers.get('location')).toBe('http://127.0.0.1:4173/sign-in?next=/studies');
  });

  it.each([
    ['the right name', 'http://127.0.0.1:4173/', { ...page, host: '127.0.0.1:4173' }, 'GET'],
    ['a name elsewhere', 'http://127.0.0.1:4173/', { ...page, host: 'evil.example' }, 'GET'],
    ['a public address', 'https://sedgeline.example/', { ...page, host: 'localhost:4173' }, 'GET'],
    ['the API', 'http://127.0.0.1:4173/api/v1/studies', { accept: 'application/json', host: 'localhost:4173' }, 'GET'],
    ['a form', 'http://127.0.0.1:4173/sign-in', { ...page, host: 'localhost:4173' }, 'POST']
  ])('lets %s pass', async (_name, address, headers, method) => {
    expect(await (await ask(address, headers, method)).text()).toBe('page');
  });
});
