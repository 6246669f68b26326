import vue from '@vitejs/plugin-vue';
import type { Plugin } from 'vite';
import { defineConfig } from 'vitest/config';
import { tokenStyles } from './src/theme/tokens.ts';

/** Where the server listens during development; the client's own server hands `/api` on to it. */
const apiTarget = process.env.API_TARGET ?? 'http://127.0.0.1:3000';

/** Colours stand in the page itself, so that its first paint has the right ground in either appearance. */
const tokensInPage: Plugin = {
  name: 'tokens-in-page',
  transformIndexHtml: () => [{ tag: 'style', injectTo: 'head-prepend', children: tokenStyles() }],
};

export default defineConfig({
  plugins: [vue(), tokensInPage],
  build: { outDir: 'dist/client', emptyOutDir: true, sourcemap: false, target: 'es2022' },
  server: { host: '127.0.0.1', proxy: { '/api': apiTarget } },
  test: {
    projects: [
      { extends: true, test: { name: 'engine', include: ['tests/engine/**/*.test.ts', 'tests/standards/**/*.test.ts'], environment: 'node', testTimeout: 60_000 } },
      { extends: true, test: { name: 'client', include: ['tests/client/**/*.test.ts'], environment: 'happy-dom' } },
      { extends: true, test: { name: 'api', globalSetup: 'tests/api/cluster.ts', include: ['tests/api/**/*.test.ts'], environment: 'node', testTimeout: 30_000, hookTimeout: 60_000 } },
      { extends: true, test: { name: 'faults', globalSetup: 'tests/api/cluster.ts', include: ['tests/faults/**/*.test.ts'], environment: 'node', testTimeout: 120_000, hookTimeout: 60_000, fileParallelism: false } },
      { extends: true, test: { name: 'browser', globalSetup: 'tests/api/cluster.ts', include: ['tests/browser/**/*.test.ts'], environment: 'node', testTimeout: 240_000, hookTimeout: 120_000, fileParallelism: false } },
    ],
  },
});
