import { describe, expect, it } from 'vitest';
import { safeNext } from './requireUser';

describe('where a sign-in leads', () => {
  it.each(['/studies', '/studies/1/rates?unit=yr#k', '/', '/settings/tokens'])(
    'keeps a path of our own: %s',
    (path) => {
      expect(safeNext(path)).toBe(path);
    }
  );

  it.each([
    null,
    '',
    'studies',
    'https://elsewhere.example/',
    '//elsewhere.example/',
    '/\\elsewhere.example',
    '/\t/elsewhere.example',
    '\\/elsewhere.example',
    'javascript:alert(1)',
    '/.//elsewhere.example',
    'http:elsewhere.example'
  ])('refuses to lead elsewhere: %j', (next) => {
    expect(safeNext(next)).toBe('/studies');
  });
});
