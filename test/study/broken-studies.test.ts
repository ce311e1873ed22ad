import { readdirSync, readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { renderProblem } from '../../src/study/problem.js';
import { read } from './study-under-test.js';

const FOLDER = fileURLToPath(new URL('broken/', import.meta.url));
const text = (name: string): string => readFileSync(`${FOLDER}${name}`, 'utf8');
const names = readdirSync(FOLDER);
const studies = names.filter((name) => name.endsWith('.yaml')).map((name) => name.replace('.yaml', ''));
const files = Object.fromEntries(names.filter((name) => name.endsWith('.csv')).map((name) => [name, text(name)]));

describe('broken studies', () => {
  it('are at least forty', () => {
    expect(studies.length).toBeGreaterThanOrEqual(40);
  });

  // The messages beside each study were read and judged by hand; they are part of what a user sees.
  it.each(studies)('%s is refused with exactly the messages beside it', (name) => {
    const result = read(text(`${name}.yaml`), files, `${name}.yaml`);
    const lines = result.kind === 'refused' ? result.problems.map(renderProblem) : ['it was read'];
    expect(`${lines.join('\n')}\n`).toBe(text(`${name}.txt`));
  });

  it('all say what must be and where', () => {
    for (const name of studies) {
      for (const line of text(`${name}.txt`).trim().split('\n')) {
        expect(line, name).toMatch(/^[\w-]+\.(yaml|csv)(:\d+:\d+)? .*must be .+/);
      }
    }
  });
});
