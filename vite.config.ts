import react from '@vitejs/plugin-react';
import { defineConfig } from 'vite';

/** The page: built from web/ into dist/web, where the service finds it. `vite` alone serves it beside a running service. */
export default defineConfig({
  root: 'web',
  plugins: [react()],
  build: {
    outDir: '../dist/web',
    emptyOutDir: true,
    // Everything is a file of its own: the content-security policy allows neither data: addresses nor inline code.
    assetsInlineLimit: 0,
    modulePreload: { polyfill: false },
  },
  server: { proxy: { '/api': 'http://127.0.0.1:8080', '/healthz': 'http://127.0.0.1:8080' } },
});
