import { describe, expect, it } from 'vitest';
import {
  joinLabels,
  labelDiscs,
  lineDiscs,
  placeAlong,
  placeAround,
  placeWithin,
  spread,
  textWidth,
  TOUCHES
} from './labels';

const box = { x0: 0, y0: 0, x1: 400, y1: 300 };
const falling = [
  { x: 0, y: 0 },
  { x: 400, y: 200 }
];

describe('a label along a line', () => {
  it('turns with it and is never upside down', () => {
    const forwards = placeAlong(falling, 'noble holds steady', { size: 11, box, obstacles: [] })!;
    const backwards = placeAlong([...falling].reverse(), 'noble holds steady', { size: 11, box, obstacles: [] })!;
    expect(forwards.angle).toBeCloseTo(26.57, 1);
    expect(backwards.angle).toBeCloseTo(26.57, 1);
  });
  it('stands clear of its own line', () => {
    const label = placeAlong(falling, 'noble holds steady', { size: 11, box, obstacles: lineDiscs(falling) })!;
    for (const a of labelDiscs(label, 11))
      for (const b of lineDiscs(falling)) expect(Math.hypot(a.x - b.x, a.y - b.y)).toBeGreaterThan(a.r + b.r - 0.5);
  });
  it('moves away from a glyph', () => {
    const free = placeAlong(falling, 'the divide', { size: 11, box, obstacles: [] })!;
    const glyph = { x: free.x, y: free.y, r: 12, weight: 100 };
    const moved = placeAlong(falling, 'the divide', { size: 11, box, obstacles: [glyph] })!;
    expect(moved.cost).toBeLessThan(TOUCHES);
    for (const d of labelDiscs(moved, 11))
      expect(Math.hypot(d.x - glyph.x, d.y - glyph.y)).toBeGreaterThanOrEqual(glyph.r + d.r - 1);
  });
  it('stands level beside a steep line, on the side inside the plot', () => {
    const upright = [
      { x: 390, y: 0 },
      { x: 390, y: 300 }
    ];
    const label = placeAlong(upright, 'mink hold steady', { size: 11, box, obstacles: lineDiscs(upright) })!;
    expect(label).toMatchObject({ angle: 0, anchor: 'end' });
    expect(label.x).toBeLessThan(390);
  });
  it('is given up on a line too short to follow', () => {
    expect(
      placeAlong(
        [
          { x: 1, y: 1 },
          { x: 5, y: 1 }
        ],
        'x',
        { size: 11, box, obstacles: [] }
      )
    ).toBeNull();
  });
});

describe('a label beside a point', () => {
  it('prefers the upper right and stays inside', () => {
    expect(placeAround({ x: 200, y: 150 }, 'D', { size: 14, box, obstacles: [], reach: 13 })).toMatchObject({
      anchor: 'start'
    });
    const corner = placeAround({ x: 398, y: 2 }, 'B', { size: 14, box, obstacles: [], reach: 13 });
    expect(corner.anchor).toBe('end');
    expect(corner.y).toBeGreaterThan(2);
    expect(corner.cost).toBeLessThan(TOUCHES);
  });
});

it('a label within an area takes a free spot, or none', () => {
  const spots = [
    { x: 100, y: 100 },
    { x: 200, y: 200 }
  ];
  const wall = { x: 100, y: 100, r: 20, weight: 100 };
  expect(placeWithin(spots, 'ends at C', { size: 11, box, obstacles: [wall] })).toMatchObject({ x: 200 });
  expect(placeWithin([{ x: 100, y: 100 }], 'ends at C', { size: 11, box, obstacles: [wall] })).toBeNull();
});

it('longer text is wider', () => {
  expect(textWidth('Signal crayfish', 12)).toBeGreaterThan(textWidth('Signal', 12));
  expect(textWidth('Signal', 12)).toBe(textWidth('Signal', 6) * 2);
});

describe('spreading', () => {
  it('leaves what has room alone', () => expect(spread([10, 50, 90], 15, 0, 100)).toEqual([10, 50, 90]));
  it('parts what is crowded, in order, within the ends', () => {
    const out = spread([98, 97, 50, 96], 15, 0, 100);
    expect(out).toEqual([100, 85, 50, 70]);
  });
  it('shares too little room evenly', () => {
    const out = spread([5, 5, 5, 5], 15, 0, 30);
    expect(out.map((v) => Math.round(v))).toEqual([0, 10, 20, 30]);
  });
});

it('run numbers are joined into ranges', () => {
  expect(joinLabels(['3', '1', '2', '5'])).toBe('1–3, 5');
  expect(joinLabels(['1', '2'])).toBe('1, 2');
  expect(joinLabels(['a', 'b'])).toBe('a, b');
});
