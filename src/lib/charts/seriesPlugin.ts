/** What the design asks of a time series beyond chart.js: double lines, markers, direct labels, limits, events. */
import type { Chart, Plugin } from 'chart.js';
import {
  joinLabels,
  lineDiscs,
  placeAround,
  placeWithin,
  labelDiscs,
  spread,
  textWidth,
  type Disc,
  type PlacedLabel
} from './labels';
import { linearScale, logScale } from './scales';
import { valueAt, type SeriesData, type SeriesPanel } from './seriesModel';
import type { ChartTheme } from './theme';
import type { SeriesRun, SpeciesKey } from './types';

export interface PanelState {
  data: SeriesData;
  panel: SeriesPanel;
  theme: ChartTheme;
  timeTicks: number[];
  /** Time and run under the pointer or the arrow keys. */
  cursor: { t: number; run: SeriesRun } | null;
  narrow: boolean;
}
export interface EndLabel {
  text: string;
  species: SpeciesKey;
  /** Where the line ends and where its label stands, px. */
  y: number;
  labelY: number;
}

const LABEL = 12;
const SMALL = 11;
/** Lines that end this near share a label. */
const MERGE_PX = 8;
const LABEL_GAP = 15;

/** Stroke of a species line: the emphasised run, or an only run, is the heavier. */
export function lineWeight(species: SpeciesKey, run: SeriesRun, runs: SeriesRun[]): number {
  const main = runs.length === 1 || run.emphasised === true;
  const base = main ? 2.3 : runs.some((r) => r.emphasised) ? 1.4 : 1.7;
  // The double line needs two visible rails and a gap: it is drawn twice as broad, and never finer than 3.4 px.
  return species === 'first' ? base : Math.max(3.4, base * 2);
}

type EndState = Pick<PanelState, 'data' | 'panel' | 'narrow'>;
const nameOf = (state: EndState, species: SpeciesKey) => {
  const { name, short } = state.data[species];
  return state.narrow || state.data.runs.length > 1 ? (short ?? name) : name;
};

/** Room the names at the right ends need, px, for a panel of the given height. */
export function endRoom(state: EndState, height: number): number {
  const { panel } = state;
  const scale = panel.scale === 'log' ? logScale : linearScale;
  const names = endLabels(state, scale(panel.yMin, panel.yMax, height - 24, 8), 12, height - 28);
  return Math.max(24, ...names.map((name) => textWidth(name.text, LABEL))) + 18;
}

/** Names at the right ends. Runs that end in one place share a label: "Noble 1–3". */
export function endLabels(state: EndState, toY: (value: number) => number, low: number, high: number): EndLabel[] {
  const several = state.data.runs.length > 1;
  const groups: { species: SpeciesKey; y: number; runs: string[] }[] = [];
  for (const { species, run } of state.panel.lines) {
    const value = run[species][run[species].length - 1];
    if (value === undefined || !Number.isFinite(value)) continue;
    const y = Math.min(high, Math.max(low, toY(value)));
    const near = groups.find((g) => g.species === species && Math.abs(g.y - y) < MERGE_PX);
    if (near) near.runs.push(run.label);
    else groups.push({ species, y, runs: [run.label] });
  }
  const places = spread(
    groups.map((g) => g.y),
    LABEL_GAP,
    low,
    high
  );
  return groups.map((g, i) => ({
    species: g.species,
    text: several ? `${nameOf(state, g.species)}${runsAtEnd(g.runs, state.narrow)}` : nameOf(state, g.species),
    y: g.y,
    labelY: places[i] ?? g.y
  }));
}

/** A long list would take the plot's room on a phone: there it is counted, and the starts still carry the numbers. */
function runsAtEnd(runs: string[], narrow: boolean): string {
  const list = joinLabels(runs);
  return narrow && list.length > 6 ? `, ${runs.length} runs` : ` ${list}`;
}

