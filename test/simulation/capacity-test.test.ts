import { describe, expect, it } from 'vitest';
import { copyBankState } from '../../src/bank/bank-state.js';
import { cellsInSeries, testCapacity } from '../../src/simulation/capacity-test.js';
import type { BmsSettings, ModuleParameters } from '../../src/study/study.js';
import { bareModule, noLeads } from '../reference/bare-module.js';
import { PLAIN_BMS } from '../reference/plain-module.js';
import { journeyOf } from './journey-of.js';
import { BENCH, oneCell } from './one-cell.js';

const LIMITS = { underVoltageV: 3, underVoltageReleaseV: 9 };
/** Up to 4.0 V, that is z = 1 at rest; ends 60 s after the current has fallen to 1 A. */
const charger = { ...BENCH, absorptionV: 4, tailA: 1 };

function tested(sketch: Partial<ModuleParameters> = {}, bms: Partial<BmsSettings> = {}) {
  const bank = oneCell([], { ...LIMITS, ...sketch }, bms, { charger });
  const { kernel } = journeyOf(bank);
  return { ...kernel, candidate: bank.candidate };
}

describe('the capacity test', () => {
  // By hand, 10 mOhm: charge ends at 4 - 0.01 x 1 exp(-60 / 3600) V, z = 0.990165. 20 A bring the cell to 3 V at
  // z = 0.02, and go on for 2 s of delay: 0.0111 Ah. Mean voltage 3 + z - 0.2.
  const FULL = 1 - 0.01 * Math.exp(-1 / 60);
  const usableAh = 100 * (FULL - 0.02) + 40 / 3600;

  it('finds what a single cell holds between its charger and its BMS', () => {
    const { bank, state, candidate } = tested();
    const found = testCapacity(bank, state, candidate, 1000);
    expect(found.usableAh).toBeCloseTo(usableAh, 2);
    expect(found.toFirstStringAh).toBeCloseTo(found.usableAh, 9);
    expect(found.idealAh).toBeCloseTo(100, 12);
    expect(found.usableWh / usableAh).toBeCloseTo(3 + (FULL + 0.02) / 2 - 0.2, 3);
  });

  it('leaves the bank as it was', () => {
    const { bank, state, candidate } = tested();
    const before = copyBankState(bank, state);
    testCapacity(bank, state, candidate, 0);
    expect(state).toEqual(before);
  });

  it('keeps latches: what is locked until a visit gives nothing', () => {
    const { bank, state, candidate } = tested({}, { overCurrent: { ...PLAIN_BMS.overCurrent, lock: 'manual' } });
    state.overCurrentDischarge[0] = state.lockedDischarge[0] = 1;
    expect(testCapacity(bank, state, candidate, 0).usableAh).toBeCloseTo(0, 6);
  });

  it('asks for no low-voltage disconnect', () => {
    const { bank, state, candidate } = tested();
    const load = { disconnectV: 3.7, disconnectDelayS: 0, reconnectV: 9 };
    expect(testCapacity(bank, state, { ...candidate, load }, 0).usableAh).toBeCloseTo(usableAh, 2);
  });

  it('goes on after the first string is lost, and says when that was', () => {
    // Strings of 100 and 50 Ah share 40 A (both are rated 100 Ah); within some percent both are empty together.
    const modules = [100, 50].map((capacityAh, k) => [bareModule(`m${k}`, { ...LIMITS, capacityAh: [capacityAh] })]);
    const reference = oneCell([], {}, {}, { modules, leads: noLeads(2), charger });
    const candidate = { ...reference.candidate, strings: [['m0'], ['m1']] };
    const { bank, state } = journeyOf({ ...reference, candidate }).kernel;
    const { usableAh: usable, toFirstStringAh, idealAh } = testCapacity(bank, state, candidate, 0);
    expect(idealAh).toBeCloseTo(150, 12);
    expect(toFirstStringAh).toBeLessThanOrEqual(usable);
    expect(usable).toBeGreaterThan(140);
    expect(usable).toBeLessThan(150);
  });
});

describe('cellsInSeries', () => {
  it('counts from bus minus to bus plus', () => {
    const modules = [['a', 'b'].map((id) => bareModule(id))];
    const bank = oneCell([], {}, {}, { modules });
    expect(
      cellsInSeries(journeyOf({ ...bank, candidate: { ...bank.candidate, strings: [['a', 'b']] } }).kernel.bank),
    ).toBe(2);
  });
});
