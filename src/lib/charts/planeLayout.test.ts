import { describe, expect, it } from 'vitest';
import { bladesPath } from './bladeField';
import { glyphOf } from './glyphs';
import { labelDiscs, TOUCHES } from './labels';
import { equilibriumLook, letterOf, planeWindow } from './planeHelpers';
import { GLYPH_RADIUS, layOutPlane, readPoint, type PlaneData } from './planeLayout';
import { fieldSenses, samplesOf, senseOf } from './planeSamples';
import { linearScale } from './scales';
import type { EquilibriumShape } from './types';

/** Two competitors whose isoclines cross at (140, 36): each can exclude the other. */
const plane: PlaneData = {
  window: { xMax: 215, yMax: 262 },
  axes: {
    x: { label: 'Noble crayfish', unit: 'per 100 m', short: 'Noble' },
    y: { label: 'Signal crayfish', unit: 'per 100 m', short: 'Signal' }
  },
  isoclines: [
    {
      species: 'first',
      points: [
        { x: 178, y: 0 },
        { x: 0, y: 168 }
      ],
      label: 'noble holds steady'
    },
    {
      species: 'second',
      points: [
        { x: 168, y: 0 },
        { x: 0, y: 224 }
      ],
      label: 'signal holds steady'
    }
  ],
  field: (x, y) => ({ dx: x * (178 - x - 1.06 * y), dy: y * (224 - y - 1.33 * x) }),
  equilibria: [
    { x: 0, y: 0, kind: 'node', stable: false, letter: 'A', name: 'neither', description: 'unstable node' },
    { x: 178, y: 0, kind: 'node', stable: true, letter: 'B', name: 'noble only', description: 'stable node' },
    { x: 0, y: 224, kind: 'node', stable: true, letter: 'C', name: 'signal only', description: 'stable node' },
    { x: 140, y: 36, kind: 'saddle', stable: false, letter: 'D', name: 'both', description: 'saddle' },
    { x: 900, y: 1, kind: 'node', stable: true, letter: 'E', name: 'far', description: 'stable node' }
  ],
  separatrices: [
    {
      points: [
        { x: 0, y: 0 },
        { x: 140, y: 36 }
      ]
    },
    {
      points: [
        { x: 140, y: 36 },
        { x: 400, y: 120 }
      ]
    }
  ],
  trajectories: [
    {
      points: [
        { x: 86, y: 101 },
        { x: 40, y: 170 },
        { x: 0, y: 224 }
      ],
      label: '1',
      emphasised: true
    }
  ],
  counts: [{ x: 86, y: 101, label: '2025 counts', seX: 4, seY: 6 }],
  basins: [
    {
      tint: 'second',
      label: 'ends at C',
      polygons: [
        [
          { x: 0, y: 0 },
          { x: 400, y: 120 },
          { x: 400, y: 400 },
          { x: 0, y: 400 }
        ]
      ]
    }
  ]
};

describe.each([320, 476, 700])('the state plane at %i px', (width) => {
  const drawing = layOutPlane(plane, width);
  it('keeps every label inside the plot, off the glyphs and off the others', () => {
    const glyphs = drawing.glyphs.map((g) => ({ x: g.x, y: g.y, r: GLYPH_RADIUS }));
    expect(drawing.labels.map((l) => l.text)).toEqual(
      expect.arrayContaining([
        'A',
        'B',
        'C',
        'D',
        '2025 counts',
        'noble holds steady',
        'signal holds steady',
        'the divide',
        'ends at C'
      ])
    );
    drawing.labels.forEach((label, i) => {
      expect(label.cost, label.text).toBeLessThan(TOUCHES);
      const discs = labelDiscs(label, label.size);
      for (const d of discs) {
        expect(d.x - d.r, label.text).toBeGreaterThan(drawing.box.x0 - 2);
        expect(d.x + d.r, label.text).toBeLessThan(drawing.box.x1 + 2);
        for (const g of glyphs) expect(Math.hypot(d.x - g.x, d.y - g.y), label.text).toBeGreaterThan(g.r);
      }
      for (const other of drawing.labels.slice(i + 1))
        for (const a of discs)
          for (const b of labelDiscs(other, other.size))
            expect(Math.hypot(a.x - b.x, a.y - b.y), `${label.text} / ${other.text}`).toBeGreaterThan(
              (a.r + b.r) * 0.7
            );
    });
  });
  it('sets no type under 11 px and names the divide once', () => {
    expect(Math.min(...drawing.labels.map((l) => l.size))).toBeGreaterThanOrEqual(11);
    expect(drawing.labels.filter((l) => l.text === 'the divide')).toHaveLength(1);
  });
  it('draws only the points in the window but reads out all', () => {
    expect(drawing.glyphs.map((g) => g.equilibrium.letter)).toEqual(['A', 'B', 'C', 'D']);
    expect(drawing.stops.map((s) => s.text)).toContainEqual(
      'E, far, stable node (outside the plot): Noble crayfish 900, Signal crayfish 1 per 100 m'
    );
  });
});

