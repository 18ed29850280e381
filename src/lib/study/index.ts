/** The one public door of the study: what the server and the browser both know about a question, its rates and its model. */
export * from './format';
export * from './units';
export * from './rateUnits';
export * from './rates';
export * from './resolve';
export * from './assemble';
export * from './echo';
export * from './plausibility';
export * from './assumptions';
export * from './cautions';
export * from './points';
export * from './verdict';
export * from './facts';
export * from './parts';
