import { spawnSync } from 'node:child_process';
import { mkdirSync, mkdtempSync, readFileSync, renameSync, rmSync, symlinkSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';

export const TREE = fileURLToPath(new URL('../..', import.meta.url));

interface Manifest {
  readonly version: string;
  readonly dependencies: Readonly<Record<string, string>>;
  readonly devDependencies: Readonly<Record<string, string>>;
  readonly scripts: Readonly<Record<string, string>>;
}

export const MANIFEST: Manifest = JSON.parse(readFileSync(join(TREE, 'package.json'), 'utf8'));

interface Packed {
  readonly filename: string;
  readonly files: readonly { readonly path: string }[];
}

/** Packs what has been built. @throws Error with npm's words if it does not */
export function pack(args: readonly string[]): Packed {
  const { npm_execpath: npm } = process.env;
  const [command, ...first] = npm === undefined ? ['npm'] : [process.execPath, npm];
  // On Windows npm is a batch file, which only a shell can start; under `npm test` its path is known.
  const shell = npm === undefined && process.platform === 'win32';
  const all = [...first, 'pack', '--ignore-scripts', '--json', ...args];
  const { status, stdout, stderr } = spawnSync(command, all, { cwd: TREE, encoding: 'utf8', shell });
  if (status !== 0) throw new Error(`npm pack failed: ${stderr}`);
  const [packed]: Packed[] = JSON.parse(stdout);
  return packed;
}

/** The packed package where a user would have it, in a folder whose name has spaces. */
export class InstalledPackage {
  readonly #home = mkdtempSync(join(tmpdir(), 'motleybank-packed-'));
  /** The user's folder. */
  readonly folder = join(this.#home, 'Bank of the boat');

  constructor() {
    const modules = join(this.folder, 'node_modules');
    mkdirSync(modules, { recursive: true });
    writeFileSync(join(this.folder, 'package.json'), '{ "private": true }');
    const { filename } = pack(['--pack-destination', this.#home]);
    const { status } = spawnSync('tar', ['-xzf', join(this.#home, filename), '-C', modules]);
    if (status !== 0) throw new Error('tar failed');
    renameSync(join(modules, 'package'), join(modules, 'motleybank'));
    // Only what the manifest names is there to be imported.
    for (const name of Object.keys(MANIFEST.dependencies)) {
      symlinkSync(join(TREE, 'node_modules', name), join(modules, name), 'junction');
    }
  }

  /** Runs a JavaScript file of the user's folder. */
  run(file: string, args: readonly string[] = []) {
    const { status, stdout, stderr } = spawnSync(process.execPath, [file, ...args], {
      cwd: this.folder,
      encoding: 'utf8',
    });
    return { status, out: stdout, err: stderr };
  }

  /** Runs the command. */
  motleybank(...args: readonly string[]) {
    return this.run(join('node_modules', 'motleybank', 'dist', 'src', 'cli.js'), args);
  }

  remove(): void {
    rmSync(this.#home, { recursive: true, force: true });
  }
}
