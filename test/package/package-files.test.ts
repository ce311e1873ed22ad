import { readdirSync, readFileSync } from 'node:fs';
import { join, posix, relative, sep } from 'node:path';
import { describe, expect, it } from 'vitest';
import { MANIFEST, pack, TREE } from './packed.js';

/** What the package holds beside one script and one declaration for every source. */
const BESIDE = [
  'LICENSE',
  'README.md',
  'dist/study.schema.json',
  'package.json',
  'studies/demo-week.csv',
  'studies/README.md',
  'studies/bench-measured.csv',
  'studies/bench-measured.yaml',
  'studies/clinic-48v.yaml',
  'studies/demo.yaml',
  'studies/published-spreads.yaml',
  'studies/winter-bright.csv',
  'studies/winter-dark.csv',
  'studies/winter-frost.csv',
  'studies/winter.yaml',
  'studies/workshop-mixed.yaml',
];

const TOP_LEVEL = [
  'DEVELOPERS.md',
  'LICENSE',
  'README.md',
  'biome.json',
  'package-lock.json',
  'package.json',
  'src',
  'studies',
  'test',
  'tsconfig.json',
  'workers',
];

function sources(): readonly string[] {
  return ['src', 'workers'].flatMap((folder) =>
    readdirSync(join(TREE, folder), { recursive: true, withFileTypes: true })
      .filter(({ name }) => name.endsWith('.ts') && !name.endsWith('.d.ts'))
      .map(({ parentPath, name }) => relative(TREE, join(parentPath, name)).split(sep).join(posix.sep)),
  );
}

describe('the package', () => {
  it('holds what its sources make, the licence, the README, the schema and the demo, and nothing else', () => {
    const made = sources().flatMap((source) => ['.js', '.d.ts'].map((end) => `dist/${source.replace(/\.ts$/, end)}`));
    const { files } = pack(['--dry-run']);
    expect(files.map(({ path }) => path).sort()).toEqual([...BESIDE, ...made].sort());
  });

  it('pins every version', () => {
    for (const [name, version] of Object.entries({ ...MANIFEST.dependencies, ...MANIFEST.devDependencies })) {
      expect(version, name).toMatch(/^\d+\.\d+\.\d+(-[\w.]+)?$/);
    }
  });

  it('is locked to the versions that it names', () => {
    const lock = JSON.parse(readFileSync(join(TREE, 'package-lock.json'), 'utf8'));
    const { dependencies, devDependencies } = MANIFEST;
    expect(lock.packages['']).toMatchObject({ version: MANIFEST.version, dependencies, devDependencies });
  });
});

describe('the top level', () => {
  it('holds nothing but what a tool or a reader looks for there', () => {
    const ignored = readFileSync(join(TREE, '.gitignore'), 'utf8')
      .split(/\r?\n/)
      .map((line) => line.replace(/\/$/, ''));
    const names = readdirSync(TREE).filter((name) => !name.startsWith('.') && !ignored.includes(name));
    expect(names.filter((name) => !name.endsWith('.tgz')).sort()).toEqual(TOP_LEVEL);
  });
});
