import { describe, expect, it } from 'vitest';
import { sha256 } from '../../src/execution/checksum.js';
import type { JournalEntry } from '../../src/execution/journal.js';
import { allBlocks } from '../../src/execution/plan.js';
import { blockFile } from '../../src/execution/run-folder.js';
import { checkBlocks, findDifference, spreadSample, studyOfBlocks } from '../../src/execution/verify-run.js';
import { FAKE_STUDY } from './fake-study.js';

const TASKS = allBlocks(FAKE_STUDY);
const ENTRIES: readonly JournalEntry[] = TASKS.map((task) => ({
  ...task,
  key: 'key',
  instances: task.block === 4 ? 2 : 4,
  sha256: sha256(blockFile(task)),
  compute_s: 0,
}));
const BLOCK = { task: { candidate: 'strings', block: 2 }, csv: 'instance,a,b\r\n5,1,2\r\n6,3,4\r\n' };

describe('comparing blocks with the journal', () => {
  it('finds all of them intact if their texts have the checksums', () => {
    const { intact, findings, missing } = checkBlocks(FAKE_STUDY, 14, ENTRIES, (name) => name);
    expect(intact.map(({ task }) => task)).toEqual(TASKS);
    expect([findings, missing]).toEqual([[], 0]);
  });

  it('tells which are altered, which are gone and how many were never finished', () => {
    const read = (name: string) => (name.endsWith('twin.csv') ? null : name.replace('strings/block-0003', 'strings/x'));
    const { intact, findings, missing } = checkBlocks(FAKE_STUDY, 14, ENTRIES.slice(0, -1), read);
    expect(findings).toEqual([
      'outcomes/strings/twin.csv cannot be read',
      'outcomes/cross-linked/twin.csv cannot be read',
      'outcomes/strings/block-0003.csv is not as it was written',
    ]);
    expect([intact.length, missing]).toEqual([6, 1]);
    // Complete with 12 banks, the last block of four is not missed, and is compared where it is.
    const early = checkBlocks(FAKE_STUDY, 12, ENTRIES.slice(0, -1), read);
    expect([early.intact.length, early.missing]).toEqual([6, 0]);
  });
});

describe('the sample of blocks', () => {
  it('is spread evenly, and all of them if more are asked for', () => {
    // By hand: the middles of thirds of 0 to 8 are 1, 4 and 7.
    expect(spreadSample([0, 1, 2, 3, 4, 5, 6, 7, 8], 3)).toEqual([1, 4, 7]);
    expect(spreadSample([0, 1, 2], 5)).toEqual([0, 1, 2]);
    expect(spreadSample([0, 1, 2], 0)).toEqual([]);
  });
});

describe('the study that blocks were computed for', () => {
  it('has as many banks as the longest block reaches', () => {
    expect(studyOfBlocks({ ...FAKE_STUDY, instances: 3 }, ENTRIES).instances).toBe(14);
    expect(studyOfBlocks(FAKE_STUDY, ENTRIES.slice(0, 2)).instances).toBe(14);
  });
});

describe('a block that was computed again', () => {
  it('is the same, or differs first in a value that is told', () => {
    expect(findDifference(BLOCK, { csv: BLOCK.csv, computeS: 1 })).toBeNull();
    expect(findDifference(BLOCK, { csv: BLOCK.csv.replace('4', '4.5'), computeS: 1 })).toBe(
      'outcomes/strings/block-0002.csv, instance 6: b is 4, and 4.5 when computed again',
    );
  });

  it('may have other rows or columns, or none', () => {
    const other = 'outcomes/strings/block-0002.csv has other rows or columns when computed again';
    expect(findDifference(BLOCK, { csv: BLOCK.csv.replace('a,b', 'a,c'), computeS: 1 })).toBe(other);
    expect(findDifference(BLOCK, { csv: BLOCK.csv.replace('6,3,4\r\n', ''), computeS: 1 })).toBe(other);
    const fault = { instance: 6, message: 'no convergence', stack: '' };
    expect(findDifference(BLOCK, { fault })).toBe('strings, block 2 cannot be computed again: no convergence');
  });
});
