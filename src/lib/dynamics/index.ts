/** The one public door of the science: nothing outside this folder imports past it. */
export * from './model/spec';
export * from './analysis/results';
export * from './solve/problem';
export { compile } from './model/compile';
export { checkModel } from './model/check';
export { integrate } from './solve/integrate';
export * from './analysis/trajectory';
export { coordinatesFor, formFor, netAdditionOf, type Form } from './analysis/coordinates';
export { findEquilibria, type EquilibriaOptions } from './analysis/equilibria';
export * from './analysis/limitCycles';
export * from './analysis/separatrices';
export * from './analysis/outcome';
export { ENGINE_VERSION } from './version';
