/** The one public door of the science: nothing outside this folder imports past it. */
export * from './model/spec';
export * from './analysis/results';
export * from './solve/problem';
export { compile } from './model/compile';
export { checkModel } from './model/check';

/** Version of the engine, printed with every result. */
export const ENGINE_VERSION = '1.0.0';
