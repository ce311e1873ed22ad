import { pathToFileURL } from 'node:url';
import { fakeRun } from './fake-run.js';
import { FAKE_STUDY } from './fake-study.js';

/** A run in a process of its own, to be ended from outside: folder, compiled thread entry, milliseconds per instance. */
const [path = '', worker = '', slowMs = ''] = process.argv.slice(2);
await fakeRun(path, { ...FAKE_STUDY, title: `slow ${slowMs}` }, { workerFile: pathToFileURL(worker), threads: 2 });
