import { defineConfig } from 'vite';

/** The window: one page, no code from main/. */
export default defineConfig({
  root: 'renderer',
  base: './',
  oxc: { jsx: { runtime: 'automatic', importSource: 'preact' } },
  build: { outDir: '../dist/renderer', emptyOutDir: true, target: 'es2022' },
});
