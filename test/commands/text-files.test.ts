import { execFileSync } from 'node:child_process';
import { mkdirSync, mkdtempSync, rmSync, symlinkSync, truncateSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { readText } from '../../src/commands/text-files.js';

const folder = mkdtempSync(join(tmpdir(), 'motleybank-files-'));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

const file = (name: string, content: string | Uint8Array): string => {
  writeFileSync(join(folder, name), content);
  return join(folder, name);
};

describe('a file that is read', () => {
  it('may begin with a byte order mark, which is no part of its text', () => {
    expect(readText(file('mark.yaml', '\ufefftitle: H\u00fctte'))).toEqual({ text: 'title: H\u00fctte' });
  });

  it.each([
    ['UTF-16', Buffer.from('\ufeffa: 1', 'utf16le')],
    ['a Windows code page', Buffer.from('title: H\u00fctte', 'latin1')],
  ])('must be UTF-8, not %s', (_, bytes) => {
    expect(readText(file('other.yaml', bytes))).toEqual({ problem: 'it is no UTF-8 text' });
  });

  // \u00fc is one character when composed (NFC) and two when decomposed (NFD).
  it.each(['NFC', 'NFD'] as const)('is found whichever way its accents are spelt, here %s', (form) => {
    const written = file(`W\u00fcste-${form}.csv`.normalize(form), form);
    for (const asked of ['NFC', 'NFD']) expect(readText(written.normalize(asked))).toEqual({ text: form });
  });

  it.runIf(process.platform !== 'win32')('may stand behind symbolic links, which are followed', () => {
    const target = file('target.csv', 'x');
    symlinkSync(target, join(folder, 'link.csv'));
    mkdirSync(join(folder, 'there'));
    symlinkSync(join(folder, 'there'), join(folder, 'here'));
    file('there/a.csv', 'a');
    expect(readText(join(folder, 'link.csv'))).toEqual({ text: 'x' });
    expect(readText(join(folder, 'here', 'a.csv'))).toEqual({ text: 'a' });
  });

  it.runIf(process.platform !== 'win32')('is refused where links lead nowhere or in a circle', () => {
    symlinkSync('nothing', join(folder, 'broken'));
    symlinkSync('round', join(folder, 'round'));
    expect(readText(join(folder, 'broken'))).toEqual({ problem: 'no such file' });
    expect(readText(join(folder, 'round'))).toEqual({ problem: 'its symbolic links lead in a circle' });
  });

  it.runIf(process.platform === 'linux')('is neither a pipe nor a device, which might never end', () => {
    execFileSync('sh', ['-c', 'mkfifo pipe'], { cwd: folder });
    symlinkSync('/dev/zero', join(folder, 'zero'));
    for (const name of ['pipe', 'zero']) {
      expect(readText(join(folder, name))).toEqual({ problem: 'it is a pipe or a device' });
    }
  });

  it('is not larger than any table', () => {
    const large = file('large.csv', '');
    truncateSync(large, 81e6);
    expect(readText(large)).toEqual({ problem: 'it is larger than 80 MB' });
  });

  it('has a name that the system can have', () => {
    expect(readText(join(folder, 'x'.repeat(300)))).toEqual({ problem: 'its name is too long' });
  });
});
