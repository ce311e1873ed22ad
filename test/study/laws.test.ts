import { describe, expect, it } from 'vitest';
import type { Origin } from '../../src/study/origin.js';
import { renderProblem } from '../../src/study/problem.js';
import type { Spread } from '../../src/study/study.js';
import { populationOf, read, studyOf, studyWithStock } from './study-under-test.js';

// Invented measurements.
const FILES = { 'lab.csv': 'module,standby_mA,note\r\nX1,8,a\r\nX2,13,b\r\nX3,9,c\r\n' };
const withStandby = (spread: string): string => studyWithStock(['rated_Ah: 100', `standby_mA: ${spread}`]);

function standby(spread: string): Spread {
  return populationOf(studyOf(withStandby(spread), FILES), 'house').quantities.standbyA;
}

function wordsOf(spread: string): string | undefined {
  const result = read(withStandby(spread), FILES);
  if (result.kind === 'refused') throw new Error(result.problems.map(renderProblem).join('\n'));
  const at = (path: string): Origin | undefined => result.origins.find((origin) => origin.path === path);
  return at('stock.house.standby_mA.module')?.value;
}

describe('a law of the study', () => {
  it.each([
    [
      'triangular in percent, its peak in the middle by default',
      '{nominal: 8, module: {law: triangular, half_width_percent: 20}}',
      true,
      { law: 'triangular', halfWidth: 0.2, peakFraction: 0.5 },
    ],
    [
      'triangular in its unit',
      '{nominal: 8, module: {law: triangular, half_width: 2, peak_percent: 30}}',
      false,
      { law: 'triangular', halfWidth: 0.002, peakFraction: 0.3 },
    ],
    [
      'Weibull',
      '{nominal: 8, module: {law: weibull, shape: 1.5, sd_percent: 10}}',
      true,
      { law: 'weibull', shape: 1.5, sd: 0.1 },
    ],
    [
      'beta',
      '{nominal: 8, module: {law: beta, alpha: 2, beta: 5, half_width: 3}}',
      false,
      { law: 'beta', alpha: 2, beta: 5, halfWidth: 0.003 },
    ],
    [
      'a mixture in percent, its weights to their sum',
      '{nominal: 8, module: {law: mixture, of: [{weight: 3, sd_percent: 1}, {weight: 1, at_percent: -50, law: {law: uniform, half_width_percent: 10}}]}}',
      true,
      {
        law: 'mixture',
        factor: 1,
        parts: [
          { weight: 0.75, at: 0, law: { law: 'normal', sd: 0.01 } },
          { weight: 0.25, at: -0.5, law: { law: 'uniform', halfWidth: 0.1 } },
        ],
      },
    ],
    [
      'a mixture of percent and amounts, all in amounts',
      '{nominal: 8, module: {law: mixture, of: [{weight: 1}, {weight: 1, at: 4, sd_percent: 25}]}}',
      false,
      {
        law: 'mixture',
        factor: 1,
        parts: [
          { weight: 0.5, at: 0, law: { law: 'fixed' } },
          { weight: 0.5, at: 0.004, law: { law: 'normal', sd: 0.002 } },
        ],
      },
    ],
    [
      // By hand: mean 10 mA, so -2, -1 and 3 mA.
      'a measured column, its mean taken off, in ascending order',
      '{nominal: 8, module: {law: resampled, file: lab.csv, column: standby_mA}}',
      false,
      { law: 'resampled', values: [-0.002, -0.001, 0.003].map((value) => expect.closeTo(value, 15)) },
    ],
    [
      'of width 0, which is fixed',
      '{nominal: 8, module: {law: beta, alpha: 2, beta: 5, half_width: 0}}',
      false,
      { law: 'fixed' },
    ],
    [
      'a mixture of parts at one place, which is fixed',
      '{nominal: 8, module: {law: mixture, of: [{weight: 1, at: 2}, {weight: 3, at: 2, sd: 0}]}}',
      false,
      { law: 'fixed' },
    ],
  ])('may be %s', (_, spread, relative, module) => {
    expect(standby(spread)).toMatchObject({ relative, module });
  });

  it('keeps the file that it is resampled from among the inputs', () => {
    const text = withStandby('{nominal: 8, module: {law: resampled, file: lab.csv, column: standby_mA}}');
    const result = read(text, FILES);
    expect(result.kind === 'read' && result.inputs).toEqual([{ path: 'lab.csv', text: FILES['lab.csv'] }]);
  });
});

describe('check', () => {
  it.each([
    [
      '{nominal: 8, module: {law: triangular, half_width: 2, peak_percent: 30}}',
      'triangular, within +-2 mA of the middle, peak at 30 %',
    ],
    // Weibull of shape 1 is exponential: with its cut at 6 its sd is 0.95411 (mpmath).
    ['{nominal: 8, module: {law: weibull, shape: 1, sd: 1}}', 'Weibull of shape 1, sd 1 mA (sd left 0.9541 mA)'],
    ['{nominal: 8, module: {law: weibull, shape: 3.6, sd: 1}}', 'Weibull of shape 3.6, sd 1 mA'],
    [
      '{nominal: 8, module: {law: beta, alpha: 2, beta: 5, half_width_percent: 9}}',
      'beta 2 and 5, within +-9 % of the middle',
    ],
    // By hand: weights 0.75 and 0.25, mean -1; variance 0.75 x (0.5^2 + 1^2) + 0.25 x 3^2 = 3.1875.
    [
      '{nominal: 8, module: {law: mixture, of: [{weight: 3, sd: 0.5}, {weight: 1, at: -4}]}}',
      'mixture of 3 x (sd 0.5 mA) and 1 x (none at -4 mA) (sd 1.785 mA)',
    ],
    // By hand: (4 + 1 + 9) / 3 = 4.6667, root 2.160.
    [
      '{nominal: 8, module: {law: resampled, file: lab.csv, column: standby_mA}}',
      'resampled from standby_mA of lab.csv (sd 2.16 mA)',
    ],
    ['{nominal: 8, module: {law: normal, sd: 1}}', 'sd 1 mA'],
    ['{nominal: 8, module: {law: lognormal, sd_percent: 30}}', 'lognormal, sd 30 %'],
    // By hand: ends at 1 sd; 1 - 2 phi(1) / (2 Phi(1) - 1) = 1 - 0.4839414 / 0.6826895 = 0.2911251, root 0.53956.
    [
      '{nominal: 8, module: {law: truncated-normal, sd: 1, half_width: 1}}',
      'sd 1 mA, cut at +-1 mA (sd left 0.5396 mA)',
    ],
  ])('says of %s what is drawn', (spread, words) => {
    expect(wordsOf(spread)).toBe(words);
  });
});
