import seedrandom from 'seedrandom';
import { describe, expect, it } from 'vitest';
import { canonicalJson } from '../../src/study/canonical-json.js';
import { renderProblem } from '../../src/study/problem.js';
import { read, repositoryText } from './study-under-test.js';

const STUDY = repositoryText('studies/demo.yaml');
const PROFILE = repositoryText('studies/demo-week.csv');
/** Short, since the text of the study is what is mutated. */
const SHORT_PROFILE = 'time_h,load_W,charge_W\n0,100,0\n12,0,300\n';
const CASES = 1000;
const SCRAPS = [
  '{',
  '}',
  '[',
  ']',
  ':',
  ': ',
  '- ',
  '#',
  '&a ',
  '*a',
  '!!map ',
  '|',
  '>',
  '"',
  "'",
  '\n',
  '\n\n  ',
  '\t',
  '\0',
  '\u001b[31m',
  'null',
  'true',
  '.nan',
  '-.inf',
  '1e400',
  '-1',
  '0',
  '1e-320',
  '0x7fffffff',
  '999999999999999999999',
  '__proto__: 1\n',
  'constructor: 1\n',
  '<<: *a\n',
  '---\n',
  '%YAML 1.1\n',
  '? x\n',
  'like: newer\n',
  'modules: {A: {}}\n',
  '\ufeff',
  ',',
  ';',
  '\r',
];

type Random = () => number;

function mutated(text: string, random: Random): string {
  let result = text;
  const changes = 1 + Math.floor(random() * 4);
  for (let change = 0; change < changes; change++) result = onceMutated(result, random);
  return result;
}

function onceMutated(text: string, random: Random): string {
  const at = Math.floor(random() * (text.length + 1));
  const length = Math.floor(random() * 30);
  const scrap = SCRAPS[Math.floor(random() * SCRAPS.length)] ?? '';
  switch (Math.floor(random() * 7)) {
    case 0:
      return text.slice(0, at) + text.slice(at + length);
    case 1:
      return text.slice(0, at) + scrap + text.slice(at);
    case 2:
      return text.slice(0, at);
    case 3: {
      const lines = text.split('\n');
      const from = Math.floor(random() * lines.length);
      lines.splice(Math.floor(random() * lines.length), 0, lines[from] ?? '');
      return lines.join('\n');
    }
    case 4: {
      const lines = text.split('\n');
      lines.splice(Math.floor(random() * lines.length), 1);
      return lines.join('\n');
    }
    case 5: {
      const numbers = [...text.matchAll(/\d+(\.\d+)?/g)];
      const number = numbers[Math.floor(random() * numbers.length)];
      if (number === undefined) return text;
      return text.slice(0, number.index) + scrap + text.slice(number.index + number[0].length);
    }
    default: {
      const words = [...text.matchAll(/[A-Za-z_]+/g)];
      const one = words[Math.floor(random() * words.length)];
      const other = words[Math.floor(random() * words.length)];
      if (one === undefined || other === undefined) return text;
      return text.slice(0, one.index) + other[0] + text.slice(one.index + one[0].length);
    }
  }
}

/** Reads a mutant: it must come out as a sound study or as problems that can be printed. */
function judged(study: string, profile: string): 'read' | 'refused' {
  const result = read(study, { 'demo-week.csv': profile });
  if (result.kind === 'read') {
    // Every number of a study that was read is finite: canonical JSON refuses any other.
    expect(() => canonicalJson(result.study)).not.toThrow();
  } else {
    expect(result.problems.length).toBeGreaterThan(0);
    for (const problem of result.problems) expect(renderProblem(problem)).toMatch(/must be [^\n]+$/);
  }
  return result.kind;
}

describe('the study reader', () => {
  it('turns a thousand mutants of the demo study into a study or printable problems, never into an error', () => {
    const random = seedrandom('study mutants');
    const kinds = { read: 0, refused: 0 };
    for (let run = 0; run < CASES; run++) kinds[judged(mutated(STUDY, random), SHORT_PROFILE)]++;
    // Mutants of both kinds, or the mutations would not test much.
    expect(kinds.read).toBeGreaterThan(CASES / 50);
    expect(kinds.refused).toBeGreaterThan(CASES / 2);
  });

  it('does so for mutants of the profile', () => {
    const random = seedrandom('profile mutants');
    for (let run = 0; run < CASES / 2; run++) judged(STUDY, mutated(PROFILE, random));
  });

  it('refuses nesting deeper than any study', () => {
    expect(judged(`motleybank: 1\ntitle: ${'['.repeat(20_000)}`, PROFILE)).toBe('refused');
    expect(judged(`motleybank: 1\ntitle: ${'['.repeat(900)}${']'.repeat(900)}`, PROFILE)).toBe('refused');
  });

  it('refuses a file far larger than any study', () => {
    expect(judged(`motleybank: 1\ntitle: ${'x'.repeat(3_000_000)}`, PROFILE)).toBe('refused');
  });
});
