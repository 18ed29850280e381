import { expect, it } from 'vitest';
import { shortNames } from './shortNames';

const of = (a: string, b: string) => shortNames({ first: { common: a }, second: { common: b } });

it('takes the last word, the first where the last is shared, the whole name where nothing short will do', () => {
  expect(of('ridge broom', 'feral ridge goat')).toEqual({ first: 'broom', second: 'goat' });
  expect(of('marsh vole', 'field vole')).toEqual({ first: 'marsh', second: 'field' });
  expect(of('grey pond newt', 'grey hill newt')).toEqual({ first: 'grey pond newt', second: 'grey hill newt' });
});
