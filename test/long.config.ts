import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vitest/config';

/** Two years of single banks against the slow rewrite, apart from the tests: `npm run test:long`. */
export default defineConfig({
  test: {
    root: fileURLToPath(new URL('..', import.meta.url)),
    include: ['test/**/*.long.ts'],
    testTimeout: 3_600_000,
    hookTimeout: 3_600_000,
  },
});
