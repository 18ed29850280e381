/**
 * The serialisable definition of a two-species model.
 *
 * One document describes a model everywhere: in the database, on the API, in exports and in tests. The engine knows no
 * units: every rate is per study time unit, abundance is in the study's abundance unit, and the caller converts first.
 * `x` is the abundance of `first`, `y` of `second`; both are >= 0.
 */

/** G(n) = r. */
export interface ExponentialGrowth {
  kind: 'exponential';
  r: number;
}
/** G(n) = r (1 - n/K), K > 0. */
export interface LogisticGrowth {
  kind: 'logistic';
  r: number;
  K: number;
}
/** Strong Allee effect: G(n) = r (1 - n/K)(n/A - 1), K > A > 0. */
export interface AlleeGrowth {
  kind: 'allee';
  r: number;
  K: number;
  A: number;
}
/** Consumer only: G = r (1 - y/(g x)); the ceiling follows the resource. Undefined at x = 0. */
export interface LeslieGrowth {
  kind: 'leslie';
  r: number;
  g: number;
}
export type GrowthSpec = ExponentialGrowth | LogisticGrowth | AlleeGrowth;
export type ConsumerGrowthSpec = LogisticGrowth | LeslieGrowth;
export type GrowthKind = GrowthSpec['kind'] | ConsumerGrowthSpec['kind'];

/** M(n) = stocking - effort n - quota; the quota is taken only while n > 0. */
export interface RemovalSpec {
  /** Removal rate per head, 1/time, >= 0. */
  effort?: number;
  /** Abundance taken per time, whatever is there, >= 0. */
  quota?: number;
}
export interface ManagedSpec {
  removal?: RemovalSpec;
  /** Abundance added per time, >= 0. */
  stocking?: number;
}

export interface SpeciesSpec extends ManagedSpec {
  growth: GrowthSpec;
}
/** Exactly one of `mortality` and `growth` is present. */
export interface ConsumerSpec extends ManagedSpec {
  mortality?: number;
  growth?: ConsumerGrowthSpec;
  selfLimitation?: number;
}

export interface CoefficientCompetition {
  form: 'coefficients';
  alpha12: number;
  alpha21: number;
}
export interface EncounterCompetition {
  form: 'encounters';
  b12: number;
  b21: number;
}
export type CompetitionTerms = CoefficientCompetition | EncounterCompetition;

export type ResponseKind = 'holling-1' | 'holling-2' | 'holling-3';
export interface FeedingSpec {
  response: ResponseKind;
  /** Attack rate, > 0. */
  a: number;
  /** Handling time, >= 0; required by holling-2 and holling-3, absent for holling-1. */
  h?: number;
  /** Conversion, > 0 (0 allowed when the consumer grows by itself). */
  e: number;
  /** w in the denominator of holling-2 and -3, >= 0. */
  interference?: number;
}

export interface CompetitionModel {
  interaction: 'competition';
  first: SpeciesSpec;
  second: SpeciesSpec;
  competition: CompetitionTerms;
}
export interface ConsumerResourceModel {
  interaction: 'consumer-resource';
  first: SpeciesSpec;
  second: ConsumerSpec;
  feeding: FeedingSpec;
}
export type ModelSpec = CompetitionModel | ConsumerResourceModel;
export type InteractionKind = ModelSpec['interaction'];
export type SpeciesKey = 'first' | 'second';

/** A complaint about a model document: a JSON path such as `first.growth.K`, and a sentence that says what to do. */
export interface ModelIssue {
  path: string;
  message: string;
}

/**
 * A compiled model. All functions take abundances in the study's unit, both >= 0, and allocate nothing unless said.
 */
export interface System {
  readonly spec: ModelSpec;
  /** dx/dt and dy/dt into `out` (length 2), abundance/time. A quota is taken in full: the smooth equations. */
  rhs(x: number, y: number, out: Float64Array): void;
  /** Row-major 2x2 Jacobian of `rhs` into `out` (length 4), 1/time. */
  jacobian(x: number, y: number, out: Float64Array): void;
  /** Per-head growth rates (dx/dt)/x and (dy/dt)/y without stocking and quota, 1/time, into `out`. */
  perHead(x: number, y: number, out: Float64Array): void;
  /** Sum of the absolute values of the terms of each equation: the natural scale of a residual. */
  magnitude(x: number, y: number, out: Float64Array): void;
  /** Whether the axis x = 0 (y = 0) maps into itself: no stocking and no quota on that species. */
  readonly firstAxisInvariant: boolean;
  readonly secondAxisInvariant: boolean;
  /** Sets the time at which the other functions are read; only where rates change with the season. */
  moveTo?(t: number): void;
}
