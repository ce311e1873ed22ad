import { describe, expect, it } from 'vitest';
import { renderProblem } from '../../src/study/problem.js';
import { readProfile } from '../../src/study/profile.js';
import { read, studyWithStock } from './study-under-test.js';

function loads(text: string): readonly number[] | string {
  const result = readProfile(text, 'p.csv', 24);
  if ('problems' in result) return result.problems.map(renderProblem).join('\n');
  return result.cycles.flatMap((cycle) => cycle.map(({ loadW }) => loadW));
}

const measured = (file: string) =>
  read(studyWithStock(['rated_Ah: 100', `measured: {file: m.csv, ${file}}`]), { 'm.csv': TABLES[file] ?? '' });
const TABLES: Record<string, string> = {
  'rows: resampled': `capacity_Ah\n${'94.5\n'.repeat(150_000)}`,
  'rows: of-each-module': `module,capacity_Ah\n${'A1,94.5\n'.repeat(150_000)}`,
};

describe('a table', () => {
  it('has semicolons between its cells if its first line has, and then decimal commas or points', () => {
    expect(loads('time_h;load_W;charge_W\n0;100,5;0\n12;,5;1,25e2\n')).toEqual([100.5, 0.5]);
    expect(loads('time_h;load_W;charge_W\n0;100.5;0\n12;200;0\n')).toEqual([100.5, 200]);
  });

  it('with both kinds of decimals is refused: 1.250 may be a thousand or one and a quarter', () => {
    expect(loads('time_h;load_W;charge_W\n0;100,5;0\n12;1.250;0\n')).toBe(
      'p.csv:3:4 load_W must be a number from 0 to 1000000, got "1.250" (other numbers of this table have a decimal comma)',
    );
  });

  it('has no decimal commas between commas, quoted or not', () => {
    expect(loads('time_h,load_W,charge_W\n0,"1,5",0\n')).toMatch(
      /^p\.csv:2:3 load_W .* got "1,5" \(decimal commas need/,
    );
    expect(loads('time_h,load_W,charge_W\n0,1,5,0\n')).toMatch(/^p\.csv:2:1 must be a row of 3 cells, got 4 \(decimal/);
  });

  it.each([
    ['\n', ''],
    ['\r\n', '\ufeff'],
    ['\r', '\ufeff'],
  ])('is the same with line ends %j after %j', (end, mark) => {
    expect(loads(mark + ['time_h,load_W,charge_W', '0,1,0', '12,2,0', '', ''].join(end))).toEqual([1, 2]);
  });

  it('may have separators and quotes in quoted cells', () => {
    const study = studyWithStock([
      'capacity_Ah: {nominal: 100, module: {law: resampled, file: m.csv, column: capacity_Ah}}',
    ]);
    const text = 'note,capacity_Ah\n"old, ""very"" used", 90 \n new ,"92"\n';
    expect(read(study, { 'm.csv': text })).toMatchObject({ kind: 'read' });
  });

  it('has only digits that everyone reads alike', () => {
    for (const number of [
      '\u0661\u0662',
      '\uff11',
      '\u22125',
      '0x10',
      '1_000',
      '1e999',
      'Infinity',
      'NaN',
      '1\u00a0000',
    ]) {
      expect(loads(`time_h,load_W,charge_W\n0,${number},0\n`), number).toMatch(/^p\.csv:2:3 load_W must be a number/);
    }
  });

  it('may be as long as allowed, wherever it is used', () => {
    // As arguments of one call so many rows would exhaust the stack.
    expect(measured('rows: resampled')).toMatchObject({ kind: 'read' });
    const twice = measured('rows: of-each-module');
    expect(twice.kind === 'refused' && twice.problems.length).toBe(20 + 3);
    const back = loads(`time_h,load_W,charge_W\n${'0,100,0\n'.repeat(150_000)}`);
    expect(String(back).split('\n')).toHaveLength(20);
  });

  it.each([
    ['rows', `time_h,load_W,charge_W\n${'0,100,0\n'.repeat(200_001)}`, 'must be at most 200000 rows, got 200001'],
    ['columns', `${'c,'.repeat(100)}c\n1\n`, 'must be at most 100 columns, got 101'],
    ['characters', 'x'.repeat(20_000_001), 'must be a table of at most 20000000 characters, got 20000001'],
  ])('is refused beyond so many %s', (_, text, message) => {
    expect(loads(text)).toBe(`p.csv:1:1 ${message}`);
  });
});
