import { expect, test } from 'vitest';
import { outcomeLayout } from '../../src/outcomes/block.js';
import { outcomeColumns } from '../../src/outcomes/columns.js';
import { plannedUniforms } from '../../src/sampling/planned-uniforms.js';
import { prepareCandidate, simulateInstance } from '../../src/simulation/simulate-instance.js';
import { SAMPLING_PLANS, type SamplingPlan } from '../../src/study/sampling-plan.js';
import type { SobolColumn } from '../../src/study/study.js';
import { repositoryText, studyOf } from '../study/study-under-test.js';
import { mean, sd } from './samples.js';

// What a plan gains: the variance that the mean of a block would have with independent draws, over the one it has.
// `npm run test:calibration -- block-variance` prints it by plan and block size; DEVELOPERS.md has the figures.

interface Cell {
  readonly plan: SamplingPlan;
  readonly blockSize: number;
  readonly blocks: number;
}

/** @param values of the instances, block by block */
function gain(values: readonly number[], { blockSize, blocks }: Cell): number {
  const means = Array.from({ length: blocks }, (_, b) => mean(values.slice(b * blockSize, (b + 1) * blockSize)));
  return sd(values) ** 2 / blockSize / sd(means) ** 2;
}

const report = (what: string, { plan, blockSize, blocks }: Cell, gained: number): void => {
  process.stdout.write(`${what} ${plan} block ${blockSize} x ${blocks}: gain ${gained.toFixed(2)}\n`);
};

/** Chance of leaving this band by a correct variance of so many blocks, on the log scale: 4 sd, once in 16,000. */
const bandOf = (blocks: number): number => Math.exp(4 * Math.sqrt(2 / (blocks - 1)));

const INPUTS = ['a', 'b', 'c', 'd', 'e', 'f', 'g', 'h'];
const COLUMNS: readonly SobolColumn[] = INPUTS.map((quantity) => ({
  level: 'bank',
  stock: null,
  module: null,
  quantity,
}));
const G_WEIGHTS = [0, 1, 4.5, 9, 99, 99, 99, 99];

/** Sobol's g-function: prod (|4 u - 2| + a) / (1 + a); mean 1. */
function gFunction({ plan, blockSize, blocks }: Cell): number[] {
  const uniformsIn = plannedUniforms({ plan, blockSize, sobolColumns: COLUMNS });
  return Array.from({ length: blocks * blockSize }, (_, k) => {
    const [block, index] = [1 + Math.floor(k / blockSize), 1 + (k % blockSize)];
    const uniformOf = uniformsIn({ seed: '5', block, index, stock: null, module: null, level: 'bank', cell: null });
    return INPUTS.reduce((product, input, i) => {
      const a = G_WEIGHTS[i] ?? Number.NaN;
      return (product * (Math.abs(4 * uniformOf(input) - 2) + a)) / (1 + a);
    }, 1);
  });
}

test.each(SAMPLING_PLANS)('the mean of a block of the g-function under the plan %s', (plan) => {
  const gains = [16, 32, 64, 128, 256, 512, 1024].map((blockSize) => {
    const cell = { plan, blockSize, blocks: 400 };
    const gained = gain(gFunction(cell), cell);
    report('g-function', cell, gained);
    return gained;
  });
  const largest = gains.at(-1) ?? Number.NaN;
  if (plan === 'independent') {
    for (const gained of gains) expect(Math.abs(Math.log(gained))).toBeLessThan(Math.log(bandOf(400)));
  } else if (plan === 'latin-hypercube') {
    // Stein 1987, Technometrics 29, 143: what single inputs do is gone, the rest stays. First-order indices of these
    // weights sum to 0.716192 + 0.179048 + 0.023676 + 0.007162 + 4 x 0.000072 (closed form, as computed by hand).
    const limit = 1 / (1 - 0.716192 - 0.179048 - 0.023676 - 0.007162 - 4 * 0.000072);
    expect(Math.abs(Math.log(largest / limit))).toBeLessThan(Math.log(bandOf(400)));
  } else {
    expect(largest).toBeGreaterThan(100);
  }
});

const MEASURES = ['early_cutoff_on_discharge', 'load_lost', 'lost_capacity', 'drift', 'throughput_spread'];

test.each([
  { plan: 'latin-hypercube', blockSize: 32, blocks: 128 },
  { plan: 'sobol', blockSize: 16, blocks: 256 },
  { plan: 'sobol', blockSize: 32, blocks: 128 },
  { plan: 'sobol', blockSize: 128, blocks: 32 },
  { plan: 'sobol', blockSize: 512, blocks: 8 },
] as const)('the mean of $blockSize banks of the demo over 12 days under the plan $plan', (cell) => {
  const text = repositoryText('studies/demo.yaml').replace('cycles: 180', 'cycles: 12');
  const files = { 'demo-week.csv': repositoryText('studies/demo-week.csv') };
  const study = studyOf(`${text}plan: ${cell.plan}\nblock: ${cell.blockSize}\n`, files);
  const prepared = prepareCandidate(study, 'strings');
  const names = outcomeColumns(outcomeLayout(study, prepared.candidate)).map(({ name }) => name);
  const rows = Array.from({ length: cell.blocks * cell.blockSize }, (_, k) => simulateInstance(prepared, k + 1).values);
  for (const measure of MEASURES) {
    const gained = gain(
      rows.map((values) => values[names.indexOf(measure)] ?? Number.NaN),
      cell,
    );
    report(`demo ${measure}`, cell, gained);
    // No plan may be worse than independent draws by more than the blocks can tell apart.
    expect(gained).toBeGreaterThan(1 / bandOf(cell.blocks));
  }
});
