import type { BmsSettings, ChargerSettings, DutySegment, ModuleParameters } from '../../src/study/study.js';
import { type BankSketch, bankOf } from '../reference/bank-of.js';
import { bareModule, noLeads, straightTable } from '../reference/bare-module.js';
import type { ReferenceBank } from '../reference/reference-bank.js';

/** 18 A up to a voltage that is not reached, without end. */
export const BENCH: ChargerSettings = {
  limitA: 18,
  absorptionV: 4.5,
  tailA: 0,
  tailHoldS: 60,
  absorptionS: null,
  floatV: null,
  restart: 'each-cycle',
  restartV: 0,
};

/**
 * One cell that can be followed by hand: U = 3 + z, 100 Ah, half full, 1 mOhm and 9 mOhm of path. At 18 A the open-circuit
 * voltage moves by 0.05 mV/s, the cell stands 18 mV off it and the terminal 180 mV.
 */
export function oneCell(
  cycles: readonly (readonly DutySegment[])[],
  sketch: Partial<ModuleParameters> = {},
  bms: Partial<BmsSettings> = {},
  bank: Partial<BankSketch> = {},
): ReferenceBank {
  const module = bareModule('m', { resistanceOhm: [0.001], pathResistanceOhm: 0.009, ...sketch }, bms);
  return bankOf('one', {
    modules: [[module]],
    cycles,
    ocvTables: [straightTable(3, 1)],
    leads: noLeads(1),
    charger: BENCH,
    ...bank,
  });
}

/** A segment of so many seconds: at rest, or under load or charge. */
export function seconds(durationS: number, sketch: Partial<DutySegment> = {}): DutySegment {
  return { durationS, loadW: 0, loadA: 0, chargeW: 0, endsWhenCharged: false, ...sketch };
}

export const CHARGE = { chargeW: null } as const;
export const DISCHARGE = { loadA: 18 } as const;
