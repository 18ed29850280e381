/** The one public door of the science: nothing outside this folder imports past it. */
export * from './model/spec';
export * from './analysis/results';
export * from './solve/problem';
export { compile } from './model/compile';
export { checkModel } from './model/check';
export { integrate } from './solve/integrate';
export * from './analysis/trajectory';
export type { AppliedPulse, Pulse } from './analysis/schedule';
export * from './analysis/seasonal';
export { coordinatesFor, formFor, netAdditionOf, type Form } from './analysis/coordinates';
export { findEquilibria, type EquilibriaOptions } from './analysis/equilibria';
export * from './analysis/limitCycles';
export { excludeCycles, type NoCycles } from './analysis/excludeCycles';
export { globalClaim, type GlobalClaim } from './analysis/globalClaim';
export * from './analysis/separatrices';
export * from './analysis/outcome';
export { basinsOf, type Basin, type Basins } from './analysis/basins';
export { classify, type Classification } from './analysis/classify';
export { invasion, type Invasion } from './analysis/invasion';
export * from './analysis/sensitivity';
export * from './analysis/isoclines';
export {
  leverForLevel,
  thresholds,
  type EquilibriumBranch,
  type LeverValue,
  type ParameterThreshold,
  type ThresholdKind,
  type ThresholdReport
} from './analysis/thresholds';
export type { BranchOptions } from './analysis/branches';
export {
  cycleBranches,
  thresholdsWithCycles,
  type CycleBranch,
  type CycleBranchOptions,
  type CycleEnd
} from './analysis/cycleBranch';
export * from './analysis/outcomeMap';
export * from './analysis/pathThreshold';
export * from './analysis/vectorField';
export { parametersOf, symbolOf, withParameter, type ModelParameter } from './model/parameters';
export * from './model/equations';
export {
  differentiate as differentiateExpression,
  evaluate as evaluateExpression,
  toLatex,
  type Expression,
  type PrintOptions
} from './model/expression';
export { ENGINE_VERSION } from './version';
export { integratePlanar, planarModelOf, type PlanarModel, type PlanarOptions, type PlanarPath } from './solve/planar';
export { simulateMany, type ManyPaths } from './solve/planarMany';
export { randomStream, type RandomStream } from './numeric/random';
export { type DrawPlan, logMoments, type UncertainRate } from './ensemble/draws';
export * from './ensemble/ensemble';
export type { Turnover } from './ensemble/eventRates';
export type { Leap } from './ensemble/leapEvents';
export type { Bands } from './ensemble/quantiles';
export * from './ensemble/stochastic';
