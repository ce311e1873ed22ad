import { existsSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { InstalledPackage, MANIFEST } from './packed.js';

let installed: InstalledPackage;

beforeAll(() => {
  installed = new InstalledPackage();
});
afterAll(() => installed.remove());

describe('the packed package, installed in a folder whose name has spaces', () => {
  it('tells its version', () => {
    expect(installed.motleybank('--version')).toEqual({ status: 0, out: `${MANIFEST.version}\n`, err: '' });
  });

  it('has help with an example for every command that it names', () => {
    const { out } = installed.motleybank('--help');
    const commands = [...out.matchAll(/^ {2}([a-z]+) (?:\[options\]|<)/gm)].map(([, name]) => name);
    expect(commands).toEqual(expect.arrayContaining(['run', 'check', 'trace', 'new', 'schema']));
    for (const command of commands) {
      const help = installed.motleybank(command, '--help');
      expect(help, command).toMatchObject({ status: 0, err: '' });
      expect(help.out).toContain(`Example: motleybank ${command} `);
    }
  });

  it('writes a first study, checks it and runs it on threads, down to the replay of its hardest case', () => {
    expect(installed.motleybank('new', 'my first.yaml')).toMatchObject({ status: 0, out: '' });
    const study = join(installed.folder, 'my first.yaml');
    writeFileSync(study, readFileSync(study, 'utf8').replace('cycles: 60 ', 'cycles: 3 '));

    const check = installed.motleybank('check', 'my first.yaml');
    expect(check).toMatchObject({ status: 0, err: '' });
    expect(check.out).toContain('128 banks x 3 cycles x 3 candidates');

    const run = installed.motleybank('run', 'my first.yaml', '--instances', '4', '--threads', '2');
    expect(run.status, run.err).toBe(0);
    expect(run.out).toContain('4 sampled banks, 3 cycles');
    const folder = join('results', 'my first');
    for (const file of ['summary.csv', 'by-cycle.csv', 'comparisons.csv', 'datapackage.json', 'run.json']) {
      expect(existsSync(join(installed.folder, folder, file)), file).toBe(true);
    }

    const [, words] = /^ {2}motleybank (trace .*)$/m.exec(run.out) ?? [];
    const args = words.match(/"[^"]*"|'[^']*'|\S+/g)?.map((word) => word.replace(/^["']|["']$/g, '')) ?? [];
    const trace = installed.motleybank(...args);
    expect(trace.status, trace.err).toBe(0);
    expect(trace.err).toContain('events.csv written');
  });

  it('is a library too, and gives editors its schema', () => {
    writeFileSync(
      join(installed.folder, 'use.mjs'),
      `import { createRequire } from 'node:module';
import * as motleybank from 'motleybank';
const schema = createRequire(import.meta.url)('motleybank/study.schema.json');
console.log(JSON.stringify([typeof motleybank.simulateInstance, typeof schema.properties.motleybank]));
`,
    );
    expect(installed.run('use.mjs')).toEqual({ status: 0, out: '["function","object"]\n', err: '' });
  });
});
