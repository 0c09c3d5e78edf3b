import { defineConfig } from 'vitest/config';

/** Tests live in test/, though the page's own build has web/ as its root. */
export default defineConfig({
  test: {
    include: ['test/**/*.test.ts', 'test/**/*.test.tsx'],
    exclude: ['node_modules/**', 'dist/**'],
    // Some tests start workers, processes or a browser; a slow machine must not fail them.
    testTimeout: 60_000,
    hookTimeout: 60_000,
  },
});
