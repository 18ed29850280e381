/** What the analysis hands back. These are the wire shapes: plain JSON values, no class instances, no typed arrays. */

export type EquilibriumClass =
  | 'stable node'
  | 'unstable node'
  | 'saddle'
  | 'stable spiral'
  | 'unstable spiral'
  | 'centre'
  | 'stable star'
  | 'unstable star'
  | 'stable degenerate node'
  | 'unstable degenerate node'
  | 'non-hyperbolic';
export type Stability = 'stable' | 'unstable' | 'neutral' | 'undetermined';
export type DecidedBy =
  | 'linearisation'
  | 'conserved quantity'
  | 'first Lyapunov coefficient'
  | 'centre manifold'
  | 'trapping argument'
  | 'motion along an axis'
  | 'normal form'
  | 'continuum'
  | 'undecided';

export interface Complex {
  re: number;
  im: number;
}

export interface Equilibrium {
  x: number;
  y: number;
  feasible: boolean;
  /** 2 where two equilibria have merged; listed once. */
  multiplicity: number;
  /** [[d(dx/dt)/dx, d(dx/dt)/dy], [d(dy/dt)/dx, d(dy/dt)/dy]], 1/time. */
  jacobian: [[number, number], [number, number]];
  trace: number;
  determinant: number;
  /** Larger real part first; for a pair, positive imaginary part first. */
  eigenvalues: [Complex, Complex];
  class: EquilibriumClass;
  stability: Stability;
  decidedBy: DecidedBy;
  /** Within tolerance of another class: the answer could flip with the last digits of a rate. */
  borderline: boolean;
  /** 1/|Re| of the slowest eigenvalue of a stable point; null otherwise. */
  returnTime: number | null;
  /** 2 pi/|Im|; null when the eigenvalues are real. */
  period: number | null;
  /** What else is known in one plain clause, e.g. sign of the first Lyapunov coefficient; null when nothing is added. */
  remark: string | null;
}

/** A whole curve of equilibria, as its two ends (a far end may be at infinity: null) and points along it for drawing. */
export interface Continuum {
  from: { x: number; y: number };
  to: { x: number; y: number } | null;
  points: { x: number; y: number }[];
  stability: Stability;
  remark: string;
}

/** A state that holds only because a species has run out under its quota. */
export interface AbsorbingState {
  x: number;
  y: number;
  /** Which species is held at 0 by its quota. */
  held: ('first' | 'second')[];
  stability: Stability;
  remark: string;
}

export interface EquilibriaReport {
  equilibria: Equilibrium[];
  continua: Continuum[];
  absorbing: AbsorbingState[];
  /** True only when the search provably found all feasible equilibria. */
  complete: boolean;
  /** Why not complete, or how it was proven, in one sentence. */
  completeness: string;
  engine: string;
}
