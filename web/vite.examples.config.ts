/**
 * The pool of workers as two modules of their own, for the page that solves
 * batches and for any page outside this project: `pool.js` and `worker.js`,
 * which take the module's glue from beside them.
 */
import { resolve } from 'node:path';

import { defineConfig } from 'vite';

const GLUE = /generated\/eigenledger$/;

export default defineConfig({
  publicDir: false,
  build: {
    outDir: resolve(import.meta.dirname, '../dist/examples'),
    emptyOutDir: false,
    target: 'es2022',
    lib: {
      entry: {
        pool: resolve(import.meta.dirname, 'src/worker/pool.ts'),
        worker: resolve(import.meta.dirname, 'src/worker/main.ts'),
      },
      formats: ['es'],
    },
    rolldownOptions: {
      external: GLUE,
      output: {
        paths: (id) => (GLUE.test(id) ? './eigenledger.js' : id),
        chunkFileNames: '[name].js',
      },
    },
  },
});
