/** The door of fitting for jobs, tests and benchmarks; the browser imports the files themselves. */
export { bestFit, fitTable } from './best-fit.ts';
export { dieOutline, usableOutline } from './die-outline.ts';
export type { DieGeometry, DieShape, Fit, FitOptions } from './types.ts';
