import { mkdtempSync, readFileSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { type TraceOptions, traceCommand } from '../../src/commands/trace.js';
import { sha256 } from '../../src/execution/checksum.js';
import { journalLine } from '../../src/execution/journal.js';
import { studyOf } from '../study/study-under-test.js';
import { memoryShell } from './memory-shell.js';

const STUDY = `motleybank: 1
title: A pair for a test (invented)
seed: 5
instances: 4
cycles: 6
stock:
  pair: {grade: mixed-purchase, modules: [A, B], rated_Ah: 100}
duty:
  phases: [{discharge_W: 300, for_h: 4}, {rest_h: 0.5}, {charge: to-full, at_most_h: 6}]
candidates:
  pair: {wiring: strings, modules: [[A, B]]}
`;

const RESOLVED = JSON.stringify(studyOf(STUDY));
const FILES = {
  'pair.yaml': STUDY,
  'run/study.resolved.json': RESOLVED,
  'run/journal.jsonl': journalLine({ study: sha256(RESOLVED) }),
  'broken/study.resolved.json': '{',
};

async function trace(
  more: Partial<TraceOptions>,
  files: Readonly<Record<string, string>> = {},
): Promise<{ status: number; out: string; err: string; folder: string }> {
  const shell = memoryShell({ ...FILES, ...files });
  const folder = mkdtempSync(join(tmpdir(), 'motleybank-trace-'));
  const options: TraceOptions = {
    source: 'pair.yaml',
    candidate: 'pair',
    instance: 2,
    out: folder,
    version: '1.2.3',
    ...more,
  };
  const status = await traceCommand(options, shell);
  return { status, out: shell.printed.out, err: shell.printed.err, folder };
}

const rowsOf = (folder: string, name: string): string[] =>
  readFileSync(join(folder, name), 'utf8').trimEnd().split('\r\n');

describe('trace', () => {
  it('writes the last two cycles by the minute, and says what happened', async () => {
    const { status, out, folder } = await trace({});
    expect(status).toBe(0);
    expect(out).toMatch(/^pair, sampled bank 2, cycles 5 to 6\n/);
    const bus = rowsOf(folder, 'bus.csv');
    expect(bus[0]).toBe('cycle,time_s,bus_V,bank_A,demand_W,served_W');
    const times = bus.slice(1).map((row) => Number(row.split(',')[1]));
    expect(times[1] - times[0]).toBeCloseTo(60, 6);
    expect(new Set(bus.slice(1).map((row) => row.split(',')[0]))).toEqual(new Set(['5', '6']));
    expect(rowsOf(folder, 'modules.csv')).toHaveLength(2 * (bus.length - 1) + 1);
    // Two modules of four cells, each with the values of its module beside it.
    expect(rowsOf(folder, 'drawn.csv')).toHaveLength(9);
  });

  it('shows temperatures and equaliser currents where there are any', async () => {
    const [plain] = rowsOf((await trace({ everyS: 3600 })).folder, 'modules.csv');
    expect(plain).toMatch(/,bleeding_cells$/);
    const study = STUDY.replace(
      'rated_Ah: 100',
      `rated_Ah: 100,
    ageing: {law: naumann, rate: {nominal: 1, module_sd: 0.1}},
    bms: {charge_refusal: {below_degC: {nominal: -2, module_sd: 0.5}}}`,
    )
      .replace('{discharge_W: 300, for_h: 4}', '{discharge_W: 300, for_h: 4, ambient_degC: 12}')
      .replace(
        '[[A, B]]',
        '[[A, B]], slot_temperature_offset_K: [0, 2.5], equaliser: {enable_V: null, start_mV: 0.01}',
      );
    const { status, folder } = await trace({ source: 'warm.yaml', everyS: 1800 }, { 'warm.yaml': study });
    expect(status).toBe(0);
    const [head, ...rows] = rowsOf(folder, 'modules.csv').map((row) => row.split(','));
    const column = (name: string): string[] => rows.map((row) => row[head.indexOf(name)] ?? '');
    expect(head.slice(-2)).toEqual(['module_degC', 'equaliser_A']);
    const [position, degC, amps, volts] = ['position', 'module_degC', 'equaliser_A', 'module_V'].map(column);
    // By hand: 12 degC on discharge and 25 otherwise, the second slot warmer by 2.5 K.
    expect(new Set(degC.filter((_, row) => position[row] === '1'))).toEqual(new Set(['12', '25']));
    expect(new Set(degC.filter((_, row) => position[row] === '2'))).toEqual(new Set(['14.5', '27.5']));
    // By hand from the law: 5 A over the 99.99 mV from start to full, taken from the module of higher voltage, while no
    // path of either is open; none is above the last position. Two voltages of 7 digits are off by up to 1e-5 V.
    const isClosed = (row: number): boolean =>
      ['charge_path', 'discharge_path'].every((path) => rows[row][head.indexOf(path)] === 'closed');
    rows.forEach((_, row) => {
      if (position[row] === '2') expect(amps[row]).toBe('');
      else {
        const above = Number(volts[row + 1]) - Number(volts[row]);
        const share = Math.min(1, Math.max(0, Math.abs(above) - 1e-5) / (0.1 - 1e-5));
        const works = isClosed(row) && isClosed(row + 1) ? 1 : 0;
        const lawA = works * Math.sign(above) * 5 * share;
        expect(Math.abs(Number(amps[row]) - lawA)).toBeLessThan(1e-5 * (5 / 0.09999) + 1e-6);
      }
    });
    expect(amps.filter((value) => Math.abs(Number(value)) > 0.01).length).toBeGreaterThan(5);
    const [names, first] = rowsOf(folder, 'drawn.csv').map((row) => row.split(','));
    const drawn = (name: string): number => Number(first[names.indexOf(name)]);
    expect(drawn('warmer_than_ambient_K')).toBe(0);
    expect(Math.abs(drawn('charge_refusal_below_degC') + 2)).toBeLessThan(2.5);
    expect(drawn('charge_refusal_release_degC')).toBe(5);
    expect(drawn('ageing_rate')).not.toBe(1);
    expect(Math.abs(drawn('ageing_rate') - 1)).toBeLessThan(0.5);
  });

  it('shows the same from the folder of a run as from its study', async () => {
    const fromStudy = await trace({ everyS: 600 });
    const fromRun = await trace({ source: 'run', everyS: 600 });
    for (const name of ['drawn.csv', 'modules.csv', 'bus.csv', 'events.csv']) {
      expect(rowsOf(fromRun.folder, name)).toEqual(rowsOf(fromStudy.folder, name));
    }
  });

  it('shows the same cycle whatever the window and the interval are', async () => {
    const narrow = await trace({ fromCycle: 3, toCycle: 3, everyS: 900 });
    const wide = await trace({ fromCycle: 1, toCycle: 6, everyS: 60 });
    const eventsOfThird = (folder: string): string[] =>
      rowsOf(folder, 'events.csv').filter((row) => row.startsWith('3,'));
    expect(eventsOfThird(wide.folder)).toEqual(eventsOfThird(narrow.folder));
    expect(eventsOfThird(wide.folder).length).toBeGreaterThan(0);
  });

  it.each([
    [{ candidate: 'pai' }, '--candidate must be one of pair, got pai (did you mean pair?)'],
    [{ toCycle: 7 }, '--to-cycle must be at most 6, got 7'],
    [{ fromCycle: 4, toCycle: 3 }, '--from-cycle must be at most --to-cycle (3), got 4'],
    [{ fromCycle: 1, toCycle: 6, everyS: 0.01 }, '--every must be longer or the window shorter'],
    [{ source: 'nowhere.yaml' }, 'nowhere.yaml cannot be read'],
    [{ source: 'broken' }, 'must be as the run left it, by its checksum in journal.jsonl'],
  ])('refuses %j', async (more, message) => {
    const { status, out, err } = await trace(more);
    expect(status).toBe(2);
    expect(out).toBe('');
    expect(err).toContain(message);
  });

  it('says in one line that a folder cannot be written', async () => {
    const file = join(mkdtempSync(join(tmpdir(), 'motleybank-trace-')), 'file');
    writeFileSync(file, '');
    const { status, err } = await trace({ out: join(file, 'below') });
    expect(status).toBe(2);
    expect(err).toMatch(/cannot be written: /);
  });
});
