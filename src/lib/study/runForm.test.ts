import { describe, expect, it } from 'vitest';
import { readRun, readStarts, runField, runToTyped, startsToRows, typedStarts } from './runForm';

describe('starts as rows', () => {
  it('reads what it shows and skips empty rows', () => {
    const starts = [{ label: 'June counts', x: 232, y: 951.4, seX: 43, source: 'North Arm' }];
    const data = new FormData();
    for (const row of [...startsToRows(starts), { label: '', x: '', y: '', seX: '', seY: '', source: '' }])
      for (const [name, value] of Object.entries(row)) data.append(name, value);
    const rows = typedStarts(data);
    expect(rows).toHaveLength(1);
    expect(readStarts(rows)).toEqual({ starts, errors: {} });
  });

  it('names the cell and the fix', () => {
    const { errors } = readStarts([{ label: '', x: 'many', y: '', seX: '', seY: '', source: '' }]);
    expect(errors).toEqual({
      'starts.0.label': 'Name this start.',
      'starts.0.x': '“many” is not a number.',
      'starts.0.y': 'Give a count, 0 if none.'
    });
  });
});

describe('run settings', () => {
  const run = {
    span: 30,
    samples: 301,
    rtol: 1e-8,
    atol: 1e-10,
    thresholds: [{ species: 'second' as const, below: 5 }]
  };
  it('reads what it shows', () => expect(readRun(runToTyped(run))).toEqual({ run, errors: {} }));
  it('takes an empty limit for none', () =>
    expect(readRun({ ...runToTyped(run), belowSecond: ' ' }).run).toMatchObject({ thresholds: [] }));
  it('shows a complaint about a limit at the field of its species', () => {
    expect(runField('run.thresholds.0.below', run)).toBe('run.belowSecond');
    expect(runField('run.span', run)).toBe('run.span');
  });
});
