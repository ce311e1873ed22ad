// Asks the registry for known weaknesses of the packages in the lock file: `npm run audit`. Apart from the tests, since
// the answer depends on the day and the network.
//
// Exit status: 0 none known; 1 some known, which are listed; 2 the registry gave no answer.

import { spawnSync } from 'node:child_process';
import process from 'node:process';

const { npm_execpath: npm } = process.env;
const [command, ...first] = npm === undefined ? ['npm'] : [process.execPath, npm];
const { stdout, stderr } = spawnSync(command, [...first, 'audit', '--json'], {
  encoding: 'utf8',
  shell: npm === undefined && process.platform === 'win32',
});

function report() {
  try {
    return JSON.parse(stdout);
  } catch {
    return {};
  }
}

const { vulnerabilities, metadata, message, error } = report();
if (vulnerabilities === undefined) {
  const reason = error?.summary || message || stderr.trim().split('\n')[0] || 'no answer';
  process.stderr.write(`the registry could not be asked: ${reason}\n`);
  process.exitCode = 2;
} else {
  for (const { name, severity, range, via } of Object.values(vulnerabilities)) {
    const titles = via.map((one) => (typeof one === 'string' ? `by ${one}` : `${one.title} (${one.url})`));
    process.stdout.write(`${severity}: ${name} ${range}: ${titles.join('; ')}\n`);
  }
  const { vulnerabilities: counts, dependencies } = metadata;
  process.stdout.write(`${counts.total} known weaknesses in ${dependencies.total} packages\n`);
  process.exitCode = counts.total === 0 ? 0 : 1;
}
