import { readFile } from 'node:fs/promises';
import { join } from 'node:path';
import { parseString } from 'fast-csv';
import type { ComparedEvent, Waveform } from './contract.js';

/** What `trace` wrote of one bank. */
export interface ReadTrace {
  readonly waveform: Waveform;
  /** Of modules, not of the bank. */
  readonly events: readonly ComparedEvent[];
  /** Largest net current of the bank, either way. */
  readonly largestBankA: number;
}

type Row = Readonly<Record<string, string>>;

/** Reads the files of a trace. */
export async function readTrace(folder: string): Promise<ReadTrace> {
  const rows = (file: string): Promise<Row[]> => readRows(join(folder, file));
  const [bus, modules, drawn, events] = await Promise.all(
    ['bus.csv', 'modules.csv', 'drawn.csv', 'events.csv'].map(rows),
  );
  return {
    waveform: waveformOf(bus, modules, drawn),
    events: events.flatMap(moduleEvent),
    largestBankA: Math.max(...bus.map(({ bank_A }) => Math.abs(Number(bank_A)))),
  };
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

function waveformOf(bus: readonly Row[], modules: readonly Row[], drawn: readonly Row[]): Waveform {
  const slotOf = ({ string, position }: Row): string => `${string}.${position}`;
  const slots = [...new Set(modules.map(slotOf))];
  return {
    timeS: bus.map(({ time_s }) => Number(time_s)),
    busV: bus.map(({ bus_V }) => Number(bus_V)),
    modules: slots.map((slot) => {
      const own = modules.filter((row) => slotOf(row) === slot);
      const numbers = (column: string, factor = 1): number[] => own.map((row) => factor * Number(row[column]));
      return {
        string: Number(own[0].string),
        position: Number(own[0].position),
        currentA: numbers('current_A'),
        terminalV: numbers('module_V'),
        cells: drawn.filter((row) => slotOf(row) === slot).length,
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
