import { afterAll, describe, expect, it } from 'vitest';
import { refuseOtherRun } from '../../src/execution/refuse-other-run.js';
import { RunFolder } from '../../src/execution/run-folder.js';
import type { Candidate, Study } from '../../src/study/study.js';
import { Scratch } from './fake-run.js';
import { FAKE_STUDY, fakeKeys, NATIVE } from './fake-study.js';

const scratch = new Scratch();
afterAll(() => scratch.remove());
const contentOf = ({ seed, cycles }: Study, { wiring, strings }: Candidate) => ({ seed, cycles, wiring, strings });

/** What is said against running a study on a folder that holds one block of each candidate of another. */
async function objection(kept: { study: Study; resolved?: string }, study: Study, keys = fakeKeys(study)) {
  const path = scratch.next();
  const before = await RunFolder.open(path, []);
  const block = { csv: 'instance\r\n', computeS: 0 };
  for (const [candidate, key] of fakeKeys(kept.study)) await before.keep({ candidate, block: 1 }, key, 4, block);
  await before.write('study.resolved.json', kept.resolved ?? JSON.stringify(kept.study));
  await before.close();
  const folder = await RunFolder.open(path, []);
  const error = await refuseOtherRun(study, keys, contentOf, folder).catch((reason: unknown) => reason);
  await folder.close();
  return error === undefined ? undefined : String(error).replace(`FolderRefused: ${path} holds another run: `, '');
}

const ADVICE = '; --replace discards it, --out names another folder';

describe('a folder with outcomes', () => {
  it('is welcome if they are of the same study, whatever its title and count', async () => {
    const study = { ...FAKE_STUDY, title: 'another', instances: 400 };
    expect(await objection({ study: FAKE_STUDY }, study)).toBeUndefined();
  });

  it('is welcome if candidates come in or go out', async () => {
    expect(await objection({ study: FAKE_STUDY }, { ...FAKE_STUDY, candidates: [NATIVE] })).toBeUndefined();
    expect(await objection({ study: { ...FAKE_STUDY, candidates: [NATIVE] } }, FAKE_STUDY)).toBeUndefined();
  });

  it('is refused with the first difference by its path', async () => {
    const other = await objection({ study: FAKE_STUDY }, { ...FAKE_STUDY, cycles: 30 });
    expect(other).toBe(`cycles is 3 there and 30 here${ADVICE}`);
  });

  it('is refused by the candidate if another engine made it, for then the studies are the same', async () => {
    const keys = new Map([...fakeKeys(FAKE_STUDY)].map(([candidate, key]) => [candidate, `2${key}`]));
    const other = await objection({ study: FAKE_STUDY }, FAKE_STUDY, keys);
    expect(other).toBe(`its outcomes of strings are of another study or engine${ADVICE}`);
  });

  it.each(['', '{', 'null', '{"candidates":7}'])(
    'is refused also if its study cannot be read: %j',
    async (resolved) => {
      const other = await objection({ study: FAKE_STUDY, resolved }, { ...FAKE_STUDY, cycles: 30 });
      expect(other).toBe(`its outcomes of strings are of another study or engine${ADVICE}`);
    },
  );
});
