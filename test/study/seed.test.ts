import { describe, expect, it } from 'vitest';
import { isSeed } from '../../src/study/seed.js';

describe('a seed', () => {
  it.each(['0', '1', '4711', '9007199254740991', 'first try', '2026-12-01', 'v1.2', '12 monkeys', 'a-1', 'eleven'])(
    'may be %s',
    (text) => {
      expect(isSeed(text)).toBe(true);
    },
  );

  it.each([
    '-1',
    '+1',
    '- 1',
    '1.5',
    '.5',
    '1,5',
    "1'000",
    '1_000',
    '1 000',
    '1e3',
    '1e',
    '007',
    '0x1f',
    '9007199254740992',
  ])('is not %s, which looks like a mistyped number', (text) => {
    expect(isSeed(text)).toBe(false);
  });

  it.each(['NaN', '-Infinity', '.inf', '', '  ', 'x'.repeat(201)])('is not "%s"', (text) => {
    expect(isSeed(text)).toBe(false);
  });
});
