/**
 * The state plane as it will stand on paper: everything in pixels for one width, with labels placed. Pure, so that the
 * server's first drawing, the browser's redrawings and the tests agree.
 */
import { bladesPath } from './bladeField';
import { glyphOf } from './glyphs';
import {
  labelDiscs,
  lineDiscs,
  placeAlong,
  placeAround,
  placeWithin,
  textWidth,
  TOUCHES,
  type Disc,
  type PlacedLabel
} from './labels';
import { arrowsAlong, clipLine, inside, insidePolygon, linePath, measure, simplify, type Rect } from './path';
import { formatValue, linearScale, niceTicks, tickFormat, withUnit, type Scale } from './scales';
import type {
  AxisTitle,
  BasinTint,
  FieldArrow,
  FieldFunction,
  PlaneBasin,
  PlaneContinuum,
  PlaneCount,
  PlaneCycle,
  PlaneEquilibrium,
  PlaneIsocline,
  PlaneSeparatrix,
  PlaneStart,
  PlaneTrajectory,
  PlaneWindow,
  Point,
  SpeciesKey,
  SurveyPoint
} from './types';

export interface PlaneData {
  window: PlaneWindow;
  axes: { x: AxisTitle; y: AxisTitle };
  isoclines?: PlaneIsocline[];
  field?: FieldArrow[] | FieldFunction;
  equilibria?: PlaneEquilibrium[];
  continua?: PlaneContinuum[];
  separatrices?: PlaneSeparatrix[];
  cycles?: PlaneCycle[];
  trajectories?: PlaneTrajectory[];
  counts?: PlaneCount[];
  starts?: PlaneStart[];
  surveyPoints?: SurveyPoint[];
  basins?: PlaneBasin[];
}

export type LabelTone = 'first' | 'second' | 'ink' | 'quiet' | 'cycles' | 'letter' | 'count';
export interface PlaneLabel extends PlacedLabel {
  tone: LabelTone;
  size: number;
}
export interface Chevron extends Point {
  /** Degrees. */
  angle: number;
  main: boolean;
}
/** A thing the arrow keys step to, with what is read out there. */
export interface PlaneStop extends Point {
  px: number;
  py: number;
  /** Letter of an equilibrium; null for a count, start or survey. */
  letter: string | null;
  text: string;
}

export interface PlaneDrawing {
  width: number;
  height: number;
  box: Rect;
  X: Scale;
  Y: Scale;
  xTicks: { at: number; text: string }[];
  yTicks: { at: number; text: string }[];
  xTitle: string;
  yTitle: string;
  basins: { tint: BasinTint; path: string }[];
  blades: string;
  isoclines: { species: SpeciesKey; path: string }[];
  continua: { stable: boolean | null; path: string }[];
  separatrices: string[];
  cycles: { stable: boolean; path: string }[];
  trajectories: { main: boolean; path: string }[];
  chevrons: Chevron[];
  surveyTrack: string;
  surveyDots: Point[];
  counts: (Point & { barX: [number, number] | null; barY: [number, number] | null })[];
  starts: Point[];
  glyphs: (Point & { equilibrium: PlaneEquilibrium })[];
  labels: PlaneLabel[];
  stops: PlaneStop[];
}

export const GLYPH_RADIUS = 7.5;
const LINE_LABEL = 11;
const POINT_LABEL = 12;
const LETTER = 14;

/** Height that suits a width: nearly square, never taller than a laptop's window leaves room for. */
export const planeHeight = (width: number): number =>
  Math.round(Math.min(560, width < 400 ? width * 1.02 : width * 0.94));

/** "Noble crayfish 178, Signal crayfish 0 per 100 m": both values with their units, said once when they are the same. */
export function readPoint(p: Point, axes: PlaneData['axes'], digits = 3): string {
  const x = `${axes.x.label} ${formatValue(p.x, digits)}`;
  const y = `${axes.y.label} ${formatValue(p.y, digits)}`;
  if (axes.x.unit === axes.y.unit) return axes.x.unit ? `${x}, ${y} ${axes.x.unit}` : `${x}, ${y}`;
  return `${x} ${axes.x.unit}, ${y} ${axes.y.unit}`;
}

