import seedrandom from 'seedrandom';
import { describe, expect, test } from 'vitest';
import { blockMeanEstimate } from '../../src/statistics/block-estimate.js';
import { meanDifferenceOf, meanOf, shareOf } from '../../src/statistics/drawn-estimate.js';
import { meanEstimate, pairedMeanEstimate } from '../../src/statistics/mean-estimate.js';
import { proportionEstimate } from '../../src/statistics/proportion-estimate.js';

const blocksOf = (n: number, size: number): Int32Array =>
  Int32Array.from({ length: n }, (_, index) => 1 + Math.floor(index / size));

describe('mean over blocks', () => {
  test("is Student's over the block means where blocks are equally large", () => {
    const draw = seedrandom.tychei('block means');
    const values = Float64Array.from({ length: 80 }, () => 1e6 + draw.double());
    const means = Float64Array.from({ length: 10 }, (_, block) => {
      return values.subarray(8 * block, 8 * block + 8).reduce((sum, value) => sum + (value - 1e6), 0) / 8;
    });
    const expected = meanEstimate(means, 0.95);
    const { estimate, lower, upper, method, note, instances } = blockMeanEstimate(values, blocksOf(80, 8), 0.95);
    expect((estimate ?? 9) - 1e6).toBeCloseTo(expected.estimate ?? 9, 9);
    expect((lower ?? 9) - 1e6).toBeCloseTo(expected.lower ?? 9, 9);
    expect((upper ?? 9) - 1e6).toBeCloseTo(expected.upper ?? 9, 9);
    expect([method, note, instances]).toEqual(['block-t', '10 blocks', 80]);
  });

  test('is a ratio where some have more values than others', () => {
    // By hand: blocks (1 3) (2) (4) (3 3) (2) (5) (1) (4): totals 4 2 4 6 2 5 1 4 = 28, counts 2 1 1 2 1 1 1 1 = 10,
    // R 2.8; residuals -1.6 -0.8 1.2 0.4 -0.8 2.2 -1.8 1.2, squares 14.96 in all; s = sqrt(8/7 14.96) / 10 = 0.413487;
    // t(0.975; 7) = 2.364624 (table).
    const values = Float64Array.of(1, 3, 2, 4, 3, 3, 2, 5, 1, 4);
    const blocks = Int32Array.of(1, 1, 2, 3, 4, 4, 6, 7, 8, 9);
    const { estimate, lower, upper } = blockMeanEstimate(values, blocks, 0.95);
    expect(estimate).toBeCloseTo(2.8, 12);
    expect(lower).toBeCloseTo(2.8 - 2.364624 * 0.413487, 5);
    expect(upper).toBeCloseTo(2.8 + 2.364624 * 0.413487, 5);
  });

  test('needs eight blocks and says where they are equal', () => {
    expect(blockMeanEstimate(new Float64Array(28).fill(1), blocksOf(28, 4), 0.95)).toMatchObject({
      estimate: null,
      note: 'not estimable from 28: 8 blocks are needed',
    });
    expect(blockMeanEstimate(new Float64Array(32).fill(0.1), blocksOf(32, 4), 0.95)).toMatchObject({
      estimate: 0.1,
      lower: 0.1,
      upper: 0.1,
      note: 'all blocks equal',
    });
    expect(() => blockMeanEstimate(new Float64Array(32), blocksOf(32, 4), 1)).toThrow(RangeError);
  });

  test('covers what it says where values of a block hang together, and that of instances does not', () => {
    const draw = seedrandom.tychei('blocks that hang together');
    const normal = (): number => Math.sqrt(-2 * Math.log(draw.double())) * Math.cos(2 * Math.PI * draw.double());
    const repetitions = 2000;
    const blocks = blocksOf(64, 8);
    let [overBlocks, overInstances] = [0, 0];
    for (let repetition = 0; repetition < repetitions; repetition++) {
      const common = Array.from({ length: 8 }, normal);
      const values = Float64Array.from(blocks, (block) => common[block - 1] + normal());
      const covers = ({ lower, upper }: { lower: number | null; upper: number | null }): boolean =>
        lower !== null && upper !== null && lower <= 0 && 0 <= upper;
      if (covers(meanOf({ values, blocks }, 0.95))) overBlocks += 1;
      if (covers(meanOf({ values, blocks: null }, 0.95))) overInstances += 1;
    }
    expect(Math.abs(overBlocks / repetitions - 0.95)).toBeLessThan(3.89 * Math.sqrt((0.95 * 0.05) / repetitions));
    expect(overInstances / repetitions).toBeLessThan(0.75);
  });
});

