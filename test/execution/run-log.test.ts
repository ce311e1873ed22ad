import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { RunLog } from '../../src/execution/run-log.js';
import { Scratch } from './fake-run.js';
import { unwritableFolder } from './unwritable-folder.js';

const scratch = new Scratch();
afterAll(() => scratch.remove());

describe('a log', () => {
  it('has a JSON object per line, and a later run goes on with it', () => {
    const path = join(scratch.next(), 'logs', 'run.jsonl');
    for (const text of ['one', 'two\nlines']) {
      const log = new RunLog(path, () => undefined);
      log.open();
      log.write({ event: 'note', text });
    }
    const lines = readFileSync(path, 'utf8').trimEnd().split('\n');
    expect(lines.map((line) => JSON.parse(line))).toEqual([
      { time: expect.stringMatching(/^\d{4}-\d\d-\d\dT[\d:.]+Z$/), event: 'note', text: 'one' },
      { time: expect.any(String), event: 'note', text: 'two\nlines' },
    ]);
  });

  it('that cannot be begun is an error, one that cannot go on is told once', () => {
    const reasons: string[] = [];
    const path = join(unwritableFolder(scratch.next()), 'run.jsonl');
    const log = new RunLog(path, (reason) => reasons.push(reason));
    expect(() => log.open()).toThrow();
    log.write({ event: 'note', text: 'one' });
    log.write({ event: 'note', text: 'two' });
    expect(reasons).toHaveLength(1);
  });

  it('that nobody asked for is none', () => {
    const log = new RunLog(undefined, () => expect.unreachable());
    log.open();
    log.write({ event: 'note', text: 'one' });
  });
});
