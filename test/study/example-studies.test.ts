import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { renderProblem } from '../../src/study/problem.js';
import { read, repositoryText } from './study-under-test.js';

const folder = new URL('../../studies/', import.meta.url);
const names = readdirSync(folder);
const studies = names.filter((name) => name.endsWith('.yaml'));
const files = Object.fromEntries(
  names.filter((name) => name.endsWith('.csv')).map((name) => [name, readFileSync(new URL(name, folder), 'utf8')]),
);

describe('the studies that come with the program', () => {
  it.each(studies)('%s reads without a problem and says that it is invented', (name) => {
    const text = repositoryText(`studies/${name}`);
    const result = read(text, files, name);
    expect(result.kind === 'refused' ? result.problems.map(renderProblem) : []).toEqual([]);
    expect(text).toMatch(/invented/);
  });

  it.each(studies)('%s has a paragraph in the README of its folder', (name) => {
    expect(repositoryText('studies/README.md')).toContain(`**\`${name}\`**`);
  });
});
