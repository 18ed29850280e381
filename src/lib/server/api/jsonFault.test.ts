import { describe, expect, it } from 'vitest';
import { jsonFault } from './jsonFault';

describe('where a text stops being JSON', () => {
  it.each([
    ['', 1, 1],
    ['{', 1, 2],
    ['{"n": NaN}', 1, 7],
    ['{"n": -Infinity}', 1, 8],
    ['{"n": 01}', 1, 8],
    ['{"n": 1.}', 1, 9],
    ['{"n": +1}', 1, 7],
    ['[1, 2,]', 1, 7],
    ['{"a": 1,}', 1, 9],
    ['{a: 1}', 1, 2],
    ["{'a': 1}", 1, 2],
    ['{"a" 1}', 1, 6],
    ['{"a": 1 "b": 2}', 1, 9],
    ['{\n  "a": 1,\n  "b": tru\n}', 3, 11],
    ['{\r\n"a": 1;\r\n}', 2, 7],
    ['"a\nb"', 1, 3],
    ['"\\x"', 1, 3],
    ['"\\u12G4"', 1, 6],
    ['[1] [2]', 1, 5],
    ['[1}', 1, 3],
    ['nul', 1, 4]
  ])('%j: line %i, column %i', (text, line, column) => {
    expect(() => JSON.parse(text) as unknown).toThrow();
    expect(jsonFault(text)).toEqual({ line, column });
  });

  it('is nowhere in JSON', () => {
    for (const value of [null, true, -0.5e-3, 'a"\\\n€\ud800', [], {}, [[], {}, [{ a: [1, { b: null }] }]]]) {
      for (const text of [JSON.stringify(value), ` ${JSON.stringify(value, null, 2)}\r\n`]) {
        expect(jsonFault(text)).toBeNull();
      }
    }
  });

  it('is found at any depth and any length', () => {
    expect(jsonFault('['.repeat(500_000))).toEqual({ line: 1, column: 500_001 });
    expect(jsonFault('{"a":'.repeat(100_000))).toEqual({ line: 1, column: 500_001 });
    expect(jsonFault(`"${'x'.repeat(1_000_000)}`)).toEqual({ line: 1, column: 1_000_002 });
  });
});
