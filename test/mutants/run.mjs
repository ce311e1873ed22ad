/**
 * Breaks one law at a time in a copy of the sources and runs the tests that should notice: `npm run mutants [PART OF NAME]`.
 *
 * Prints a line for each of `mutants.json` with the test that failed; exits with 1 if any error went unnoticed or the
 * tests fail without one.
 */
import { spawnSync } from 'node:child_process';
import { cpSync, mkdtempSync, readFileSync, rmSync, symlinkSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';

const root = fileURLToPath(new URL('../..', import.meta.url));
const wanted = process.argv[2] ?? '';
const mutants = JSON.parse(readFileSync(new URL('mutants.json', import.meta.url), 'utf8')).filter(({ name }) =>
  name.includes(wanted),
);
const scratch = mkdtempSync(join(tmpdir(), 'motleybank-mutants-'));

/** @returns title of the first test that fails; null if all pass */
function firstFailure(files) {
  const vitest = join(root, 'node_modules/vitest/vitest.mjs');
  const options = ['run', '--config', 'test/vitest.config.ts', '--bail', '1', '--reporter', 'json'];
  const { stdout } = spawnSync(process.execPath, [vitest, ...options, ...files], { cwd: scratch, encoding: 'utf8' });
  const report = JSON.parse(stdout.slice(stdout.indexOf('{')));
  if (report.numTotalTests === 0) throw new Error(`no tests in ${files.join(', ')}`);
  const tests = report.testResults.flatMap(({ assertionResults }) => assertionResults);
  const failed = tests.find(({ status }) => status === 'failed');
  if (failed === undefined && !report.success) throw new Error(`${files.join(', ')} did not run`);
  return failed?.fullName ?? null;
}

let unnoticed = 0;
try {
  for (const part of ['src', 'workers', 'test', 'studies', 'package.json', 'tsconfig.json', 'README.md']) {
    cpSync(join(root, part), join(scratch, part), { recursive: true });
  }
  symlinkSync(join(root, 'node_modules'), join(scratch, 'node_modules'), 'junction');
  const sound = firstFailure([...new Set(mutants.flatMap(({ tests }) => tests))]);
  if (sound !== null) throw new Error(`fails without any error put in: ${sound}`);
  for (const { name, file, find, replace, tests } of mutants) {
    const path = join(scratch, file);
    const right = readFileSync(path, 'utf8');
    writeFileSync(
      path,
      right.replace(find, () => replace),
    );
    const noticed = firstFailure(tests);
    writeFileSync(path, right);
    if (noticed === null) unnoticed++;
    process.stdout.write(`${noticed === null ? 'UNNOTICED' : 'noticed'}  ${name} (${file}): ${noticed ?? '-'}\n`);
  }
  process.stdout.write(`${mutants.length - unnoticed} of ${mutants.length} errors noticed\n`);
} finally {
  rmSync(scratch, { recursive: true, force: true });
}
process.exitCode = unnoticed === 0 ? 0 : 1;
