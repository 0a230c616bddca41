import { resolve } from 'node:path';

import { generateSW } from 'workbox-build';
import { defineConfig, type Plugin } from 'vite';

const dist = resolve(import.meta.dirname, '../dist');

/** Writes the service worker that keeps the page's files for offline use. */
function offline(): Plugin {
  return {
    name: 'offline',
    apply: 'build',
    async closeBundle() {
      const { warnings } = await generateSW({
        globDirectory: dist,
        globPatterns: ['index.html', 'assets/**/*.{js,css,wasm}', 'mark.svg'],
        swDest: resolve(dist, 'offline.js'),
        inlineWorkboxRuntime: true,
        sourcemap: false,
        cleanupOutdatedCaches: true,
        clientsClaim: true,
        skipWaiting: true,
        maximumFileSizeToCacheInBytes: 4 * 1024 * 1024,
        // File names in assets/ carry a hash of their content.
        dontCacheBustURLsMatching: /^assets\//,
      });
      for (const warning of warnings) this.warn(warning);
    },
  };
}

export default defineConfig({
  // Relative, so that the page works under any path.
  base: './',
  build: {
    outDir: dist,
    emptyOutDir: true,
    target: 'es2022',
    assetsInlineLimit: 0,
    modulePreload: { polyfill: false },
  },
  // Runs both as a module worker and, embedded in the single file, as a classic one.
  worker: { format: 'iife' },
  plugins: [offline()],
});
