import Papa from 'papaparse';
import { describe, expect, it } from 'vitest';
import { fileStem, toCsv } from './csv';

describe('toCsv', () => {
  it('ends every row with CRLF and quotes only what needs it', () => {
    expect(
      toCsv([
        ['t', 'a "b", c'],
        [1.5, null],
        [true, ' padded']
      ])
    ).toBe('t,"a ""b"", c"\r\n1.5,\r\ntrue," padded"\r\n');
  });

  it('comes back from an independent reader as it was, to the last digit', () => {
    const rows = [
      ['x', 'line\nbreak'],
      [1 / 3, '"'],
      [5e-324, 'é,Ω'],
      [1.7976931348623157e308, '']
    ];
    const { data } = Papa.parse<string[]>(toCsv(rows), { skipEmptyLines: true });
    expect(data.map(([number, text], i) => [i === 0 ? number : Number(number), text])).toEqual(rows);
  });

  it('leaves a field empty rather than write what no reader takes for a number', () => {
    expect(toCsv([[Number.NaN, Number.POSITIVE_INFINITY, 0]])).toBe(',,0\r\n');
  });
});

describe('fileStem', () => {
  it('keeps what every file system takes', () => {
    expect(fileStem('Goats & broom, Éire / 2024')).toBe('goats-broom-eire-2024');
    expect(fileStem('…')).toBe('study');
    expect(fileStem('a'.repeat(80))).toHaveLength(60);
  });
});
