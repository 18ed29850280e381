import { compile } from '../model/compile';
import type { ModelSpec } from '../model/spec';
import type { EquilibriaReport } from './results';

/** A part of the state plane, abundances; xMin and yMin default to 0. */
export interface PlaneRectangle {
  xMax: number;
  yMax: number;
  xMin?: number;
  yMin?: number;
}

/** The direction of change at one state. */
export interface FieldArrow {
  x: number;
  y: number;
  /** Abundance/time. */
  dx: number;
  dy: number;
}

/**
 * Rates on a grid of cell centres.
 * @param nx, ny columns and rows
 * @returns nx ny arrows, row by row from below; arrows without a finite rate are left out. Never throws.
 */
export function vectorField(spec: ModelSpec, window: PlaneRectangle, nx: number, ny: number): FieldArrow[] {
  const { xMax, yMax, xMin = 0, yMin = 0 } = window;
  const system = compile(spec);
  const rate = new Float64Array(2);
  const arrows: FieldArrow[] = [];
  for (let row = 0; row < ny; row++) {
    for (let column = 0; column < nx; column++) {
      const x = xMin + ((column + 0.5) * (xMax - xMin)) / nx;
      const y = yMin + ((row + 0.5) * (yMax - yMin)) / ny;
      system.rhs(x, y, rate);
      if (Number.isFinite(rate[0]) && Number.isFinite(rate[1])) arrows.push({ x, y, dx: rate[0]!, dy: rate[1]! });
    }
  }
  return arrows;
}

/** Room left beyond the outermost thing that must be seen. */
const ROOM = 1.2;

/** The next of 1, 1.2, 1.5, 2, 2.5, 3, 4, 5, 6, 8 times a power of ten: an axis that ends on a number one can read. */
function roundUp(value: number): number {
  const power = 10 ** Math.floor(Math.log10(value));
  const steps = [1, 1.2, 1.5, 2, 2.5, 3, 4, 5, 6, 8, 10];
  const step = steps.find((candidate) => candidate * power >= value * (1 - 1e-9)) ?? 10;
  return Number((step * power).toPrecision(3));
}

function ceilingOf(values: number[]): number {
  const largest = Math.max(0, ...values.filter((value) => Number.isFinite(value)));
  return largest > 0 ? largest : 0;
}

/** Abundances that the model itself names: capacities and the scale at which feeding or competition bites. */
function namedScales(spec: ModelSpec): { x: number; y: number } {
  const capacity = (growth: { kind: string; K?: number } | undefined) => growth?.K ?? 0;
  const x = capacity(spec.first.growth);
  const y = capacity(spec.second.growth);
  if (spec.interaction === 'competition') {
    const terms = spec.competition;
    const [byFirst, bySecond] =
      terms.form === 'encounters'
        ? [spec.second.growth.r / terms.b21, spec.first.growth.r / terms.b12]
        : [y / terms.alpha21, x / terms.alpha12];
    const finite = (value: number, fallback: number) => (Number.isFinite(value) && value > 0 ? value : fallback);
    return { x: x || finite(byFirst, 1), y: y || finite(bySecond, 1) };
  }
  const { a, e } = spec.feeding;
  const power = spec.feeding.response === 'holling-3' ? 0.5 : 1;
  const death = (spec.second.mortality ?? spec.second.growth?.r ?? 0) + (spec.second.removal?.effort ?? 0);
  const needed = e > 0 && death > 0 ? (death / (e * a)) ** power : 1;
  const carried = Math.abs(spec.first.growth.r) / (a * (power === 0.5 ? needed : 1));
  return { x: x || 2 * needed, y: y || carried || 1 };
}

/**
 * A frame in which everything that matters is seen: equilibria, ends of continua, starts, capacities.
 * @param report of the same model
 * @param starts states that must be inside
 * @returns upper ends of both axes, round numbers; the lower ends are 0. Never throws.
 */
export function suggestWindow(
  spec: ModelSpec,
  report: Pick<EquilibriaReport, 'equilibria' | 'continua' | 'absorbing'>,
  starts: readonly { x: number; y: number }[] = []
): { xMax: number; yMax: number } {
  const seen = [
    ...report.equilibria.filter(({ feasible }) => feasible),
    ...report.absorbing,
    ...report.continua.flatMap(({ from, to }) => (to ? [from, to] : [from])),
    ...starts
  ];
  const named = namedScales(spec);
  const x = ceilingOf([...seen.map((point) => point.x), named.x]);
  const ySeen = ceilingOf(seen.map((point) => point.y));
  // The capacity of a consumer may never be approached; what rests or starts decides, where anything does.
  const y = spec.interaction === 'competition' ? Math.max(ySeen, named.y) : 1.5 * ySeen || named.y;
  return { xMax: roundUp(ROOM * (x || 1)), yMax: roundUp(ROOM * (y || 1)) };
}
