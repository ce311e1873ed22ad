import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { afterAll, describe, expect, it } from 'vitest';
import { RunWatch } from '../../src/commands/run-watch.js';
import { Progress } from '../../src/execution/progress.js';
import { blockFile, RunFolder } from '../../src/execution/run-folder.js';
import { RunLog } from '../../src/execution/run-log.js';
import { blockInstances, outcomeLayout } from '../../src/outcomes/block.js';
import { encodeBlock } from '../../src/outcomes/block-csv.js';
import { outcomeColumns } from '../../src/outcomes/columns.js';
import { Scratch } from '../execution/fake-run.js';
import { FAKE_STUDY } from '../execution/fake-study.js';

const scratch = new Scratch();
afterAll(() => scratch.remove());

/** A block in which every event happened and every amount is 1. */
function blockOfOnes(candidate: string, block: number): string {
  const [{ ...any }] = FAKE_STUDY.candidates.filter(({ key }) => key === candidate);
  const columns = outcomeColumns(outcomeLayout(FAKE_STUDY, any));
  const range = blockInstances(block, FAKE_STUDY);
  const rows = Array.from({ length: range.last - range.first + 1 }, (_, index) => ({
    instance: range.first + index,
    values: columns.map(() => 1),
  }));
  return encodeBlock(columns, range, rows);
}

describe('a run that is watched', () => {
  it('tells its rate and its estimates as blocks come in, over all that every candidate has', async () => {
    const path = scratch.next();
    const folder = await RunFolder.open(path, []);
    let screen = '';
    let nowMs = 0;
    const write = (text: string) => {
      screen += text;
    };
    const progress = new Progress({ terminal: false, nowMs: () => nowMs, write });
    const log = new RunLog(join(path, 'log.jsonl'), () => expect.unreachable());
    const watch = new RunWatch(FAKE_STUDY, folder, progress, log);
    const finish = async (candidate: string, block: number, isComputed: boolean) => {
      await folder.write(blockFile({ candidate, block }), blockOfOnes(candidate, block));
      watch.finished({ candidate, block }, isComputed);
    };
    // Blocks 1 were found, of block 2 one candidate's only is there: 4 banks that both have.
    await finish('strings', 1, false);
    await finish('cross-linked', 1, false);
    await finish('strings', 2, true);
    progress.update(1, 8);
    nowMs = 120_000;
    watch.start(5);
    while (!screen.includes('so far')) await pause(5);
    await finish('cross-linked', 2, true);
    while (!screen.includes('8 banks so far')) await pause(5);
    await watch.stop();
    await folder.close();

    // By hand: a block in two minutes is half a block a minute, and 7 are left.
    const [first = '', ...lines] = screen.trimEnd().split('\n');
    expect(first).toBe('1 of 8 blocks in 2:00, 0.5 a minute, about 14:00 left');
    expect(lines.join('\n')).toMatch(
      /^ {2}early cutoff on charge, % of banks, 4 banks so far: strings 100\.0 \(\S+ to 100\.0\), cross/,
    );
    const told = readFileSync(join(path, 'log.jsonl'), 'utf8').trimEnd().split('\n');
    // By hand: the 4 banks of the one block that was computed by then, in 120 s.
    expect(JSON.parse(told[0] ?? '')).toMatchObject({
      event: 'progress',
      blocks_done: 1,
      blocks_total: 8,
      elapsed_s: 120,
      banks_per_s: 0.03333,
      left_s: 840,
      instances: 4,
    });
    expect(JSON.parse(told.at(-1) ?? '')).toMatchObject({ banks_per_s: 0.06667, instances: 8 });
    expect(JSON.parse(told.at(-1) ?? '').estimates).toContainEqual(
      expect.objectContaining({
        candidate: 'cross-linked',
        measure: 'load_lost',
        unit: '%',
        estimate: 100,
        upper: 100,
      }),
    );
  });
});
