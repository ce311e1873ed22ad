import { randomUUID } from 'node:crypto';
import { existsSync } from 'node:fs';
import { readdir, readFile, readlink, rm } from 'node:fs/promises';
import { hostname } from 'node:os';
import { join } from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { writeDurably } from './durable-file.js';
import { FolderRefused } from './folder-refused.js';
import { errorCode } from './system-error.js';

const LOOKS = 6;
const PAUSE_MS = 30;

/** Who holds a folder. */
interface Holder {
  readonly pid: number;
  readonly host: string;
  /** Since when the machine is up; process numbers begin anew then. Null where the system gives none. */
  readonly boot: string | null;
  /** Where the process number is known: containers of one machine count theirs apart. Null as above. */
  readonly numbering: string | null;
  /** Mark of the process's start, because numbers of processes are used again; null where the system gives none. */
  readonly started: string | null;
}

/** Whether a file of a run folder is a lock. */
export function isLockFile(name: string): boolean {
  return /^run\.[0-9a-f-]{36}\.lock$/.test(name);
}

/** A folder that is held by this process. */
export interface FolderLock {
  /** Whether the folder is still there, under its name: it may be removed or moved away while it is held. */
  readonly isHeld: () => boolean;
  readonly release: () => Promise<void>;
}

/**
 * Takes a folder for this process until it is released. Locks of processes that have ended are removed.
 *
 * Every run puts down a lock of its own name first and looks for others afterwards, so of two runs at least one sees
 * the other, and no name is ever used twice, so nobody removes a lock that has just been taken. Of several that come
 * at once the first by name waits for the others to withdraw.
 *
 * @throws FolderRefused if another run holds the folder
 */
export async function takeLock(folder: string): Promise<FolderLock> {
  const mine = `run.${randomUUID()}.lock`;
  const path = join(folder, mine);
  // Where a lock cannot be removed it is one of a process that has ended, and keeps nobody out.
  const release = () => rm(path, { force: true }).catch(() => undefined);
  try {
    await writeDurably(path, JSON.stringify(await holderOf(process.pid)));
    for (let look = 1; ; look++) {
      const others = await liveLocks(folder, mine);
      const [other] = others;
      if (other === undefined) return { isHeld: () => existsSync(path), release };
      if (look === LOOKS || others.some(({ name }) => name < mine)) {
        const { pid, host } = other.holder;
        throw new FolderRefused(
          `${folder} is held by a run that goes on (process ${pid} on ${host}); if it does not, remove ${join(folder, other.name)}`,
        );
      }
      await pause(PAUSE_MS);
    }
  } catch (error) {
    await release();
    throw error;
  }
}

interface Lock {
  readonly name: string;
  readonly holder: Holder;
}

/** Locks of others that are still held; dead ones are removed on the way. */
async function liveLocks(folder: string, mine: string): Promise<Lock[]> {
  const live: Lock[] = [];
  for (const name of (await readdir(folder)).filter((name) => isLockFile(name) && name !== mine)) {
    const path = join(folder, name);
    const holder = await readHolder(path);
    if (holder !== undefined && (await isLive(holder))) live.push({ name, holder });
    else await rm(path, { force: true });
  }
  return live;
}

/** @returns undefined if the lock is gone or was spoilt when its machine stopped: locks appear whole or not at all */
async function readHolder(path: string): Promise<Holder | undefined> {
  try {
    const value: Partial<Holder> | null = JSON.parse(await readFile(path, 'utf8'));
    if (typeof value?.pid !== 'number' || typeof value.host !== 'string') return undefined;
    const { pid, host, boot = null, numbering = null, started = null } = value;
    return { pid, host, boot, numbering, started };
  } catch (error) {
    if (error instanceof SyntaxError || errorCode(error) === 'ENOENT') return undefined;
    throw error;
  }
}

/** A process on another machine or in another container cannot be asked and counts as live. */
async function isLive(holder: Holder): Promise<boolean> {
  if (holder.host !== hostname()) return true;
  const now = await holderOf(holder.pid);
  if (holder.boot !== now.boot) return false;
  if (holder.numbering !== now.numbering) return true;
  return isProcess(holder.pid) && holder.started === now.started;
}

function isProcess(pid: number): boolean {
  try {
    // Signal 0 asks without sending.
    process.kill(pid, 0);
    return true;
  } catch (error) {
    return errorCode(error) === 'EPERM';
  }
}

async function holderOf(pid: number): Promise<Holder> {
  // Linux: field 22 of the process's stat file, counted after the name in brackets, which may hold blanks.
  const stat = await readFile(`/proc/${pid}/stat`, 'utf8').catch(() => '');
  const started = stat.slice(stat.lastIndexOf(')') + 2).split(' ')[19] ?? null;
  const boot = await readFile('/proc/sys/kernel/random/boot_id', 'utf8').catch(() => null);
  const numbering = await readlink('/proc/self/ns/pid').catch(() => null);
  return { pid, host: hostname(), boot: boot?.trim() ?? null, numbering, started };
}

/** Who holds a folder, or held it when their process ended; nothing is touched. */
export async function lookForHolders(
  folder: string,
): Promise<readonly { readonly pid: number; readonly host: string; readonly live: boolean }[]> {
  const locks = (await readdir(folder)).filter(isLockFile);
  const holders = await Promise.all(locks.map((name) => readHolder(join(folder, name))));
  const known = holders.filter((holder) => holder !== undefined);
  return Promise.all(known.map(async (holder) => ({ ...holder, live: await isLive(holder) })));
}
