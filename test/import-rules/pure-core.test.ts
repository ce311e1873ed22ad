import { readdirSync, readFileSync } from 'node:fs';
import { join, relative, sep } from 'node:path';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';

const TREE = fileURLToPath(new URL('../..', import.meta.url));

/** Files that may look at a clock or touch the machine: they run, wait and report, and nothing of it is a result. */
const SHELL = /^(src\/(execution|commands)\/|src\/cli\.ts$|workers\/)/;

/** Words by which a result could come to depend on when, where or in what country it is computed. */
const CLOCKS =
  /\b(Date|performance|process|console|globalThis|Intl|setTimeout|setInterval|queueMicrotask)\b|\.toLocale/;
const CHANCE = /\bMath\s*\.\s*random\b|\brandomUUID\b|\bgetRandomValues\b/;

function code(text: string): string {
  return text.replace(/\/\*[\s\S]*?\*\/|(?<![:'"`])\/\/.*$/gm, '');
}

function files(): readonly (readonly [string, string])[] {
  return ['src', 'workers'].flatMap((folder) =>
    readdirSync(join(TREE, folder), { recursive: true, withFileTypes: true })
      .filter(({ name }) => name.endsWith('.ts'))
      .map(({ parentPath, name }) => join(parentPath, name))
      .map((path) => [relative(TREE, path).split(sep).join('/'), code(readFileSync(path, 'utf8'))] as const),
  );
}

describe('the core', () => {
  it('looks at no clock and touches nothing outside itself', () => {
    const core = files().filter(([path]) => !SHELL.test(path));
    expect(core.length).toBeGreaterThan(100);
    expect(core.filter(([, text]) => CLOCKS.test(text)).map(([path]) => path)).toEqual([]);
  });

  it('takes chance from nowhere but the seeded streams', () => {
    // The lock of a run folder needs a name that no other process has; it is no result.
    const found = files().filter(([, text]) => CHANCE.test(text));
    expect(found.map(([path]) => path)).toEqual(['src/execution/lock.ts']);
  });

  it.each(['Math.random()', 'Date.now()', 'new Date()', 'performance.now()', 'console.log(1)', 'x.toLocaleString()'])(
    'would not hide %s',
    (call) => {
      const text = code(`/* a comment */ const y = ${call}; // more`);
      expect(CLOCKS.test(text) || CHANCE.test(text)).toBe(true);
    },
  );
});
