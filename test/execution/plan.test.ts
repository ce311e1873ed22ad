import { describe, expect, it } from 'vitest';
import { allBlocks, commonInstances } from '../../src/execution/plan.js';
import { FAKE_STUDY } from './fake-study.js';

const SMALL = { ...FAKE_STUDY, instances: 6 };
const task = (candidate: string, block: number) => ({ candidate, block });

describe('the plan of a run', () => {
  it('begins with the twins and goes on block by block through the candidates', () => {
    expect(allBlocks(SMALL)).toEqual([
      task('strings', 0),
      task('cross-linked', 0),
      task('strings', 1),
      task('cross-linked', 1),
      task('strings', 2),
      task('cross-linked', 2),
    ]);
  });
});

describe('the sampled banks that every candidate has', () => {
  it('are all of them if nothing is missing, however short the last block', () => {
    expect(commonInstances(SMALL, allBlocks(SMALL))).toBe(6);
  });

  it.each([
    ['block 2 of one candidate', task('strings', 2), 4],
    ['block 1 of one candidate, whatever comes after it', task('cross-linked', 1), 0],
    ['a twin', task('cross-linked', 0), 0],
  ])('end before what is missing: %s', (_, missing, instances) => {
    const finished = allBlocks(SMALL).filter(
      ({ candidate, block }) => candidate !== missing.candidate || block !== missing.block,
    );
    expect(commonInstances(SMALL, finished)).toBe(instances);
  });

  it('do not count blocks of candidates that are not asked for', () => {
    expect(commonInstances(SMALL, [...allBlocks(SMALL), task('old', 3)])).toBe(6);
  });
});
