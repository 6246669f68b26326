/**
 * The one OpenCV instance of this thread. It is made when first needed; nothing else of the engine keeps state between calls.
 *
 * The package's module object has a `then` of its own, so a promise must never be resolved with it: it is handed on inside an object.
 * Every Mat must be deleted by whoever made it.
 */
import { createRequire } from 'node:module';
import type * as OpenCv from '@techstark/opencv-js';

export type Cv = typeof OpenCv;

/** Starting takes a fifth of a second; far beyond this it never will. */
const START_LIMIT_MS = 30_000;
let instance: Promise<{ cv: Cv }> | null = null;

export function loadOpenCv(): Promise<{ cv: Cv }> {
  instance ??= new Promise<{ cv: Cv }>((resolve, reject) => {
    const cv = createRequire(import.meta.url)('@techstark/opencv-js') as Cv & { onRuntimeInitialized?: () => void; getBuildInformation?: () => string };
    const limit = setTimeout(() => { instance = null; reject(new Error('OpenCV did not start.')); }, START_LIMIT_MS);
    const ready = () => { clearTimeout(limit); resolve({ cv }); };
    if (typeof cv.Mat === 'function') ready();
    else cv.onRuntimeInitialized = ready;
  });
  return instance;
}
