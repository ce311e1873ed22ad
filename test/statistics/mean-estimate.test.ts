import seedrandom from 'seedrandom';
import { describe, expect, test } from 'vitest';
import { meanEstimate, pairedMeanEstimate } from '../../src/statistics/mean-estimate.js';
import { summariseMoments } from '../../src/statistics/moments.js';

describe('moments', () => {
  test('are those of a sample worked by hand', () => {
    // 2 4 4 4 5 5 7 9: mean 5, squares about it 9 1 1 1 0 0 4 16 = 32, divided by 7.
    expect(summariseMoments(Float64Array.of(2, 4, 4, 4, 5, 5, 7, 9))).toEqual({
      count: 8,
      mean: 5,
      variance: expect.closeTo(32 / 7, 12),
    });
  });

  test('keep their digits on a large common offset', () => {
    const { mean, variance } = summariseMoments(Float64Array.of(1e9 + 4, 1e9 + 7, 1e9 + 13, 1e9 + 16));
    // By hand: 4 7 13 16 have mean 10 and squares 36 9 9 36 = 90, divided by 3.
    expect(mean).toBe(1e9 + 10);
    expect(variance).toBeCloseTo(30, 6);
  });

  test('have no variance for no, one or equal values', () => {
    expect(summariseMoments(new Float64Array())).toEqual({ count: 0, mean: 0, variance: 0 });
    expect(summariseMoments(Float64Array.of(0.1))).toEqual({ count: 1, mean: 0.1, variance: 0 });
    expect(summariseMoments(new Float64Array(999).fill(0.1))).toEqual({ count: 999, mean: 0.1, variance: 0 });
  });
});

describe('estimate of a mean', () => {
  // Student 1908, Biometrika 6, 1-25: additional hours of sleep of ten patients, second drug less first. Interval as
  // printed by R 4 for its data set `sleep`: 0.7001142 to 2.4598858.
  const SLEEP = Float64Array.of(1.2, 2.4, 1.3, 1.3, 0, 1, 1.8, 0.8, 4.6, 1.4);

  test("is that of Student's own example", () => {
    for (const [estimateOf, method] of [
      [meanEstimate, 'student-t'],
      [pairedMeanEstimate, 'paired-t'],
    ] as const) {
      const estimate = estimateOf(SLEEP, 0.95);
      expect(estimate).toMatchObject({ method, note: '', instances: 10 });
      expect(estimate.estimate).toBeCloseTo(1.58, 12);
      expect(estimate.lower).toBeCloseTo(0.7001142, 6);
      expect(estimate.upper).toBeCloseTo(2.4598858, 6);
    }
  });

  test('needs two values', () => {
    for (const values of [Float64Array.of(), Float64Array.of(3)]) {
      expect(meanEstimate(values, 0.95)).toEqual({
        estimate: null,
        lower: null,
        upper: null,
        method: '',
        note: `not estimable from ${values.length}`,
        instances: values.length,
      });
    }
  });

  test('has no width where all values are equal, and says so', () => {
    expect(meanEstimate(new Float64Array(7).fill(0.3), 0.95)).toEqual({
      estimate: 0.3,
      lower: 0.3,
      upper: 0.3,
      method: 'student-t',
      note: 'all values equal',
      instances: 7,
    });
  });

  test('refuses a confidence that is none', () => {
    for (const confidence of [0, 1, 95, Number.NaN]) {
      expect(() => meanEstimate(SLEEP, confidence)).toThrow(RangeError);
      expect(() => pairedMeanEstimate(SLEEP, confidence)).toThrow(RangeError);
    }
  });

  test('covers the mean of normal values as often as it says', () => {
    const draw = seedrandom.tychei('coverage of the mean');
    // Box and Muller, so that the values do not come from the quantile under test.
    const normal = (): number => Math.sqrt(-2 * Math.log(draw.double())) * Math.cos(2 * Math.PI * draw.double());
    const repetitions = 8000;
    let covered = 0;
    for (let repetition = 0; repetition < repetitions; repetition++) {
      const { lower, upper } = meanEstimate(Float64Array.from({ length: 6 }, normal), 0.9);
      if (lower !== null && upper !== null && lower <= 0 && 0 <= upper) covered += 1;
    }
    // 3.89 standard errors: one chance in 10,000 to fall outside, once and for all with the seed fixed.
    expect(Math.abs(covered / repetitions - 0.9)).toBeLessThan(3.89 * Math.sqrt((0.9 * 0.1) / repetitions));
  });
});
