import { describe, expect, it } from 'vitest';
import {
  arrowsAlong,
  bladePath,
  clipLine,
  distanceToSegment,
  insidePolygon,
  linePath,
  measure,
  polygonArea,
  simplify
} from './path';

const box = { x0: 0, y0: 0, x1: 100, y1: 50 };

describe('lines', () => {
  it('break where a point is not finite', () => {
    expect(
      linePath([
        { x: 0, y: 0 },
        { x: 1, y: 1 },
        { x: 2, y: NaN },
        { x: 3, y: 3 },
        { x: 4, y: 4 }
      ])
    ).toBe('M0 0L1 1M3 3L4 4');
  });
  it('are cut at the box, with a piece for each visit', () => {
    const pieces = clipLine(
      [
        { x: -50, y: 25 },
        { x: 50, y: 25 },
        { x: 50, y: 80 },
        { x: 90, y: 80 },
        { x: 90, y: 10 }
      ],
      box
    );
    expect(pieces).toEqual([
      [
        { x: 0, y: 25 },
        { x: 50, y: 25 },
        { x: 50, y: 50 }
      ],
      [
        { x: 90, y: 50 },
        { x: 90, y: 10 }
      ]
    ]);
  });
  it('that pass the box by leave nothing', () => {
    expect(
      clipLine(
        [
          { x: -10, y: 60 },
          { x: 110, y: 60 }
        ],
        box
      )
    ).toEqual([]);
    expect(
      clipLine(
        [
          { x: NaN, y: 1 },
          { x: 2, y: 2 }
        ],
        box
      )
    ).toEqual([]);
  });
  it('lose only points that do not show', () => {
    const wave = Array.from({ length: 400 }, (_, i) => ({ x: i, y: 40 * Math.sin(i / 30) }));
    const kept = simplify(wave, 0.3);
    expect(kept.length).toBeLessThan(100);
    expect(kept[0]).toEqual(wave[0]);
    expect(kept.at(-1)).toEqual(wave.at(-1));
    for (const p of wave) {
      const distance = Math.min(...kept.slice(1).map((b, i) => distanceToSegment(p, kept[i]!, b)));
      expect(distance).toBeLessThanOrEqual(0.3);
    }
  });
  it('keep a loop that ends where it began', () => {
    const ring = Array.from({ length: 100 }, (_, i) => ({
      x: 30 * Math.cos((i / 99) * 2 * Math.PI),
      y: 30 * Math.sin((i / 99) * 2 * Math.PI)
    }));
    expect(Math.abs(polygonArea(simplify(ring, 0.3)))).toBeGreaterThan(0.98 * Math.PI * 1800);
  });
});

describe('measuring', () => {
  const bent = measure([
    { x: 0, y: 0 },
    { x: 30, y: 0 },
    { x: 30, y: 40 }
  ]);
  it('goes along the line and no further', () => {
    expect(bent.length).toBe(70);
    expect(bent.at(10)).toMatchObject({ x: 10, y: 0, angle: 0 });
    expect(bent.at(50)).toMatchObject({ x: 30, y: 20 });
    expect(bent.at(50).angle).toBeCloseTo(Math.PI / 2);
    expect(bent.at(1e9)).toMatchObject({ x: 30, y: 40 });
    expect(bent.at(-5)).toMatchObject({ x: 0, y: 0 });
  });
  it('bears an empty and a single-point line', () => {
    expect(measure([]).length).toBe(0);
    expect(measure([{ x: 3, y: 4 }]).at(9)).toMatchObject({ x: 3, y: 4 });
  });
});

describe('chevrons', () => {
  const straight = [
    { x: 0, y: 0 },
    { x: 400, y: 0 }
  ];
  it('stand at even stretches of the drawn line, whatever its sampling', () => {
    const fine = Array.from({ length: 401 }, (_, i) => ({ x: 400 * (i / 400) ** 3, y: 0 }));
    const marks = arrowsAlong(straight, { first: 40, gap: 100, most: 3 });
    expect(marks.map((m) => Math.round(m.x))).toEqual([40, 140, 240]);
    expect(arrowsAlong(fine, { first: 40, gap: 100, most: 3 }).map((m) => Math.round(m.x))).toEqual([40, 140, 240]);
  });
  it('keep clear of the end, and spare the shortest paths', () => {
    expect(arrowsAlong(straight, { first: 390, clear: 20 }).map((m) => m.x)).toEqual([200]);
    expect(
      arrowsAlong([
        { x: 0, y: 0 },
        { x: 10, y: 0 }
      ])
    ).toEqual([]);
  });
});

describe('shapes', () => {
  it('a blade is closed, as broad as asked and pointed at the tip', () => {
    const spine = Array.from({ length: 8 }, (_, i) => ({ x: (i * 17) / 7, y: 0 }));
    const numbers = bladePath(spine, 3.2)
      .match(/-?[\d.]+/g)!
      .map(Number);
    const ys = numbers.filter((_, i) => i % 2 === 1);
    expect(Math.max(...ys)).toBeGreaterThan(1.2);
    expect(Math.max(...ys)).toBeLessThanOrEqual(1.6);
    expect(bladePath(spine, 3.2)).toMatch(/L17 0L17 0.*Z$/);
  });
  it('polygons know their inside', () => {
    const l = [
      { x: 0, y: 0 },
      { x: 10, y: 0 },
      { x: 10, y: 4 },
      { x: 4, y: 4 },
      { x: 4, y: 10 },
      { x: 0, y: 10 }
    ];
    expect(insidePolygon({ x: 2, y: 8 }, l)).toBe(true);
    expect(insidePolygon({ x: 8, y: 8 }, l)).toBe(false);
  });
});
