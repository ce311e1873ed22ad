import { describe, expect, it } from 'vitest';
import { bleedInForce } from '../../src/study/bleed-in-force.js';
import { studyOf, studyWith } from './study-under-test.js';

const wired = (more: string): string => `{wiring: strings, modules: [[A1, A2], [A3, A4]]${more}}`;

describe('the bleed rule in force', () => {
  it('is told of every stock', () => {
    expect(bleedInForce(studyOf(studyWith({})))).toBe('bleed rule in force: above-lowest, always (stock house)');
  });

  it('is told of stocks and candidates alike, as far as a candidate says something else', () => {
    const candidates = `  plain: ${wired('')}
  weak: ${wired(', bleed: {current_mA: 20}')}
  each: ${wired(', bleed: {rule: each}')}
  never: ${wired(', bleed: {rule: none}')}
  by-day: ${wired(', bleed: {rule: each, when: charging}')}
`;
    const text = studyWith({ candidates }).replace('stock:', 'stock:\n  shed: {like: house, modules: [S1]}');
    expect(bleedInForce(studyOf(text))).toBe(
      'bleed rule in force: above-lowest, always (stock shed, stock house); each (candidate each); ' +
        'none (candidate never); each, charging (candidate by-day)',
    );
  });
});
