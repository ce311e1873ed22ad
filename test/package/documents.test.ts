import { existsSync, readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { EXIT_STATUS } from '../../src/commands/exit-status.js';
import { studyOf } from '../study/study-under-test.js';
import { MANIFEST, TREE } from './packed.js';

const README = readFileSync(join(TREE, 'README.md'), 'utf8');
const DEVELOPERS = readFileSync(join(TREE, 'DEVELOPERS.md'), 'utf8');

function matches(text: string, pattern: RegExp): readonly string[] {
  return [...text.matchAll(pattern)].map(([, found]) => found);
}

describe('the README', () => {
  it('begins with the job and two commands that set everything up', () => {
    const [title, job] = README.split('\n\n');
    expect(title).toBe('# motleybank');
    expect(job).toMatch(/^Battery modules in one bank/);
    expect(matches(README, /^ {4}(npm ci && npm .*)$/gm)).toEqual(['npm ci && npm start', 'npm ci && npm test']);
  });

  it('shows studies that are read without a problem', () => {
    const studies = matches(README, /```yaml\n([\s\S]*?)```/g);
    expect(studies).toHaveLength(1);
    for (const text of studies) expect(studyOf(text).candidates.map(({ key }) => key)).toContain('cross-linked');
  });

  it('tells every exit status', () => {
    const table = README.slice(README.indexOf('| exit status |'), README.indexOf('## What a run leaves'));
    const told = matches(table, /^\| ([\d, ]+) \|/gm).flatMap((cell) => cell.split(', ').map(Number));
    expect(told).toEqual(expect.arrayContaining(Object.values(EXIT_STATUS)));
    expect(told).toHaveLength(Object.values(EXIT_STATUS).length);
  });
});

describe('the documents', () => {
  it('name no file, folder or script that is not there', () => {
    const text = README + DEVELOPERS;
    const paths = matches(text, /`((?:src|test|workers|studies|\.ci)\/[\w./-]*)`/g).filter(
      (path) => path !== 'test/ROOM/',
    );
    expect(paths.length).toBeGreaterThan(40);
    expect(paths.filter((path) => !existsSync(join(TREE, path)))).toEqual([]);
    const scripts = matches(text, /npm run (\w+)/g);
    expect(scripts.filter((name) => MANIFEST.scripts[name] === undefined)).toEqual([]);
  });

  it('have a line for every room', () => {
    const rooms = readdirSync(join(TREE, 'src'), { withFileTypes: true }).filter((entry) => entry.isDirectory());
    expect(matches(DEVELOPERS, /^\| `src\/(\w+)\/` \|/gm).toSorted()).toEqual(rooms.map(({ name }) => name).sort());
  });
});
