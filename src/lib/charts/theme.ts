/** What the canvas must know of the design tokens, read where it stands so that theme, print and contrast modes follow. */
export interface ChartTheme {
  ink: string;
  quiet: string;
  first: string;
  firstInk: string;
  second: string;
  secondInk: string;
  halo: string;
  plot: string;
  grid: string;
  axis: string;
  tick: string;
  font: string;
  /** Length of a redrawing in ms; 0 where motion is reduced. */
  redrawMs: number;
}

export function readTheme(element: Element): ChartTheme {
  const style = getComputedStyle(element);
  const forced = matchMedia('(forced-colors: active)').matches;
  const token = (name: string, system: string) => (forced ? system : style.getPropertyValue(name).trim()) || system;
  const redraw = style.getPropertyValue('--t-redraw').trim();
  return {
    ink: token('--ink', 'CanvasText'),
    quiet: token('--ink-3', 'CanvasText'),
    first: token('--sp-a', 'CanvasText'),
    firstInk: token('--sp-a-ink', 'CanvasText'),
    second: token('--sp-b', 'CanvasText'),
    secondInk: token('--sp-b-ink', 'CanvasText'),
    halo: token('--halo', 'Canvas'),
    plot: token('--plot', 'Canvas'),
    grid: token('--grid', 'Canvas'),
    axis: token('--axis', 'CanvasText'),
    tick: token('--tick', 'CanvasText'),
    font: style.getPropertyValue('--font-ui').trim() || 'sans-serif',
    redrawMs: parseFloat(redraw) * (redraw.endsWith('ms') ? 1 : 1000) || 0
  };
}

const MODES = ['(prefers-color-scheme: dark)', '(forced-colors: active)', '(prefers-reduced-motion: reduce)', 'print'];

/** Calls back whenever the tokens may have changed. @returns what stops it. */
export function watchTheme(onchange: () => void): () => void {
  const observer = new MutationObserver(onchange);
  observer.observe(document.documentElement, { attributes: true, attributeFilter: ['data-theme', 'class', 'style'] });
  const queries = MODES.map((query) => matchMedia(query));
  for (const query of queries) query.addEventListener('change', onchange);
  return () => {
    observer.disconnect();
    for (const query of queries) query.removeEventListener('change', onchange);
  };
}