it('takes the short axis title where the long one does not fit', () => {
  const long = {
    ...plane,
    axes: {
      ...plane.axes,
      x: { label: 'Narrow-clawed crayfish of the lower ponds', unit: 'per 100 m', short: 'Narrow-clawed' }
    }
  };
  expect(layOutPlane(long, 280).xTitle).toBe('Narrow-clawed per 100 m');
  expect(layOutPlane(long, 700).xTitle).toBe('Narrow-clawed crayfish of the lower ponds per 100 m');
});
it('names two units where there are two', () => {
  expect(
    readPoint({ x: 12, y: 0.25 }, { x: { label: 'Goats', unit: 'head' }, y: { label: 'Broom', unit: 't/ha' } })
  ).toBe('Goats 12 head, Broom 0.250 t/ha');
});
it('a slider can redraw it as it moves', () => {
  for (let i = 0; i < 5; i += 1) layOutPlane(plane, 476);
  const before = process.cpuUsage();
  for (let i = 0; i < 10; i += 1) layOutPlane(plane, 476);
  const { user } = process.cpuUsage(before);
  // Processor time, not the clock's, as tests share a machine; about 7 ms, bounded loosely.
  expect(user / 1000 / 10).toBeLessThan(40);
});

describe('blades', () => {
  const X = linearScale(0, 10, 0, 300);
  const Y = linearScale(0, 10, 300, 0);
  const box = { x0: 0, y0: 0, x1: 300, y1: 300 };
  const lengths = (path: string) =>
    path
      .split('Z')
      .filter(Boolean)
      .map((blade) => {
        const n = blade.match(/-?[\d.]+/g)!.map(Number);
        const half = n.length / 2;
        return Math.hypot(n[half - 2]! - (n[0]! + n[n.length - 2]!) / 2, n[half - 1]! - (n[1]! + n[n.length - 1]!) / 2);
      });
  it('are equally long whatever the speed', () => {
    const found = lengths(bladesPath((x) => ({ dx: 10 ** (x - 5), dy: 0 }), X, Y, box));
    expect(found.length).toBeGreaterThan(60);
    for (const length of found) expect(length).toBeCloseTo(found[0]!, 0);
  });
  it('point the way of the paper, where up is more', () => {
    const n = bladesPath([{ x: 5, y: 5, dx: 0, dy: 1 }], X, Y, box)
      .match(/-?[\d.]+/g)!
      .map(Number);
    expect(n[n.length / 2 - 1]).toBeLessThan(n[1]!);
  });
  it('are left out where nothing moves', () => {
    expect(bladesPath(() => ({ dx: 0, dy: 0 }), X, Y, box)).toBe('');
    expect(bladesPath([], X, Y, box)).toBe('');
  });
});

describe('glyphs', () => {
  const kinds: EquilibriumShape[] = [
    'node',
    'spiral',
    'saddle',
    'centre',
    'star',
    'degenerate',
    'non-hyperbolic',
    'held'
  ];
  it('differ in shape by kind', () => {
    const drawn = kinds.map((kind) => JSON.stringify(glyphOf(kind, 7.5)));
    expect(new Set(drawn).size).toBe(kinds.length);
  });
  it('come from classes in words', () => {
    expect(equilibriumLook('stable degenerate node', 'stable')).toEqual({ kind: 'degenerate', stable: true });
    expect(equilibriumLook('unstable spiral', 'unstable')).toEqual({ kind: 'spiral', stable: false });
    expect(equilibriumLook('non-hyperbolic', 'undetermined')).toEqual({ kind: 'non-hyperbolic', stable: null });
    expect(equilibriumLook('centre', 'neutral')).toEqual({ kind: 'centre', stable: null });
  });
  it('have letters for any number of points', () => {
    expect([0, 25, 26, 27, 52].map(letterOf)).toEqual(['A', 'Z', 'AA', 'AB', 'BA']);
  });
});

describe('the table twin', () => {
  it('samples lines evenly as drawn, ends included', () => {
    const samples = samplesOf(
      [
        { x: 0, y: 0 },
        { x: 1, y: 1 },
        { x: 100, y: 100 }
      ],
      3,
      { xMax: 100, yMax: 100 }
    );
    expect(samples.map((p) => Math.round(p.x))).toEqual([0, 50, 100]);
  });
  it('says the sense of change', () => {
    const senses = fieldSenses(plane.field, plane.window, 2);
    expect(senses).toHaveLength(4);
    expect(senses.map((s) => senseOf(s.dx, s.dy))).toEqual(['rises', 'falls', 'falls', 'falls']);
    expect(senseOf(1e-9, 1)).toBe('holds');
  });
});

it('a window holds all points with room to spare', () => {
  const { xMax, yMax } = planeWindow([
    { x: 178, y: 0 },
    { x: 0, y: 224 }
  ]);
  expect(xMax).toBeGreaterThan(190);
  expect(xMax).toBeLessThan(240);
  expect(yMax).toBeGreaterThan(240);
  expect(planeWindow([])).toEqual({ xMax: 1, yMax: 1 });
});
