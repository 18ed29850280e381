/**
 * What the charts are given: plain values in data units. The charts know no study, no model and no user; a page turns
 * what it knows into these shapes.
 */

export interface Point {
  x: number;
  y: number;
}
export type SpeciesKey = 'first' | 'second';

/** An axis title such as "Noble crayfish per 100 m of bank"; `short` replaces `label` where there is little room. */
export interface AxisTitle {
  label: string;
  unit: string;
  short?: string;
}

/** Upper corner of the plane; the lower corner is always 0, 0. */
export interface PlaneWindow {
  xMax: number;
  yMax: number;
}

export type EquilibriumShape =
  'node' | 'spiral' | 'saddle' | 'centre' | 'star' | 'degenerate' | 'non-hyperbolic' | 'held';

export interface PlaneEquilibrium extends Point {
  /** Drawn as the glyph's shape; `held` is a state kept only by a quota. */
  kind: EquilibriumShape;
  /** Drawn as the glyph's fill: filled holds, hollow does not, half filled is undecided (null). */
  stable: boolean | null;
  /** Ties the glyph to its table row: A, B, C. */
  letter: string;
  /** Who is present: "Noble only". */
  name: string;
  /** The class in words: "stable node". */
  description: string;
}

export interface PlaneIsocline {
  species: SpeciesKey;
  points: Point[];
  /** Set along the line: "noble holds steady". */
  label?: string;
}
/** Direction of change at a point, in data units; only its direction is drawn. */
export interface FieldArrow extends Point {
  dx: number;
  dy: number;
}
/** Direction of change anywhere in the window. */
export type FieldFunction = (x: number, y: number) => { dx: number; dy: number };

/** A whole curve of equilibria. */
export interface PlaneContinuum {
  points: Point[];
  stable: boolean | null;
  label?: string;
}
export interface PlaneSeparatrix {
  points: Point[];
  /** Defaults to "the divide". */
  label?: string;
}
export interface PlaneCycle {
  points: Point[];
  stable: boolean;
  label?: string;
}
export interface PlaneTrajectory {
  points: Point[];
  /** A short mark at the start of the path, usually a run number; "" draws none. */
  label: string;
  emphasised?: boolean;
}
/** Counted abundances: a dot, with bars of 1.96 standard errors where they are known. */
export interface PlaneCount extends Point {
  label: string;
  seX?: number;
  seY?: number;
}
export interface PlaneStart extends Point {
  label: string;
}
export interface SurveyPoint extends Point {
  label: string;
}
export type BasinTint = SpeciesKey | 'both' | 'cycles' | 'neither';
/** Starts that end in the same place, as polygons or as axis-parallel cells, in data units. */
export interface PlaneBasin {
  tint: BasinTint;
  polygons?: Point[][];
  cells?: { x0: number; y0: number; x1: number; y1: number }[];
  /** "ends at C". */
  label?: string;
}

/** The run of one start: three columns of equal length. */
export interface SeriesRun {
  /** Drawn at the line's ends when there are several runs: "1". */
  label: string;
  /** In tables and readouts: "start 86, 101". */
  name?: string;
  t: ArrayLike<number>;
  first: ArrayLike<number>;
  second: ArrayLike<number>;
  emphasised?: boolean;
}
export interface SeriesSpecies {
  name: string;
  short?: string;
  unit: string;
}
/** A limit, drawn dotted across the plot. */
export interface SeriesThreshold {
  species: SpeciesKey | 'both';
  value: number;
  label: string;
}
/** Something that happens at a time; with a value it is ringed on the curve, otherwise a rule crosses the plot. */
export interface SeriesEvent {
  t: number;
  label: string;
  species?: SpeciesKey;
  value?: number;
}
export interface SeriesPeriod {
  from: number;
  to: number;
  label: string;
}
export interface SeriesCount {
  t: number;
  species: SpeciesKey;
  value: number;
  se?: number;
}
/** The time axis. With an `origin` the ticks read as calendar years: origin + t. */
export interface SeriesTime {
  label: string;
  unit: string;
  origin?: number;
}
export type ScaleKind = 'linear' | 'log';
