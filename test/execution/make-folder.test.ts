import { existsSync, mkdirSync, statSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { makeFolder } from '../../src/execution/make-folder.js';
import { Scratch } from './fake-run.js';

const scratch = new Scratch();
afterAll(() => scratch.remove());

describe('a folder', () => {
  it('is made with those above it, and left as it is where it is there', () => {
    const path = join(scratch.next(), 'a', 'b', 'c');
    makeFolder(path);
    writeFileSync(join(path, 'kept'), 'x');
    makeFolder(path);
    expect(existsSync(join(path, 'kept'))).toBe(true);
  });

  it('may be relative, the working folder, or the root', () => {
    for (const path of ['.', '/']) expect(() => makeFolder(path)).not.toThrow();
  });

  it('is not made in place of a file or below one', () => {
    const path = scratch.next();
    mkdirSync(path);
    const file = join(path, 'file');
    writeFileSync(file, 'mine');
    expect(() => makeFolder(file)).toThrow(expect.objectContaining({ code: 'EEXIST' }));
    expect(() => makeFolder(join(file, 'x'))).toThrow(expect.objectContaining({ code: 'ENOTDIR' }));
    expect(() => makeFolder(join(file, 'x', 'y', 'z'))).toThrow(expect.objectContaining({ code: 'ENOTDIR' }));
    expect(statSync(file).isFile()).toBe(true);
  });

  it.runIf(process.platform === 'linux')('is refused, not tried for ever, where the system makes none', () => {
    for (const path of ['/proc/x', '/proc/x/y/z']) {
      expect(() => makeFolder(path)).toThrow(expect.objectContaining({ code: 'ENOENT', syscall: 'mkdir' }));
    }
  });
});
