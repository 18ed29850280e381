/**
 * Where direct labels go. Everything drawn is remembered as discs; a label is a row of discs too, so that turned labels
 * cost no more than level ones. Glyphs and other labels must not be touched, lines had better not be.
 */
import { inside, measure, type Rect } from './path';
import type { Point } from './types';

export interface Disc extends Point {
  r: number;
  /** Cost of touching it: glyphs and labels about 100, lines about 1. */
  weight: number;
}

export interface PlacedLabel extends Point {
  /** Degrees, never upside down. */
  angle: number;
  anchor: 'start' | 'middle' | 'end';
  text: string;
  /** Lower is better; above `TOUCHES` something solid is touched or the label leaves its box. */
  cost: number;
}
export const TOUCHES = 60;
const OUTSIDE = 400;

/** Width of set text, from the average letter of the interface face. Slightly generous. */
export function textWidth(text: string, size: number): number {
  let ems = 0;
  for (const letter of text)
    ems += /[iljtf.,'’ |1]/.test(letter) ? 0.3 : /[mwMW]/.test(letter) ? 0.84 : /[A-Z]/.test(letter) ? 0.66 : 0.545;
  return ems * size;
}

/** The discs of a line, every `gap` pixels. */
export function lineDiscs(points: readonly Point[], weight = 1, r = 1.5, gap = 4): Disc[] {
  const line = measure(points);
  const n = Math.max(1, Math.ceil(line.length / gap));
  return Array.from({ length: n + 1 }, (_, i) => {
    const { x, y } = line.at((i / n) * line.length);
    return { x, y, r, weight };
  });
}

function rowOfDiscs(centre: Point, angle: number, width: number, height: number): Point[] {
  const r = height / 2;
  const reach = Math.max(0, width / 2 - r);
  const n = Math.max(1, Math.ceil((2 * reach) / r));
  return Array.from({ length: n + 1 }, (_, i) => {
    const along = -reach + (2 * reach * i) / n;
    return { x: centre.x + along * Math.cos(angle), y: centre.y + along * Math.sin(angle) };
  });
}

/** Stops counting above `enough`: such a place is lost anyway. */
function costOf(row: readonly Point[], r: number, box: Rect, obstacles: readonly Disc[], enough = Infinity): number {
  const outside = row.filter((p) => !inside(p, box, r)).length;
  if (outside > 0) return OUTSIDE * outside;
  const first = row[0];
  const last = row[row.length - 1];
  if (!first || !last) return 0;
  const [x0, x1] = [Math.min(first.x, last.x) - r, Math.max(first.x, last.x) + r];
  const [y0, y1] = [Math.min(first.y, last.y) - r, Math.max(first.y, last.y) + r];
  let cost = 0;
  for (const o of obstacles) {
    if (o.x + o.r < x0 || o.x - o.r > x1 || o.y + o.r < y0 || o.y - o.r > y1) continue;
    let nearest2 = Infinity;
    for (const p of row) {
      const dx = p.x - o.x;
      const dy = p.y - o.y;
      nearest2 = Math.min(nearest2, dx * dx + dy * dy);
    }
    const gap = Math.sqrt(nearest2) - o.r - r;
    if (gap < 0) cost += o.weight * Math.min(1, 0.3 - gap / 6);
    if (cost > enough) return cost;
  }
  return cost;
}

/** What a placed label adds to the obstacles of the next. */
export function labelDiscs(label: PlacedLabel, size: number): Disc[] {
  const width = textWidth(label.text, size);
  const angle = (label.angle * Math.PI) / 180;
  const shift = label.anchor === 'start' ? width / 2 : label.anchor === 'end' ? -width / 2 : 0;
  const centre = {
    x: label.x + shift * Math.cos(angle) + size * 0.32 * Math.sin(angle),
    y: label.y + shift * Math.sin(angle) - size * 0.32 * Math.cos(angle)
  };
  return rowOfDiscs(centre, angle, width, size).map((p) => ({ ...p, r: size / 2, weight: 100 }));
}

/** Beyond this slope a turned label is hard to read: it stands level beside the line instead. */
const STEEP = (64 * Math.PI) / 180;

/**
 * A label along a line: turned with it and `offset` off it, on whichever side and at whichever stretch is freest and
 * straightest. Steep lines get a level label beside them.
 * @param prefer share of the length at which the label would best stand, default 0.5.
 * @returns null when the line is shorter than 12 px.
 */
export function placeAlong(
  points: readonly Point[],
  text: string,
  {
    size,
    box,
    obstacles,
    offset = 9,
    prefer = 0.5
  }: { size: number; box: Rect; obstacles: readonly Disc[]; offset?: number; prefer?: number }
): PlacedLabel | null {
  const line = measure(points);
  if (line.length < 12) return null;
  const width = textWidth(text, size);
  let best: PlacedLabel | null = null;
  let lowest = Infinity;
  const consider = (label: PlacedLabel) => {
    if (label.cost >= lowest) return;
    best = label;
    lowest = label.cost;
  };
  const n = Math.min(60, Math.max(8, Math.round(line.length / 7)));
  for (let i = 0; i <= n; i += 1) {
    const s = (i / n) * line.length;
    const here = line.at(s);
    const before = line.at(s - width / 2);
    const after = line.at(s + width / 2);
    const chord = Math.atan2(after.y - before.y, after.x - before.x);
    const level = chord > Math.PI / 2 ? chord - Math.PI : chord < -Math.PI / 2 ? chord + Math.PI : chord;
    const pull = Math.abs(i / n - prefer) * 3;
    if (Math.abs(level) > STEEP) {
      for (const side of [1, -1]) {
        const centre = { x: here.x + side * (offset + width / 2), y: here.y };
        const cost =
          costOf(rowOfDiscs(centre, 0, width, size), size / 2, box, obstacles, lowest) + pull + (side < 0 ? 0.4 : 0);
        consider({
          x: here.x + side * offset,
          y: here.y + size * 0.34,
          angle: 0,
          anchor: side > 0 ? 'start' : 'end',
          text,
          cost
        });
      }
      continue;
    }
    if (s < width * 0.4 || s > line.length - width * 0.4) continue;
    const middle = { x: (before.x + after.x) / 2, y: (before.y + after.y) / 2 };
    const bend = Math.hypot(here.x - middle.x, here.y - middle.y);
    for (const side of [-1, 1]) {
      const away = side * (offset + Math.min(bend, 8));
      const centre = { x: here.x - away * Math.sin(level), y: here.y + away * Math.cos(level) };
      const cost =
        costOf(rowOfDiscs(centre, level, width, size), size / 2, box, obstacles, lowest) +
        pull +
        bend * 0.5 +
        (side > 0 ? 0.4 : 0);
      const base = size * 0.32;
      consider({
        x: centre.x - base * Math.sin(level),
        y: centre.y + base * Math.cos(level),
        angle: (level * 180) / Math.PI,
        anchor: 'middle',
        text,
        cost
      });
    }
  }
  return best;
}

/** A label beside a point, `reach` away, in the freest of eight places; ties go to the upper right. */
export function placeAround(
  at: Point,
  text: string,
  { size, box, obstacles, reach }: { size: number; box: Rect; obstacles: readonly Disc[]; reach: number }
): PlacedLabel {
  const width = textWidth(text, size);
  const diagonal = reach * 0.74;
  const places: [number, number, PlacedLabel['anchor']][] = [
    [diagonal, -diagonal, 'start'],
    [reach, 0, 'start'],
    [diagonal, diagonal, 'start'],
    [0, -reach, 'middle'],
    [-diagonal, diagonal, 'end'],
    [-diagonal, -diagonal, 'end'],
    [-reach, 0, 'end'],
    [0, reach, 'middle']
  ];
  const options = places.map(([dx, dy, anchor], rank) => {
    const lift = dy === 0 ? 0 : dy < 0 ? -size * 0.3 : size * 0.3;
    const x = at.x + dx;
    const middle = at.y + dy + lift;
    const centre = { x: x + (anchor === 'start' ? width / 2 : anchor === 'end' ? -width / 2 : 0), y: middle };
    const cost = costOf(rowOfDiscs(centre, 0, width, size), size / 2, box, obstacles) + rank * 0.25;
    return { x, y: middle + size * 0.34, angle: 0, anchor, text, cost };
  });
  return options.reduce((a, b) => (b.cost < a.cost ? b : a));
}

/** A level label in the freest spot among `candidates` (centres). Null when every spot touches something. */
export function placeWithin(
  candidates: readonly Point[],
  text: string,
  { size, box, obstacles }: { size: number; box: Rect; obstacles: readonly Disc[] }
): PlacedLabel | null {
  const width = textWidth(text, size);
  let best: PlacedLabel | null = null;
  for (const centre of candidates) {
    const cost = costOf(rowOfDiscs(centre, 0, width, size + 4), size / 2 + 2, box, obstacles);
    if (cost < (best?.cost ?? TOUCHES))
      best = { x: centre.x, y: centre.y + size * 0.34, angle: 0, anchor: 'middle', text, cost };
  }
  return best;
}

/**
 * Moves positions apart to at least `gap`, within [low, high], changing each as little as a sweep down and a sweep up
 * allow. The answers are in the order of the input. When there is no room for all, they share it evenly.
 */
export function spread(positions: readonly number[], gap: number, low: number, high: number): number[] {
  const order = positions.map((_, i) => i).sort((a, b) => (positions[a] ?? 0) - (positions[b] ?? 0));
  const room = Math.min(gap, order.length > 1 ? (high - low) / (order.length - 1) : gap);
  const out = positions.map((p) => Math.min(high, Math.max(low, p)));
  let floor = low - room;
  for (const i of order) floor = out[i] = Math.max(out[i] ?? 0, floor + room);
  let ceiling = high + room;
  for (const i of [...order].reverse()) ceiling = out[i] = Math.min(out[i] ?? 0, ceiling - room);
  return out;
}

/** "1–3, 5": run numbers that share a place, shortened. Labels that are not whole numbers are only joined. */
export function joinLabels(labels: readonly string[]): string {
  if (!labels.every((label) => /^\d+$/.test(label))) return labels.join(', ');
  const numbers = [...new Set(labels.map(Number))].sort((a, b) => a - b);
  const runs: [number, number][] = [];
  for (const n of numbers) {
    const last = runs[runs.length - 1];
    if (last && n === last[1] + 1) last[1] = n;
    else runs.push([n, n]);
  }
  return runs.map(([a, b]) => (a === b ? `${a}` : b === a + 1 ? `${a}, ${b}` : `${a}–${b}`)).join(', ');
}
