import { describe, expect, it } from 'vitest';
import { repositoryText } from '../study/study-under-test.js';

interface Mutant {
  readonly name: string;
  readonly file: string;
  readonly find: string;
  readonly replace: string;
  readonly tests: readonly string[];
}

const mutants: readonly Mutant[] = JSON.parse(repositoryText('test/mutants/mutants.json'));

describe('the errors that npm run mutants puts in', () => {
  it.each(mutants.map((mutant) => [mutant.name, mutant] as const))('%s', (_, { file, find, replace, tests }) => {
    // A text that has moved would put in nothing, or the wrong thing.
    expect(repositoryText(file).split(find)).toHaveLength(2);
    expect(replace).not.toBe(find);
    for (const test of tests) expect(repositoryText(test), test).toContain('describe(');
  });

  it('are counted in the pages of the model', () => {
    expect(repositoryText('src/bank/README.md')).toContain(`puts ${mutants.length} sign, factor and order errors`);
  });

  it('have names of their own', () => {
    expect(new Set(mutants.map(({ name }) => name)).size).toBe(mutants.length);
  });
});