describe('estimates as the sample was drawn', () => {
  const values = Float64Array.from({ length: 512 }, (_, index) => (index % 4 === 0 && index % 32 < 28 ? 1 : 0));
  values[3] = 1; // so that blocks differ

  test('of independent instances are those of instances', () => {
    expect(meanOf({ values, blocks: null }, 0.95)).toEqual(meanEstimate(values, 0.95)); // 113 events: no remark
    expect(meanDifferenceOf({ values, blocks: null }, 0.95)).toEqual(pairedMeanEstimate(values, 0.95));
    const few = Float64Array.of(0, 0, 0, 4, 0);
    expect(meanDifferenceOf({ values: few, blocks: null }, 0.95).note).toMatch(/^rests on 1 unlike the others/);
    expect(shareOf({ values, blocks: null }, 0.95)).toEqual(proportionEstimate(113, 512, 0.95));
  });

  test('of blocks are over blocks', () => {
    const drawn = { values, blocks: blocksOf(512, 32) };
    expect(meanOf(drawn, 0.95).method).toBe('block-t');
    expect(meanDifferenceOf(drawn, 0.95).method).toBe('paired-block-t');
    expect(shareOf(drawn, 0.95)).toEqual(blockMeanEstimate(values, blocksOf(512, 32), 0.95));
  });

  test('of shares are pooled where blocks, events or others are few, or blocks alike', () => {
    const note = 'pooled over blocks, conservative';
    const size32 = blocksOf(512, 32);
    const fewBlocks = { values: values.subarray(0, 480), blocks: blocksOf(480, 32) };
    const fewEvents = {
      values: values.map((one, index) => (index < 79 * 6 ? one : 0) * (index % 3 === 0 ? 1 : 0)),
      blocks: size32,
    };
    const fewOthers = { values: fewEvents.values.map((one) => 1 - one), blocks: size32 };
    const alike = { values: Float64Array.from(size32, (_, index) => index % 2), blocks: size32 };
    for (const drawn of [fewBlocks, fewEvents, fewOthers, alike]) {
      const events = drawn.values.reduce((sum, one) => sum + one, 0);
      expect(shareOf(drawn, 0.95)).toEqual({ ...proportionEstimate(events, drawn.values.length, 0.95), note });
    }
    expect(shareOf({ values: new Float64Array(), blocks: new Int32Array() }, 0.95).note).toBe('not estimable from 0');
  });

  test('of means say where few instances carry them', () => {
    const noteOf = (...values: readonly number[]) =>
      meanOf({ values: Float64Array.from(values), blocks: null }, 0.95).note;
    expect(noteOf(0, 0, 0, 7, 0, 3)).toBe('rests on 2 unlike the others, covers less than it says');
    expect(noteOf(2, 2, 5, 2)).toBe('rests on 1 unlike the others, covers less than it says');
    expect([noteOf(1, 1, 2, 2), noteOf(1, 2, 3, 4), noteOf(3, 3, 3)]).toEqual(['', '', 'all values equal']);
    const many = [...new Array<number>(101).fill(0), ...Array.from({ length: 100 }, (_, index) => index + 1)];
    expect(noteOf(...many)).toBe('');
    expect(noteOf(0, ...many.slice(0, -1))).not.toBe('');
  });
});
