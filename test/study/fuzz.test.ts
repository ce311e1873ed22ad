import { describe, expect, it } from 'vitest';
import { fuzz } from './fuzzed-readers.js';

// A thousand mutants; `npm run fuzz` reads a hundred thousand.
describe('the reader of', () => {
  it.each([
    ['study', 500],
    ['profile', 250],
    ['stock', 250],
  ] as const)('a %s turns mutants into a study or printable problems, never into an error', (reader, cases) => {
    const { read, refused } = fuzz(reader, cases, 'mutants');
    // Mutants of both kinds, or the mutations would not test much.
    expect(read).toBeGreaterThan(cases / 50);
    expect(refused).toBeGreaterThan(cases / 4);
  });
});
