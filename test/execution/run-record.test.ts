import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { RunFolder } from '../../src/execution/run-folder.js';
import { RunRecord } from '../../src/execution/run-record.js';
import { Scratch } from './fake-run.js';

const scratch = new Scratch();
afterAll(() => scratch.remove());
const START = new Date('2026-03-01T08:00:00Z');

async function record(folder: RunFolder) {
  return JSON.parse((await folder.read('run.json')) ?? '');
}

describe('the record of a run', () => {
  it('tells of every session, and counts those that did not come to an end, killed ones too', async () => {
    const folder = await RunFolder.open(scratch.next(), []);
    await RunRecord.begin(folder, 2, START); // killed: nobody ends it
    await folder.write('datapackage.json', 'abc');
    const second = await RunRecord.begin(folder, 3, START);
    await second.end('complete', 12.5, true);
    const { interruptions, sessions } = await record(folder);
    await folder.close();
    expect(interruptions).toBe(1);
    expect(sessions).toHaveLength(2);
    expect(sessions[0]).toMatchObject({ threads: 2, duration_s: null, ended: null, results: null });
    expect(sessions[1]).toMatchObject({
      threads: 3,
      started: '2026-03-01T08:00:00.000Z',
      duration_s: 12.5,
      ended: 'complete',
      node: process.version,
      // FIPS 180-4, the example of one block.
      results: 'ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad',
    });
  });

  it('is begun anew where it cannot be read', async () => {
    const path = scratch.next();
    const folder = await RunFolder.open(path, []);
    writeFileSync(join(path, 'run.json'), '{"sessions":');
    await (await RunRecord.begin(folder, 1, START)).end('complete', 1, false);
    expect(await record(folder)).toMatchObject({ interruptions: 0, sessions: [{ ended: 'complete', results: null }] });
    await folder.close();
  });
});