function mark(ctx: CanvasRenderingContext2D, species: SpeciesKey, x: number, y: number, theme: ChartTheme, size = 1) {
  ctx.beginPath();
  if (species === 'first') ctx.arc(x, y, 3.7 * size, 0, 2 * Math.PI);
  else {
    const r = 4.9 * size;
    ctx.moveTo(x, y - r);
    ctx.lineTo(x + r, y);
    ctx.lineTo(x, y + r);
    ctx.lineTo(x - r, y);
    ctx.closePath();
  }
  ctx.fillStyle = species === 'first' ? theme.first : theme.second;
  ctx.strokeStyle = theme.halo;
  ctx.lineWidth = 1.4;
  ctx.stroke();
  ctx.fill();
}

function write(
  ctx: CanvasRenderingContext2D,
  label: Pick<PlacedLabel, 'x' | 'y' | 'anchor' | 'text'>,
  colour: string,
  halo: string,
  font: string
) {
  ctx.font = font;
  ctx.textAlign = label.anchor === 'middle' ? 'center' : label.anchor;
  ctx.textBaseline = 'alphabetic';
  ctx.lineJoin = 'round';
  ctx.lineWidth = 4;
  ctx.strokeStyle = halo;
  ctx.strokeText(label.text, label.x, label.y);
  ctx.fillStyle = colour;
  ctx.fillText(label.text, label.x, label.y);
}

interface Placed {
  label: PlacedLabel;
  colour: string;
}

/** Labels inside the plot, placed once per layout: they must not move while the pointer does. */
function placeLabels(chart: Chart, state: PanelState): Placed[] {
  const { chartArea: area, scales } = chart;
  const { x: X, y: Y } = scales;
  if (!X || !Y) return [];
  const { panel, data, theme } = state;
  const box = { x0: area.left, y0: area.top, x1: area.right, y1: area.bottom };
  const obstacles: Disc[] = panel.lines.flatMap((line) =>
    lineDiscs(
      line.points
        .filter((p) => Number.isFinite(p.y))
        .map((p) => ({ x: X.getPixelForValue(p.x), y: Y.getPixelForValue(p.y) })),
      2,
      line.species === 'second' ? 3 : 2,
      6
    )
  );
  const placed: Placed[] = [];
  const keep = (label: PlacedLabel | null, colour: string, size: number) => {
    if (!label) return;
    placed.push({ label, colour });
    obstacles.push(...labelDiscs(label, size));
  };
  const inkOf = (species: SpeciesKey | 'both' | undefined) =>
    species === 'first' ? theme.firstInk : species === 'second' ? theme.secondInk : theme.ink;

  if (data.runs.length > 1) {
    const starts = panel.lines.flatMap((line) => {
      const p = line.points.find((point) => Number.isFinite(point.y));
      return p ? [{ y: Y.getPixelForValue(p.y), line }] : [];
    });
    const places = spread(
      starts.map((s) => s.y - 7),
      12,
      area.top + 6,
      area.bottom - 4
    );
    starts.forEach((s, i) => {
      const y = (places[i] ?? s.y) + SMALL * 0.34;
      keep(
        { x: area.left + 6, y, angle: 0, anchor: 'start', text: s.line.run.label, cost: 0 },
        inkOf(s.line.species),
        SMALL
      );
    });
  }
  for (const event of data.events ?? []) {
    if (event.value === undefined || (event.species && !panel.species.includes(event.species))) continue;
    obstacles.push({ x: X.getPixelForValue(event.t), y: Y.getPixelForValue(event.value), r: 8, weight: 100 });
  }
  for (const event of data.events ?? []) {
    const x = X.getPixelForValue(event.t);
    if (event.value !== undefined && (!event.species || panel.species.includes(event.species))) {
      keep(
        placeAround({ x, y: Y.getPixelForValue(event.value) }, event.label, { size: SMALL, box, obstacles, reach: 10 }),
        theme.ink,
        SMALL
      );
    } else if (event.value === undefined) {
      const half = textWidth(event.label, SMALL) / 2 + 5;
      const rows = [10, 24, 38, 52].flatMap((dy) => [half, -half].map((dx) => ({ x: x + dx, y: area.top + dy })));
      keep(placeWithin(rows, event.label, { size: SMALL, box, obstacles }), theme.ink, SMALL);
    }
  }
  for (const threshold of shownThresholds(state)) {
    const y = Y.getPixelForValue(threshold.value);
    const half = textWidth(threshold.label, SMALL) / 2 + 6;
    const spots = [1, 0.9, 0.8, 0.7, 0.6, 0.5, 0.4, 0.3, 0.2, 0.1].flatMap((share) =>
      [-9, 10].map((dy) => ({ x: area.left + half + share * (area.right - area.left - 2 * half), y: y + dy }))
    );
    keep(placeWithin(spots, threshold.label, { size: SMALL, box, obstacles }), inkOf(threshold.species), SMALL);
  }
  for (const period of data.periods ?? []) {
    const [from, to] = [
      Math.max(area.left, X.getPixelForValue(period.from)),
      Math.min(area.right, X.getPixelForValue(period.to))
    ];
    const rows = [10, 24, 38].map((dy) => ({ x: (from + to) / 2, y: area.top + dy }));
    keep(placeWithin(rows, period.label, { size: SMALL, box, obstacles }), theme.quiet, SMALL);
  }
  return placed;
}

