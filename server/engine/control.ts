import type { RunTotals } from './gangrun/types.ts';

/** Passed beside an input by whoever runs a long function in a worker thread. It never changes a finished result. */
export interface Control {
  /** Element 0 set to 1, also beforehand: return within 0.5 s with a complete plan, the best so far. */
  stop?: Int32Array<SharedArrayBuffer>;
  /** 0 to 1, and the name of the stage. */
  onProgress?: (done: number, stage: string) => void;
  /** A better plan was found. */
  onBest?: (totals: RunTotals) => void;
}
