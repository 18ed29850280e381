import { describe, expect, it } from 'vitest';
import { requestJson } from '../harness/request';

interface Described {
  openapi: string;
  paths: Record<string, Record<string, { responses: Record<string, { content?: Record<string, unknown> }> }>>;
  components: { schemas: Record<string, Record<string, unknown>> };
}

const files = Object.keys(import.meta.glob('../../src/routes/api/v1/**/+server.ts'));
const modules = import.meta.glob<Record<string, unknown>>('../../src/routes/api/v1/**/+server.ts');
const addressOf = (file: string) =>
  file
    .replace('../../src/routes', '')
    .replace('/+server.ts', '')
    .replace(/\[(\w+)\]/g, '{$1}');

const described = async () => (await requestJson<Described>('/api/v1/openapi.json')).json;

describe('the description of the API', () => {
  it('needs no sign-in and is OpenAPI 3.1', async () => {
    const { status, json } = await requestJson<Described>('/api/v1/openapi.json');
    expect([status, json.openapi]).toEqual([200, '3.1.0']);
  });

  it('names every address and method there is, and none besides', async () => {
    const there: string[] = [];
    for (const file of files) {
      if (file.includes('[...')) continue;
      const methods = Object.keys(await modules[file]!()).filter((name) => /^[A-Z]+$/.test(name));
      there.push(...methods.map((method) => `${method.toLowerCase()} ${addressOf(file)}`));
    }
    const { paths } = await described();
    const named = Object.entries(paths).flatMap(([path, methods]) =>
      Object.keys(methods).map((method) => `${method} ${path}`)
    );
    expect(named.sort()).toEqual(there.sort());
  });

  it('resolves every reference, and closes every request against unknown fields', async () => {
    const document = await described();
    const references = JSON.stringify(document).match(/#\/components\/schemas\/\w+/g) ?? [];
    expect(references.length).toBeGreaterThan(20);
    for (const reference of references) {
      expect(document.components.schemas).toHaveProperty(reference.split('/').at(-1)!);
    }
    for (const name of ['EquilibriaRequest', 'TrajectoryRequest', 'RatePatch']) {
      expect(document.components.schemas[name]).toMatchObject({ additionalProperties: false });
    }
  });

  it('describes a refusal of every endpoint as a problem document', async () => {
    const { paths } = await described();
    for (const [path, methods] of Object.entries(paths)) {
      for (const [method, { responses }] of Object.entries(methods)) {
        if (path === '/api/v1/openapi.json') continue;
        for (const [status, { content }] of Object.entries(responses)) {
          if (Number(status) < 400) continue;
          expect([path, method, status, Object.keys(content ?? {})]).toEqual([
            path,
            method,
            status,
            ['application/problem+json']
          ]);
        }
        expect(responses).toHaveProperty('401');
      }
    }
  });
});