function fitTitle(axis: AxisTitle, room: number): string {
  const full = withUnit(axis.label, axis.unit);
  if (textWidth(full, 12) <= room || !axis.short) return full;
  return withUnit(axis.short, axis.unit);
}

/** @param width of the drawing in px, at least 200. @param height defaults to `planeHeight`. */
export function layOutPlane(data: PlaneData, width: number, height = planeHeight(width)): PlaneDrawing {
  const { xMax, yMax } = data.window;
  const yValues = niceTicks(0, yMax, Math.max(3, Math.round((height - 70) / 66)));
  const yText = tickFormat(yValues);
  const left = Math.max(30, Math.ceil(Math.max(0, ...yValues.map((v) => textWidth(yText(v), 11.5)))) + 17);
  const box: Rect = { x0: left, y0: 26, x1: width - 13, y1: height - 46 };
  const X = linearScale(0, xMax, box.x0, box.x1);
  const Y = linearScale(0, yMax, box.y1, box.y0);
  const xValues = niceTicks(0, xMax, Math.max(3, Math.round((box.x1 - box.x0) / 74)));
  const xText = tickFormat(xValues);
  const toPaper = (p: Point): Point => ({ x: X(p.x), y: Y(p.y) });
  const pieces = (points: Point[]) => clipLine(points.map(toPaper), box).map((piece) => simplify(piece));
  const onPlot = <T extends Point>(points: T[] | undefined) =>
    (points ?? []).filter((p) => inside(toPaper(p), box, -0.5));

  const isoclines = (data.isoclines ?? []).map((line) => ({ ...line, pieces: pieces(line.points) }));
  const separatrices = (data.separatrices ?? []).map((line) => ({ ...line, pieces: pieces(line.points) }));
  const cycles = (data.cycles ?? []).map((line) => ({ ...line, pieces: pieces(closed(line.points)) }));
  const continua = (data.continua ?? []).map((line) => ({ ...line, pieces: pieces(line.points) }));
  const trajectories = (data.trajectories ?? []).map((line) => ({ ...line, pieces: pieces(line.points) }));
  const glyphs = onPlot(data.equilibria).map((equilibrium) => ({ ...toPaper(equilibrium), equilibrium }));
  const surveys = onPlot(data.surveyPoints);
  const surveyDots = surveys.map(toPaper);
  const counted = onPlot(data.counts);
  const counts = counted.map((c) => ({
    ...toPaper(c),
    barX: c.seX
      ? ([X(Math.max(0, c.x - 1.96 * c.seX)), Math.min(box.x1, X(c.x + 1.96 * c.seX))] as [number, number])
      : null,
    barY: c.seY
      ? ([Y(Math.max(0, c.y - 1.96 * c.seY)), Math.max(box.y0, Y(c.y + 1.96 * c.seY))] as [number, number])
      : null
  }));
  const startPoints = onPlot(data.starts);
  const starts = startPoints.map(toPaper);

  const glyphDiscs: Disc[] = glyphs.map((g) => ({
    x: g.x,
    y: g.y,
    r: glyphOf(g.equilibrium.kind, GLYPH_RADIUS).clear + 1,
    weight: 100
  }));
  const chevrons: Chevron[] = [];
  const addChevrons = (piece: Point[], main: boolean, options: Parameters<typeof arrowsAlong>[1]) => {
    for (const mark of arrowsAlong(piece, options)) {
      if (glyphDiscs.some((d) => Math.hypot(d.x - mark.x, d.y - mark.y) < d.r + 5)) continue;
      chevrons.push({ ...mark, angle: (mark.angle * 180) / Math.PI, main });
    }
  };
  for (const t of trajectories)
    for (const piece of t.pieces)
      addChevrons(piece, t.emphasised === true, t.emphasised ? { gap: 84, most: 3 } : { first: 58, gap: 170, most: 2 });
  for (const c of cycles)
    for (const piece of c.pieces) {
      const length = measure(piece).length;
      addChevrons(piece, true, { first: length * 0.1, gap: Math.max(70, length / 4), most: 4 });
    }

  const obstacles: Disc[] = [
    ...glyphDiscs,
    ...surveyDots.map((p) => ({ ...p, r: 4, weight: 20 })),
    ...[...counts, ...starts].map((p) => ({ x: p.x, y: p.y, r: 6, weight: 100 })),
    ...counts.flatMap((c) => [
      ...(c.barX
        ? lineDiscs(
            [
              { x: c.barX[0], y: c.y },
              { x: c.barX[1], y: c.y }
            ],
            3
          )
        : []),
      ...(c.barY
        ? lineDiscs(
            [
              { x: c.x, y: c.barY[0] },
              { x: c.x, y: c.barY[1] }
            ],
            3
          )
        : [])
    ]),
    ...isoclines.flatMap((l) => l.pieces.flatMap((p) => lineDiscs(p, 1.6, l.species === 'second' ? 2.5 : 1.5))),
    ...[...separatrices, ...cycles, ...continua].flatMap((l) => l.pieces.flatMap((p) => lineDiscs(p, 1.2))),
    ...trajectories.flatMap((t) => t.pieces.flatMap((p) => lineDiscs(p, t.emphasised ? 1.4 : 0.5, 1))),
    ...chevrons.map((c) => ({ x: c.x, y: c.y, r: 5, weight: 4 }))
  ];
  const labels: PlaneLabel[] = [];
  const put = (label: PlacedLabel | null, tone: LabelTone, size: number) => {
    if (!label) return;
    labels.push({ ...label, tone, size });
    obstacles.push(...labelDiscs(label, size));
  };
  const around = (at: Point, text: string, tone: LabelTone, size: number, reach: number) =>
    put(placeAround(at, text, { size, box, obstacles, reach }), tone, size);

  for (const g of glyphs) around(g, g.equilibrium.letter, 'letter', LETTER, GLYPH_RADIUS + 6);
  counted.forEach((c, i) => around(counts[i] ?? toPaper(c), c.label, 'count', POINT_LABEL, 9));
  startPoints.forEach((s, i) => s.label && around(starts[i] ?? toPaper(s), s.label, 'ink', LINE_LABEL, 8));
  for (const t of trajectories) {
    const head = t.pieces[0]?.[0];
    const taken = head && [...counts, ...starts].some((p) => Math.hypot(p.x - head.x, p.y - head.y) < 3);
    if (head && t.label && !taken) around(head, t.label, 'quiet', LINE_LABEL, 6);
  }
  const along = (line: { pieces: Point[][] }, text: string, tone: LabelTone, prefer: number, offset = 9) => {
    const longest = line.pieces.reduce<Point[]>((a, b) => (measure(b).length > measure(a).length ? b : a), []);
    put(placeAlong(longest, text, { size: LINE_LABEL, box, obstacles, offset, prefer }), tone, LINE_LABEL);
  };
  for (const l of isoclines) if (l.label) along(l, l.label, l.species, 0.32);
  const named = new Set<string>();
  for (const l of [...separatrices].sort((a, b) => inkLength(b.pieces) - inkLength(a.pieces))) {
    const text = l.label ?? 'the divide';
    if (!named.has(text)) along(l, text, 'ink', 0.72);
    named.add(text);
  }
  for (const l of cycles)
    along(l, l.label ?? (l.stable ? 'the cycle they settle on' : 'a cycle that does not hold'), 'cycles', 0.6, 10);
  for (const l of continua) along(l, l.label ?? 'resting points all along', 'ink', 0.5);

  const basins = (data.basins ?? []).map((basin) => {
    const polygons = (basin.polygons ?? []).map((polygon) => simplify(polygon.map(toPaper)));
    const cells = (basin.cells ?? []).map((c): Rect => ({ x0: X(c.x0), y0: Y(c.y1), x1: X(c.x1), y1: Y(c.y0) }));
    const boxes = cells.map((c) =>
      linePath(
        [
          { x: c.x0, y: c.y0 },
          { x: c.x1, y: c.y0 },
          { x: c.x1, y: c.y1 },
          { x: c.x0, y: c.y1 }
        ],
        true
      )
    );
    if (basin.label) {
      const within = (p: Point) =>
        polygons.some((polygon) => insidePolygon(p, polygon)) || cells.some((c) => inside(p, c));
      const half = textWidth(basin.label, LINE_LABEL) / 2 + 9;
      const spots = grid(box, 15).filter((p) => [-half, 0, half].every((dx) => within({ x: p.x + dx, y: p.y })));
      put(placeWithin(spots, basin.label, { size: LINE_LABEL, box, obstacles }), 'quiet', LINE_LABEL);
    }
    return { tint: basin.tint, path: [...polygons.map((p) => linePath(p, true)), ...boxes].join('') };
  });
  const firstSurvey = surveys[0];
  const firstDot = surveyDots[0];
  if (firstSurvey && firstDot) {
    const label = placeAround(firstDot, firstSurvey.label, { size: LINE_LABEL, box, obstacles, reach: 6 });
    if (label.cost < TOUCHES) put(label, 'quiet', LINE_LABEL);
  }

  const stop = (p: Point, letter: string | null, text: string): PlaneStop => {
    const at = toPaper(p);
    const off = inside(at, box, -0.5) ? '' : ' (outside the plot)';
    return { x: p.x, y: p.y, px: at.x, py: at.y, letter, text: `${text}${off}: ${readPoint(p, data.axes)}` };
  };
  return {
    width,
    height,
    box,
    X,
    Y,
    xTicks: xValues.map((v) => ({ at: X(v), text: xText(v) })),
    yTicks: yValues.filter((v) => v > 0).map((v) => ({ at: Y(v), text: yText(v) })),
    xTitle: fitTitle(data.axes.x, width - 20),
    yTitle: fitTitle(data.axes.y, width - 8),
    basins,
    blades: bladesPath(data.field, X, Y, box),
    isoclines: isoclines.map((l) => ({ species: l.species, path: l.pieces.map((p) => linePath(p)).join('') })),
    continua: continua.map((l) => ({ stable: l.stable, path: l.pieces.map((p) => linePath(p)).join('') })),
    separatrices: separatrices.map((l) => l.pieces.map((p) => linePath(p)).join('')),
    cycles: cycles.map((l) => ({ stable: l.stable, path: l.pieces.map((p) => linePath(p)).join('') })),
    trajectories: trajectories.map((t) => ({
      main: t.emphasised === true,
      path: t.pieces.map((p) => linePath(p)).join('')
    })),
    chevrons,
    surveyTrack: surveyDots.length > 1 ? linePath(surveyDots) : '',
    surveyDots,
    counts,
    starts,
    glyphs,
    labels,
    stops: [
      ...(data.equilibria ?? []).map((e) => stop(e, e.letter, `${e.letter}, ${e.name}, ${e.description}`)),
      ...(data.counts ?? []).map((c) => stop(c, null, c.label)),
      ...(data.starts ?? []).map((s) => stop(s, null, `Start ${s.label}`)),
      ...(data.surveyPoints ?? []).map((s) => stop(s, null, `Survey ${s.label}`))
    ]
  };
}

const inkLength = (pieces: Point[][]) => pieces.reduce((sum, p) => sum + measure(p).length, 0);

function closed(points: Point[]): Point[] {
  const first = points[0];
  const last = points[points.length - 1];
  return first && last && (first.x !== last.x || first.y !== last.y) ? [...points, first] : points;
}

/** Candidate spots all over the plot, upper right first: the corner that is most often free. */
function grid(box: Rect, n: number): Point[] {
  const spots: Point[] = [];
  for (let j = 1; j < n; j += 1)
    for (let i = n - 1; i > 0; i -= 1)
      spots.push({ x: box.x0 + ((box.x1 - box.x0) * i) / n, y: box.y0 + ((box.y1 - box.y0) * j) / n });
  return spots;
}