const shownThresholds = ({ data, panel }: PanelState) =>
  (data.thresholds ?? []).filter(
    (t) => (t.species === 'both' || panel.species.includes(t.species)) && t.value <= panel.yMax && t.value >= panel.yMin
  );

/** @param state read anew at every drawing, so that one plugin serves a chart for its life. */
export function seriesPlugin(state: () => PanelState): Plugin<'line'> {
  let labels: Placed[] = [];
  const clipped = (chart: Chart, draw: (ctx: CanvasRenderingContext2D) => void) => {
    const { ctx, chartArea: area } = chart;
    ctx.save();
    ctx.beginPath();
    ctx.rect(area.left, area.top - 6, area.right - area.left + 6, area.bottom - area.top + 12);
    ctx.clip();
    draw(ctx);
    ctx.restore();
  };
  return {
    id: 'sedgelineSeries',
    afterUpdate(chart) {
      labels = placeLabels(chart as unknown as Chart, state());
    },
    beforeDraw(chart) {
      const { ctx, chartArea: area, scales } = chart;
      const { theme, data } = state();
      const { x: X } = scales;
      ctx.save();
      ctx.fillStyle = theme.plot;
      ctx.fillRect(area.left, area.top, area.right - area.left, area.bottom - area.top);
      ctx.fillStyle = theme.ink;
      ctx.globalAlpha = 0.05;
      for (const period of data.periods ?? []) {
        if (!X) break;
        const from = Math.max(area.left, X.getPixelForValue(period.from));
        const to = Math.min(area.right, X.getPixelForValue(period.to));
        if (to > from) ctx.fillRect(from, area.top, to - from, area.bottom - area.top);
      }
      ctx.restore();
    },
    beforeDatasetsDraw(chart) {
      const now = state();
      const { x: X, y: Y } = chart.scales;
      const { left, right, top, bottom } = chart.chartArea;
      if (!X || !Y) return;
      clipped(chart as unknown as Chart, (ctx) => {
        ctx.lineWidth = 1.4;
        ctx.setLineDash([2, 3]);
        for (const threshold of shownThresholds(now)) {
          const { first, second, ink } = now.theme;
          ctx.strokeStyle = threshold.species === 'first' ? first : threshold.species === 'second' ? second : ink;
          ctx.beginPath();
          ctx.moveTo(left, Y.getPixelForValue(threshold.value));
          ctx.lineTo(right, Y.getPixelForValue(threshold.value));
          ctx.stroke();
        }
        ctx.setLineDash([]);
        ctx.lineWidth = 1;
        ctx.strokeStyle = now.theme.quiet;
        for (const t of [
          ...(now.data.events ?? []).filter((e) => e.value === undefined).map((e) => e.t),
          ...(now.cursor ? [now.cursor.t] : [])
        ]) {
          ctx.beginPath();
          ctx.moveTo(X.getPixelForValue(t), top);
          ctx.lineTo(X.getPixelForValue(t), bottom);
          ctx.stroke();
        }
      });
    },
    afterDatasetDraw(chart, { index, meta }) {
      const now = state();
      const line = now.panel.lines[index];
      if (line?.species !== 'second') return;
      clipped(chart as unknown as Chart, (ctx) => {
        ctx.beginPath();
        let pen = false;
        for (const point of meta.data) {
          if (Number.isNaN(point.y)) pen = false;
          else if (pen) ctx.lineTo(point.x, point.y);
          else {
            ctx.moveTo(point.x, point.y);
            pen = true;
          }
        }
        ctx.lineJoin = 'round';
        ctx.strokeStyle = now.theme.halo;
        ctx.lineWidth = lineWeight('second', line.run, now.data.runs) * 0.36;
        ctx.stroke();
      });
    },
    afterDatasetsDraw(chart) {
      const now = state();
      const { panel, data, theme } = now;
      const { ctx, chartArea: area, scales } = chart;
      const { x: X, y: Y } = scales;
      if (!X || !Y) return;
      const toY = (value: number) => Y.getPixelForValue(value);
      const shows = (value: number | null | undefined): value is number =>
        value !== null && value !== undefined && Number.isFinite(value) && value >= panel.yMin * (1 - 1e-9);
      ctx.save();
      for (const count of (data.counts ?? []).filter((c) => panel.species.includes(c.species) && shows(c.value))) {
        const x = X.getPixelForValue(count.t);
        if (count.se) {
          ctx.strokeStyle = count.species === 'first' ? theme.first : theme.second;
          ctx.lineWidth = 1.3;
          ctx.beginPath();
          ctx.moveTo(x, toY(Math.max(panel.yMin, count.value - count.se)));
          ctx.lineTo(x, toY(Math.min(panel.yMax, count.value + count.se)));
          ctx.stroke();
        }
        mark(ctx, count.species, x, toY(count.value), theme);
      }
      for (const { species, run } of panel.lines) {
        const heavy = data.runs.length === 1 || run.emphasised === true;
        const last = run.t[run.t.length - 1] ?? panel.tMax;
        const along = heavy && !data.counts?.length ? now.timeTicks.filter((t) => t > panel.tMin && t < last) : [];
        for (const t of [...along, last]) {
          const value = valueAt(run, species, t);
          if (shows(value))
            mark(ctx, species, X.getPixelForValue(t), toY(value), theme, heavy ? (t === last ? 1 : 0.86) : 0.8);
        }
      }
      for (const event of data.events ?? []) {
        if (!shows(event.value) || (event.species && !panel.species.includes(event.species))) continue;
        ctx.beginPath();
        ctx.arc(X.getPixelForValue(event.t), toY(event.value), 5.6, 0, 2 * Math.PI);
        ctx.lineWidth = 1.9;
        ctx.strokeStyle = theme.ink;
        ctx.stroke();
      }
      if (now.cursor) {
        for (const species of panel.species) {
          const value = valueAt(now.cursor.run, species, now.cursor.t);
          if (shows(value)) mark(ctx, species, X.getPixelForValue(now.cursor.t), toY(value), theme, 1.2);
        }
      }
      for (const { label, colour } of labels) write(ctx, label, colour, theme.halo, `500 ${SMALL}px ${theme.font}`);
      for (const end of endLabels(now, toY, area.top + 4, area.bottom - 4)) {
        const x = area.right + 10;
        if (Math.abs(end.labelY - end.y) > 3) {
          ctx.beginPath();
          ctx.moveTo(area.right + 4, end.y);
          ctx.lineTo(x + 1, end.labelY);
          ctx.lineWidth = 1;
          ctx.strokeStyle = theme.quiet;
          ctx.stroke();
        }
        const colour = end.species === 'first' ? theme.firstInk : theme.secondInk;
        ctx.font = `550 ${LABEL}px ${theme.font}`;
        ctx.textAlign = 'start';
        ctx.textBaseline = 'alphabetic';
        ctx.fillStyle = colour;
        ctx.fillText(end.text, x + 3, end.labelY + LABEL * 0.34);
      }
      ctx.restore();
    }
  };
}
