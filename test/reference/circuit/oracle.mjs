// `npm run oracle`: the suite is TypeScript, which this version of Node does not load by itself.

import { fileURLToPath } from 'node:url';
import { runnerImport } from 'vite';

const { module } = await runnerImport(fileURLToPath(new URL('oracle-command.ts', import.meta.url)), {
  configFile: false,
  logLevel: 'error',
});
process.exitCode = await module.oracleCommand(process.argv.slice(2));
