import { readFileSync } from 'node:fs';
import { mkdtemp } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { traceCommand } from '../../src/commands/trace.js';
import { memoryShell } from '../commands/memory-shell.js';
import { compareEvents, compareWaveforms, contractLimits } from '../reference/contract.js';
import { ORACLE_CASES, readOracle } from '../reference/oracle/oracle-case.js';
import { type ReadTrace, readTrace } from '../reference/read-trace.js';
import { oracleStudyText } from './oracle-study.js';

/** Traces an outside bank from its study file through the command line and reads what it wrote. */
async function traceOutsideBank(name: string): Promise<ReadTrace> {
  const parameters = JSON.parse(
    readFileSync(new URL(`../reference/oracle/${name}/params.json`, import.meta.url), 'utf8'),
  );
  const folder = await mkdtemp(join(tmpdir(), 'motleybank-oracle-'));
  const shell = memoryShell({ 'outside.yaml': oracleStudyText(parameters) });
  const status = await traceCommand(
    { source: 'outside.yaml', candidate: 'bank', instance: 1, everyS: 60, out: folder, version: '' },
    shell,
  );
  expect(shell.printed.err).toContain('written to');
  expect(status).toBe(0);
  return readTrace(folder);
}

// Outside values: circuit-simulator and Runge-Kutta runs of four banks, see test/reference/oracle/README.md.
describe('traces of banks that a circuit simulator has run', () => {
  it.each(ORACLE_CASES)('bank %s keeps the contract from its study file to its CSV files', async (name) => {
    const oracle = readOracle(name);
    const trace = await traceOutsideBank(name);
    const limits = contractLimits(oracle.largestBankA);
    // The outside run records 0 s to its end; what a trace records is the same grid.
    const waveforms = compareWaveforms(trace.waveform, oracle.waveform, limits, oracle.events, oracle.phaseStartS);
    const events = compareEvents(trace.events, oracle.events, oracle.phaseStartS);
    expect(waveforms.faults).toEqual([]);
    expect(events.faults).toEqual([]);
    expect(waveforms.comparedSamples).toBeGreaterThan(0.98 * oracle.waveform.timeS.length);
  });
});
