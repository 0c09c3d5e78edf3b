import { defineConfig } from 'vitest/config';

/** Tests live in test/, though the page's own build has web/ as its root. */
export default defineConfig({
  test: { include: ['test/**/*.test.ts', 'test/**/*.test.tsx'], exclude: ['node_modules/**', 'dist/**'] },
});
