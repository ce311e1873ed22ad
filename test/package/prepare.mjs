// Builds the package after `npm ci`, before it is packed, and before a start without a build (`--if-missing`).
// Without the compiler (`npm ci --omit=dev`) there is nothing to build with, and that is no fault.

import { spawnSync } from 'node:child_process';
import { existsSync, rmSync } from 'node:fs';
import { fileURLToPath } from 'node:url';

const TREE = fileURLToPath(new URL('../..', import.meta.url));
const DIST = new URL('../../dist/', import.meta.url);
const COMPILER = new URL('../../node_modules/typescript/package.json', import.meta.url);
const NPM = process.env.npm_execpath;

const isBuilt = existsSync(new URL('src/cli.js', DIST)) && existsSync(new URL('study.schema.json', DIST));
const isWanted = !(process.argv.includes('--if-missing') && isBuilt);

if (isWanted && !existsSync(COMPILER)) {
  process.stderr.write('motleybank is not built: the compiler is not installed (npm ci without --omit=dev)\n');
} else if (isWanted && NPM === undefined) {
  process.stderr.write('motleybank is not built: call this through npm (npm run prepare)\n');
  process.exitCode = 1;
} else if (isWanted) {
  // What an older build left would be packed.
  rmSync(DIST, { recursive: true, force: true });
  const { status } = spawnSync(process.execPath, [NPM, 'run', 'build'], { cwd: TREE, stdio: 'inherit' });
  process.exitCode = status ?? 1;
}
