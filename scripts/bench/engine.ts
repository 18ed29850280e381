/** What the workloads need of the engine, beside its public door. */
export * from '../../src/lib/dynamics/index';
export * from '../../src/lib/dynamics/solve/planar';
export { PLANAR_KERNELS } from '../../src/lib/dynamics/solve/planarKernels';
export * as rates from '../../src/lib/dynamics/solve/planarRates';
export * from '../../src/lib/dynamics/ensemble/fastEquilibria';
export { eventRatesOf } from '../../src/lib/dynamics/ensemble/eventRates';
export * as events from '../../src/lib/dynamics/ensemble/exactEvents';
export { advanceLeaps } from '../../src/lib/dynamics/ensemble/leapEvents';
