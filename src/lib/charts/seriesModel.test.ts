import { describe, expect, it } from 'vitest';
import { formatTime, needsPanels, readSeries, seriesPanels, tableTimes, valueAt, type SeriesData } from './seriesModel';
import { endLabels, endRoom, lineWeight, type PanelState } from './seriesPlugin';
import type { SeriesRun } from './types';

const t = [0, 10, 20, 30];
const run = (label: string, first: number[], second: number[]): SeriesRun => ({ label, t, first, second });
const base: SeriesData = {
  time: { label: 'Year', unit: 'years', origin: 2025 },
  first: { name: 'Noble crayfish', short: 'Noble', unit: 'per 100 m' },
  second: { name: 'Signal crayfish', short: 'Signal', unit: 'per 100 m' },
  runs: [run('1', [86, 40, 10, 0], [101, 180, 220, 224])]
};

describe('panels', () => {
  it('are shared until one species would lie flat or the units differ', () => {
    expect(needsPanels(base, 'linear')).toBe(false);
    const flat = { ...base, runs: [run('1', [1, 1, 1, 1], [100, 100, 100, 100])] };
    expect(needsPanels(flat, 'linear')).toBe(true);
    expect(needsPanels(flat, 'log')).toBe(false);
    const many = Array.from({ length: 5 }, (_, i) => run(String(i + 1), [1, 1, 1, 1], [1, 1, 1, 1]));
    expect(needsPanels({ ...base, runs: many.slice(0, 4) }, 'linear')).toBe(false);
    expect(needsPanels({ ...base, runs: many }, 'linear')).toBe(true);
    expect(needsPanels({ ...base, second: { ...base.second, unit: 'per km' } }, 'log')).toBe(true);
  });
  it('hold all values, starting at 0 on a linear axis and at a power of ten on a log axis', () => {
    const [linear] = seriesPanels(base, 'linear', false);
    expect(linear).toMatchObject({ yMin: 0, tMin: 0, tMax: 30, title: 'Per 100 m', species: ['first', 'second'] });
    expect(linear!.yMax).toBeGreaterThanOrEqual(224);
    const [log] = seriesPanels(base, 'log', false);
    expect(log).toMatchObject({ yMin: 10, yMax: 500 });
    expect(log!.lines[0]!.points.at(-1)!.y).toBeNaN();
  });
  it('name their species when apart', () => {
    expect(seriesPanels(base, 'linear', true).map((p) => p.title)).toEqual([
      'Noble crayfish per 100 m',
      'Signal crayfish per 100 m'
    ]);
  });
  it('make room for a near limit, not for a far one', () => {
    const limit = (value: number) =>
      seriesPanels({ ...base, thresholds: [{ species: 'first', value, label: 'limit' }] }, 'linear', true)[0]!.yMax;
    expect(limit(120)).toBeGreaterThanOrEqual(120);
    expect(limit(5000)).toBeLessThan(120);
  });
  it('stand even for a run without extent', () => {
    const still = { ...base, runs: [{ ...base.runs[0]!, t: [5], first: [0], second: [0] }] };
    expect(seriesPanels(still, 'linear', false)[0]).toMatchObject({ tMin: 5, tMax: 6, yMax: 1 });
  });
});

describe('reading', () => {
  it('goes straight between samples and not beyond', () => {
    const only = base.runs[0]!;
    expect(valueAt(only, 'first', 5)).toBe(63);
    expect(valueAt(only, 'second', 30)).toBe(224);
    expect(valueAt(only, 'first', 31)).toBeNull();
  });
  it('says time, run, both values and the unit', () => {
    expect(readSeries(base, base.runs[0]!, 10, 1)).toBe('2035: Noble crayfish 40, Signal crayfish 180 per 100 m');
    const two = { ...base, runs: [...base.runs, run('2', [1, 2, 3, 4], [4, 3, 2, 1])] };
    expect(readSeries(two, two.runs[1]!, 0, 1)).toBe('2025, run 2: Noble crayfish 1, Signal crayfish 4 per 100 m');
  });
  it('sets calendar years or spans', () => {
    expect(formatTime(6, base.time, 1)).toBe('2031');
    expect(formatTime(6, base.time, 0.1)).toBe('2031');
    expect(formatTime(6.5, { label: 'Time', unit: 'years' }, 0.1)).toBe('6.5 years');
  });
  it('lists round times with both ends', () => {
    const { times } = tableTimes(0.3, 30);
    expect(times[0]).toBe(0.3);
    expect(times.at(-1)).toBe(30);
    expect(times.slice(1).every((v) => Number.isInteger(v))).toBe(true);
    expect(times.length).toBeLessThan(40);
  });
});

describe('names at the line ends', () => {
  const runs = [
    run('1', [0, 0, 0, 10], [0, 0, 0, 200]),
    run('2', [0, 0, 0, 11], [0, 0, 0, 100]),
    run('3', [0, 0, 0, 10], [0, 0, 0, 200])
  ];
  const data = { ...base, runs };
  const [panel] = seriesPanels(data, 'linear', false);
  const state = { data, panel: panel!, narrow: false } as unknown as PanelState;
  const toY = (value: number) => 200 - value;
  it('are shared by runs that end together and never overlap', () => {
    const labels = endLabels(state, toY, 0, 200);
    expect(labels.map((l) => l.text)).toEqual(['Noble 1–3', 'Signal 1, 3', 'Signal 2']);
    const places = labels.map((l) => l.labelY).sort((a, b) => a - b);
    places.slice(1).forEach((y, i) => expect(y - places[i]!).toBeGreaterThanOrEqual(15));
  });
  it('get the room they need', () => {
    const one = { data: base, panel: seriesPanels(base, 'linear', false)[0]!, narrow: false };
    expect(endRoom(one, 300)).toBeGreaterThan(95);
    expect(endRoom({ ...one, narrow: true }, 300)).toBeLessThan(75);
  });
  it('go with weight: the emphasised run is the heavier, the double line never too fine', () => {
    const heavy = { ...runs[0]!, emphasised: true };
    expect(lineWeight('first', heavy, [heavy, runs[1]!])).toBeGreaterThan(
      lineWeight('first', runs[1]!, [heavy, runs[1]!])
    );
    expect(lineWeight('second', runs[1]!, [heavy, runs[1]!])).toBeGreaterThanOrEqual(3.4);
  });
});
