import { expect, test } from 'vitest';
import { copulaOf } from '../../src/sampling/copula.js';
import type { Correlation } from '../../src/study/study.js';
import { normalQuantileByBisection, phiBySeries } from '../mathematics/normal-by-series.js';

const own: Readonly<Record<string, number>> = { capacityAh: 0.2, resistanceOhm: 0.7, efficiency: 0.9 };
const uniformOf = (quantity: string): number => own[quantity] ?? Number.NaN;
const score = (quantity: string): number => normalQuantileByBisection(uniformOf(quantity));
const pair = (of: Correlation['of'], rho: number): Correlation => ({ level: 'module', of, rho });

test('two quantities share a normal score by their correlation, the first in the registry keeping its own', () => {
  const { members, uniforms } = copulaOf([pair(['resistanceOhm', 'capacityAh'], -0.6)]);
  expect(members).toEqual(['capacityAh', 'resistanceOhm']);
  // By hand: L = (1), (-0.6, sqrt(1 - 0.36) = 0.8).
  expect(uniforms(uniformOf)).toEqual([
    expect.closeTo(0.2, 12),
    expect.closeTo(phiBySeries(-0.6 * score('capacityAh') + 0.8 * score('resistanceOhm')), 12),
  ]);
});

test('quantities tied to a common one only are uncorrelated with each other beyond that', () => {
  const { uniforms } = copulaOf([pair(['capacityAh', 'efficiency'], 0.8), pair(['resistanceOhm', 'efficiency'], 0.36)]);
  // By hand, capacity and resistance unrelated: efficiency has the row (0.8, 0.36, sqrt(1 - 0.64 - 0.1296) = 0.48).
  const third = 0.8 * score('capacityAh') + 0.36 * score('resistanceOhm') + 0.48 * score('efficiency');
  expect(uniforms(uniformOf)).toEqual([
    expect.closeTo(0.2, 12),
    expect.closeTo(0.7, 12),
    expect.closeTo(phiBySeries(third), 12),
  ]);
});

test('without correlations there are no members', () => {
  const { members, uniforms } = copulaOf([]);
  expect(members).toEqual([]);
  expect(uniforms(uniformOf)).toEqual([]);
});

test('correlations that contradict each other are named and refused', () => {
  const contradicting = [
    pair(['capacityAh', 'resistanceOhm'], 0.9),
    pair(['capacityAh', 'efficiency'], 0.9),
    pair(['resistanceOhm', 'efficiency'], -0.9),
  ];
  expect(() => copulaOf(contradicting)).toThrow(
    'correlations between capacityAh, resistanceOhm, efficiency contradict',
  );
});
