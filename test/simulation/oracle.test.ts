import { readFileSync } from 'node:fs';
import { mkdtemp, readFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { parseString } from 'fast-csv';
import { describe, expect, it } from 'vitest';
import { traceCommand } from '../../src/commands/trace.js';
import { memoryShell } from '../commands/memory-shell.js';
import {
  type ComparedEvent,
  compareEvents,
  compareWaveforms,
  contractLimits,
  type Waveform,
} from '../reference/contract.js';
import { ORACLE_CASES, readOracle } from '../reference/oracle/oracle-case.js';
import { oracleStudyText } from './oracle-study.js';

type Row = Readonly<Record<string, string>>;

/** Traces an outside bank from its study file through the command line and reads what it wrote. */
async function traceOutsideBank(name: string): Promise<{ waveform: Waveform; events: ComparedEvent[] }> {
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
  const modules = await readRows(join(folder, 'modules.csv'));
  const bus = await readRows(join(folder, 'bus.csv'));
  const events = await readRows(join(folder, 'events.csv'));
  return { waveform: waveformOf(bus, modules), events: events.flatMap(moduleEvent) };
}

async function readRows(path: string): Promise<Row[]> {
  const text = await readFile(path, 'utf8');
  return new Promise((resolve, reject) => {
    const rows: Row[] = [];
    parseString<Row, Row>(text, { headers: true })
      .on('error', reject)
      .on('data', (row) => rows.push(row))
      .on('end', () => resolve(rows));
  });
}

function waveformOf(bus: readonly Row[], modules: readonly Row[]): Waveform {
  const slots = [...new Set(modules.map(({ string, position }) => `${string}.${position}`))];
  return {
    timeS: bus.map(({ time_s }) => Number(time_s)),
    busV: bus.map(({ bus_V }) => Number(bus_V)),
    modules: slots.map((slot) => {
      const own = modules.filter(({ string, position }) => `${string}.${position}` === slot);
      const numbers = (column: string, factor = 1): number[] => own.map((row) => factor * Number(row[column]));
      return {
        string: Number(own[0].string),
        position: Number(own[0].position),
        currentA: numbers('current_A'),
        terminalV: numbers('module_V'),
        cells: 4,
        lowestCharge: numbers('lowest_charge_percent', 0.01),
        highestCharge: numbers('highest_charge_percent', 0.01),
        lowestCellV: numbers('lowest_cell_V'),
        highestCellV: numbers('highest_cell_V'),
        chargeOpen: own.map((row) => row.charge_path === 'open'),
        dischargeOpen: own.map((row) => row.discharge_path === 'open'),
      };
    }),
  };
}

function moduleEvent({ event, time_s, string, position }: Row): ComparedEvent[] {
  if (string === '') return [];
  return [
    {
      kind: event as ComparedEvent['kind'],
      timeS: Number(time_s),
      string: Number(string),
      position: Number(position),
    },
  ];
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
