import { describe, expect, it } from 'vitest';
import { readYaml } from '../../src/study/yaml-source.js';

const TEXT = 'a: 1\nb:\n  - x\n  - {c: 2}\n';
const DATA = { a: 1, b: ['x', { c: 2 }] };

function refusal(text: string): string {
  const result = readYaml(text, 's.yaml');
  if ('source' in result) return 'it was read';
  return result.problems.map(({ line, column, message }) => `${line}:${column} ${message}`).join('\n');
}

describe('a YAML file', () => {
  it.each(['\n', '\r\n', '\r'])('is the same with line ends %j, a byte order mark before it or not', (end) => {
    for (const mark of ['', '\ufeff']) {
      const read = readYaml(mark + TEXT.replaceAll('\n', end), 's.yaml');
      if (!('source' in read)) throw new Error('it was refused');
      expect(read.source.data).toEqual(DATA);
      expect(read.source.placeOf(['b', 1, 'c']).line).toBe(4);
    }
  });

  it('may be nested 50 levels deep, in brackets or by indentation', () => {
    expect(refusal(`${'['.repeat(50)}${']'.repeat(50)}`)).toBe('it was read');
    expect(refusal(`${'['.repeat(51)}${']'.repeat(51)}`)).toBe('1:51 must be nested at most 50 levels deep, got more');
    expect(refusal(`${'- '.repeat(50)}x`)).toMatch(/^1:101 must be nested/);
    expect(refusal(Array.from({ length: 60 }, (_, depth) => `${' '.repeat(depth)}k:\n`).join(''))).toMatch(
      /must be nested/,
    );
  });

  // 300,000 levels exhaust the stack of whatever goes down by recursion.
  it.each(['[', '{a: ', '- ', '? ', '[{a: '])('is refused in one message for levels of %j without end', (level) => {
    expect(refusal(level.repeat(150_000))).toMatch(/^1:\d+ must be nested at most 50 levels deep, got more$/);
  });

  it('may have a thousand keys in a mapping', () => {
    const keys = (count: number) => Array.from({ length: count }, (_, key) => `k${key}: 1\n`).join('');
    expect(refusal(keys(1000))).toBe('it was read');
    expect(refusal(keys(1001))).toBe('1:1 must be a mapping of at most 1000 keys, got 1001');
  });

  it('tells no more faults than anyone reads', () => {
    expect(refusal('k: 1\n'.repeat(500)).split('\n')).toHaveLength(100);
  });

  it('is refused where a blank only looks like one, which syntax alone would not tell', () => {
    expect(refusal('a: 1\nb:\u00a02\n')).toMatch(
      /^2:3 must be indented .* got the character U\+00A0 that looks like one$/,
    );
    expect(refusal('title: "a\u00a0b"\n')).toBe('it was read');
  });

  it('is refused with keys that are no words', () => {
    for (const key of ['{a: 1}', '[1, 2]', '? [x]\n']) {
      expect(refusal(`${key}: 1\n`)).toMatch(/must be a mapping whose keys are plain words, got another key/);
    }
  });

  it('is refused beyond a million characters', () => {
    expect(refusal(`a: ${'x'.repeat(1_000_000)}`)).toBe(
      'null:null must be a file of at most 1000000 characters, got 1000003',
    );
  });
});
