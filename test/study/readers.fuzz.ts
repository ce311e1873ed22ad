import { describe, expect, it } from 'vitest';
import { fuzz } from './fuzzed-readers.js';

/** A hundred thousand mutants in all; MUTANTS in the environment says how many, SEED which. */
const CASES = Number(process.env.MUTANTS ?? 100_000);
const SEED = process.env.SEED ?? 'many mutants';

describe('the reader of', () => {
  it.each([
    ['study', 0.2],
    ['profile', 0.4],
    ['stock', 0.4],
  ] as const)('a %s turns mutants into a study or printable problems, never into an error', (reader, share) => {
    const counts = fuzz(reader, Math.ceil(CASES * share), SEED);
    process.stderr.write(`${reader}: ${counts.read} read, ${counts.refused} refused\n`);
    expect(counts.read + counts.refused).toBe(Math.ceil(CASES * share));
  });
});
