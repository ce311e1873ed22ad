import { spawnSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterAll, describe, expect, it } from 'vitest';
import { TREE } from './packed.js';

const CLI = join(TREE, 'dist', 'src', 'cli.js');
const NO_NETWORK = new URL('no-network.mjs', import.meta.url).href;
const STUDY = `motleybank: 1
instances: 4
block: 2
cycles: 2
stock: {house: {grade: older, modules: [A1, A2], rated_Ah: 100}}
duty: {phases: [{discharge_W: 300, for_h: 4}, {charge: to-full, at_most_h: 10}]}
candidates: {strings: {wiring: strings, modules: [[A1, A2]]}}
`;

const folder = mkdtempSync(join(tmpdir(), 'motleybank-offline-'));
writeFileSync(join(folder, 'first.yaml'), STUDY);
afterAll(() => rmSync(folder, { recursive: true, force: true }));

function started(command: string, ...args: readonly string[]) {
  return spawnSync(command, args, { cwd: folder, encoding: 'utf8' });
}

const run = (out: string) => [CLI, 'run', 'first.yaml', '--threads', '2', '--out', out];
const CONNECT = 'await fetch("http://192.0.2.1/")';
const summary = (out: string) => readFileSync(join(folder, out, 'summary.csv'), 'utf8');

/** Linux starts a process without any network, for root at once and for others as root of a namespace of their own. */
const EMPTY_NAMESPACE = [['-n'], ['-r', '-n']].find((how) => started('unshare', ...how, 'true').status === 0);

describe('a run on this machine', () => {
  it('never asks Node for the network, in any thread', () => {
    const preload = ['--import', NO_NETWORK];
    const tries = started(process.execPath, ...preload, '--input-type=module', '-e', CONNECT);
    expect([tries.signal, tries.stderr]).toEqual(['SIGKILL', expect.stringMatching(/^network: /)]);
    const inThread = `import { Worker } from 'node:worker_threads'; new Worker('import("node:net").then((net) => net.connect(1))', { eval: true });`;
    expect(started(process.execPath, ...preload, '--input-type=module', '-e', inThread).signal).toBe('SIGKILL');
    const { status, stderr } = started(process.execPath, ...preload, ...run('watched'));
    expect([status, stderr]).toEqual([0, expect.stringMatching(/^4 banks x 1 candidate/)]);
  });

  it('gives the same where there is no network at all', (context) => {
    if (EMPTY_NAMESPACE === undefined) context.skip('this system gives no process an empty network namespace');
    const offline = (...args: readonly string[]) =>
      started('unshare', ...(EMPTY_NAMESPACE ?? []), process.execPath, ...args);
    const { status, stderr } = offline('--input-type=module', '-e', CONNECT);
    expect([status, stderr]).toEqual([1, expect.stringMatching(/ENETUNREACH/)]);
    expect(offline(...run('offline')).status).toBe(0);
    expect(started(process.execPath, ...run('online')).status).toBe(0);
    expect(summary('offline')).toBe(summary('online'));
  });
});

describe('the packages that are installed', () => {
  it('have no scripts that run when they are', () => {
    const lock: { readonly packages: Readonly<Record<string, { readonly hasInstallScript?: boolean }>> } = JSON.parse(
      readFileSync(fileURLToPath(new URL('../../package-lock.json', import.meta.url)), 'utf8'),
    );
    const names = Object.entries(lock.packages).filter(([, one]) => one.hasInstallScript);
    expect(Object.keys(lock.packages).length).toBeGreaterThan(50);
    expect(names.map(([name]) => name)).toEqual([]);
  });
});
