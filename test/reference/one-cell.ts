import type { BmsSettings, ChargerSettings, DutySegment, ModuleParameters } from '../../src/study/study.js';
import { type BankSketch, bankOf } from './bank-of.js';
import { bareModule, noLeads, straightTable } from './bare-module.js';
import { segmentOf } from './duties.js';
import { simulateSlowBank } from './slow-bank.js';
import type { SlowRun } from './slow-run.js';

/**
 * One cell whose voltage is worked out by hand: U = 3 + z, 1 mOhm, 100 Ah, 10 mOhm of path, half full. At 36 A the
 * open-circuit voltage moves by 0.1 mV/s, the cell stands 36 mV and the terminal 396 mV off it.
 */
export function runOne(
  cycles: DutySegment[][],
  sketch: Partial<ModuleParameters>,
  bms: Partial<BmsSettings> = {},
  bank: Partial<BankSketch> = {},
  sampleTimesS: number[] = [],
): SlowRun {
  const module = bareModule('m', { resistanceOhm: [0.001], ...sketch }, bms);
  return simulateSlowBank(
    bankOf('one', {
      modules: [[module]],
      cycles,
      ocvTables: [straightTable(3, 1)],
      leads: noLeads(1),
      charger: CHARGER,
      ...bank,
    }),
    { stepS: 5, nodeLeakS: 0, sampleTimesS },
  );
}

/** 36 A up to 4.2 V without end. */
export const CHARGER: ChargerSettings = {
  limitA: 36,
  absorptionV: 4.2,
  tailA: 0,
  tailHoldS: 120,
  absorptionS: null,
  floatV: null,
  restart: 'each-cycle',
  restartV: 0,
};
/** A segment of some minutes. */
export const minutes = (length: number, sketch: Partial<DutySegment> = {}): DutySegment =>
  segmentOf(length / 60, sketch);
/** Times and kinds of a run's events. */
export const story = (run: SlowRun): string[] => run.events.map(({ timeS, kind }) => `${timeS.toFixed(2)} ${kind}`);
