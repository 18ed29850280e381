/** chart.js behind a Svelte attachment: loaded in the browser only, made once, then told what changed. */
import type { Chart, ChartConfiguration, Plugin } from 'chart.js';
import type { Attachment } from 'svelte/attachments';
import { untrack } from 'svelte';
import { logTickFormat, logTicks, niceTicks, tickFormat } from './scales';
import { formatTime } from './seriesModel';
import { lineWeight, seriesPlugin, type PanelState } from './seriesPlugin';
import { readTheme, watchTheme, type ChartTheme } from './theme';

/** The same for every panel, so that their time axes line up; wide enough for "12 400" and a tick. */
const Y_AXIS_WIDTH = 46;

type LineConfig = ChartConfiguration<'line', { x: number; y: number }[]>;

async function loadChart(): Promise<typeof Chart> {
  const { Chart, LineController, LineElement, PointElement, LinearScale, LogarithmicScale } = await import('chart.js');
  Chart.register(LineController, LineElement, PointElement, LinearScale, LogarithmicScale);
  return Chart;
}

/** Round times for the axis, as many as the width has room for. */
export function timeTicks(tMin: number, tMax: number, origin: number, width: number): number[] {
  return niceTicks(tMin + origin, tMax + origin, Math.max(2, Math.min(10, Math.round(width / 82)))).map(
    (t) => t - origin
  );
}

/** What a panel is drawn from; `roomRight` is kept the same over panels so that their time axes line up. */
export interface PanelInput extends Omit<PanelState, 'theme' | 'cursor'> {
  height: number;
  roomRight: number;
}
export interface PlotArea {
  left: number;
  right: number;
  top: number;
  bottom: number;
}

function configOf(state: PanelInput & { theme: ChartTheme }): Omit<LineConfig, 'plugins'> {
  const { panel, data, theme, height } = state;
  const yValues =
    panel.scale === 'log'
      ? logTicks(panel.yMin, panel.yMax)
      : niceTicks(0, panel.yMax, Math.max(3, Math.round(height / 58)));
  const yText = panel.scale === 'log' ? logTickFormat : tickFormat(yValues);
  const [a = 0, b = 1] = state.timeTicks;
  const step = Math.abs(b - a) || 1;
  const font = { family: theme.font, size: 11.5 };
  return {
    type: 'line',
    data: {
      datasets: panel.lines.map(({ species, run, points }) => ({
        data: points,
        parsing: false,
        borderColor: species === 'first' ? theme.first : theme.second,
        borderWidth: lineWeight(species, run, data.runs),
        borderJoinStyle: 'round',
        pointRadius: 0,
        pointHitRadius: 0,
        clip: 4,
        // An unbroken dash: it keeps chart.js from merging samples of one pixel column, which would part the double line.
        borderDash: [100_000, 0]
      }))
    },
    options: {
      animation: theme.redrawMs > 0 ? { duration: theme.redrawMs } : false,
      responsive: true,
      maintainAspectRatio: false,
      devicePixelRatio: Math.max(2, globalThis.devicePixelRatio || 1),
      events: [],
      layout: { padding: { left: 0, top: 8, right: state.roomRight, bottom: 0 } },
      plugins: { legend: { display: false }, tooltip: { enabled: false } },
      scales: {
        x: {
          type: 'linear',
          min: panel.tMin,
          max: panel.tMax,
          border: { color: theme.axis },
          grid: { drawOnChartArea: false, tickColor: theme.axis, tickLength: 5 },
          ticks: {
            font,
            color: theme.tick,
            autoSkip: false,
            maxRotation: 0,
            callback: (t) => formatTime(Number(t), data.time, step, true)
          },
          afterBuildTicks: (axis) => {
            axis.ticks = state.timeTicks.map((value) => ({ value }));
          }
        },
        y: {
          type: panel.scale === 'log' ? 'logarithmic' : 'linear',
          min: panel.yMin,
          max: panel.yMax,
          border: { color: theme.axis },
          grid: {
            color: (tick) => (tick.tick?.value === panel.yMin ? 'transparent' : theme.grid),
            tickColor: theme.axis,
            tickLength: 5
          },
          ticks: { font, color: theme.tick, autoSkip: false, callback: (value) => yText(Number(value)) },
          afterFit: (axis) => {
            axis.width = Y_AXIS_WIDTH;
          },
          afterBuildTicks: (axis) => {
            axis.ticks = yValues.map((value) => ({ value }));
          }
        }
      }
    }
  };
}

/**
 * Draws one panel on the canvas it is attached to.
 * @param panelOf everything but the theme, read reactively: a change redraws, without making the chart anew.
 * @param cursorOf the time and run being read; a change only draws again, so that labels stay where they are.
 * @param onarea told where the plot stands on the canvas, px, whenever that may have changed.
 */
export function seriesChart(
  panelOf: () => PanelInput,
  cursorOf: () => PanelState['cursor'],
  onarea: (canvas: HTMLCanvasElement, area: PlotArea) => void
): Attachment<HTMLCanvasElement> {
  return (canvas) => {
    let chart = $state.raw<Chart<'line', { x: number; y: number }[]> | null>(null);
    let theme = $state.raw<ChartTheme>(untrack(() => readTheme(canvas)));
    let gone = false;
    let settled = false;
    let shownTheme: ChartTheme | null = null;
    const stateNow = () => ({ ...panelOf(), theme });
    const stopWatching = watchTheme(() => (theme = readTheme(canvas)));
    const report: Plugin<'line'> = { id: 'sedgelineArea', afterUpdate: ({ chartArea }) => onarea(canvas, chartArea) };
    void loadChart().then(async (Made) => {
      await document.fonts?.ready;
      if (gone) return;
      const config = untrack(() => configOf(stateNow()));
      const plugins = [seriesPlugin(() => untrack(() => ({ ...stateNow(), cursor: cursorOf() }))), report];
      chart = new Made(canvas, { ...config, plugins, options: { ...config.options, animation: false } });
    });

    $effect(() => {
      const made = chart;
      const { data, options } = configOf(stateNow());
      if (!made) return;
      // Lines are changed in place: chart.js then moves each from its old answer to the new.
      made.data.datasets = data.datasets.map((set, i) => Object.assign(made.data.datasets[i] ?? {}, set));
      made.options = options ?? {};
      // Only a new answer moves; another theme or a printed page must be right at once.
      made.update(settled && shownTheme === theme ? undefined : 'none');
      shownTheme = theme;
      settled = true;
    });
    $effect(() => {
      if (cursorOf() || settled) chart?.draw();
    });
    return () => {
      gone = true;
      stopWatching();
      untrack(() => chart)?.destroy();
    };
  };
}
