import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vitest/config';

const root = fileURLToPath(new URL('..', import.meta.url));

/** Three projects: `unit` mirrors src, `reference` checks against outside figures, `page` drives a real browser. */
export default defineConfig({
  root,
  test: {
    coverage: { include: ['src/**/*.ts'], exclude: ['src/build/**'] },
    projects: [
      {
        root,
        test: {
          name: 'unit',
          include: ['test/**/*.test.ts'],
          exclude: ['test/reference/**', 'test/page/**', '**/node_modules/**'],
          testTimeout: 30_000,
        },
      },
      { root, test: { name: 'reference', include: ['test/reference/**/*.test.ts'], testTimeout: 30_000 } },
      {
        root,
        test: {
          name: 'page',
          include: ['test/page/**/*.test.ts'],
          globalSetup: ['test/page/find-browser.ts'],
          testTimeout: 60_000,
        },
      },
    ],
  },
});
