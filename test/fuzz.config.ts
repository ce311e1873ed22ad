import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vitest/config';

/** A hundred thousand damaged inputs, apart from the tests: `npm run fuzz`. */
export default defineConfig({
  test: {
    root: fileURLToPath(new URL('..', import.meta.url)),
    include: ['test/**/*.fuzz.ts'],
    testTimeout: 7_200_000,
    disableConsoleIntercept: true,
  },
});
