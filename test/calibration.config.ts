import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vitest/config';

/** Long checks of accuracy, apart from the tests: `npm run test:calibration`. */
export default defineConfig({
  test: {
    root: fileURLToPath(new URL('..', import.meta.url)),
    include: ['test/**/*.calibration.ts'],
    testTimeout: 3_600_000,
    hookTimeout: 3_600_000,
  },
});
