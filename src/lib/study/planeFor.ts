import {
  basinsOf,
  isoclines,
  separatrices,
  suggestWindow,
  vectorField,
  type Basins,
  type EquilibriaReport,
  type FieldArrow,
  type Isocline,
  type LimitCycle,
  type ModelSpec,
  type Separatrix
} from '$lib/dynamics';

/** Everything drawn on the state plane that follows from the model and the starts. */
export interface PlaneResults {
  /** From 0, 0 to here. */
  window: { xMax: number; yMax: number };
  isoclines: Isocline[];
  separatrices: Separatrix[];
  field: FieldArrow[];
  /** Which starts end where. */
  basins: Basins;
}

/** Columns and rows of the direction field. */
const FIELD = 24;

/**
 * Window, isoclines, divides and direction field of a model, in a window that holds its points, cycles and starts.
 * @param options.window keep this window instead, so that a picture does not jump while a slider moves
 */
export function planeFor(
  model: ModelSpec,
  report: EquilibriaReport,
  cycles: readonly LimitCycle[],
  starts: readonly { x: number; y: number }[],
  { window, shouldStop }: { window?: { xMax: number; yMax: number }; shouldStop?: () => boolean } = {}
): PlaneResults {
  const turns = cycles.map(({ xMax, yMax }) => ({ x: xMax, y: yMax }));
  const seen = starts.map(({ x, y }) => ({ x, y }));
  const frame = window ?? suggestWindow(model, report, [...seen, ...turns]);
  const divides = separatrices(model, report, frame);
  return {
    window: frame,
    isoclines: isoclines(model, frame),
    separatrices: divides,
    field: vectorField(model, frame, FIELD, FIELD),
    basins: basinsOf(model, report, divides, cycles, frame, shouldStop ? { shouldStop } : {})
  };
}
