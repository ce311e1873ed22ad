import { describe, expect, it } from 'vitest';
import { type Bank, buildBank } from '../../src/bank/bank.js';
import { BOTH_WAYS, CHARGE_ONLY, createBankState, DISCHARGE_ONLY, NO_WAY } from '../../src/bank/bank-state.js';
import { compileOcvCurves } from '../../src/bank/ocv-curves.js';
import { chargePathOpen, dischargePathOpen, moduleMode, updateChainModes } from '../../src/bank/paths.js';
import {
  actOnProtection,
  actOnTime,
  nextTimeS,
  OVER_CURRENT_CHARGE,
  OVER_CURRENT_DISCHARGE,
  OVER_VOLTAGE,
  PROTECTION_KINDS,
  protectionDelayS,
  protectionValuesInto,
  RECLOSE,
  UNDER_VOLTAGE,
  UNLOCK,
  updateSleep,
} from '../../src/bank/protection.js';
import type { BmsSettings, ModuleParameters } from '../../src/study/study.js';
import { bankOf } from '../reference/bank-of.js';
import { bareModule, straightTable } from '../reference/bare-module.js';
import { PLAIN_BMS } from '../reference/plain-module.js';

const THRESHOLDS: Partial<ModuleParameters> = {
  overVoltageV: 3.65,
  overVoltageReleaseV: 3.45,
  underVoltageV: 2.5,
  underVoltageReleaseV: 2.9,
  overCurrentChargeA: 50,
  overCurrentDischargeA: 100,
};

/** A string of modules with one BMS setting each. */
function stringOf(...settings: Partial<BmsSettings>[]): Bank {
  const modules = settings.map((bms, p) => bareModule(`m${p}`, THRESHOLDS, bms));
  const { candidate } = bankOf('string', { modules: [modules], cycles: [] });
  const named = new Map(modules.map((module) => [module.id, module]));
  return buildBank(candidate, named, compileOcvCurves([straightTable(3, 1)]));
}

/** Values of the conditions of the first module at its cell extremes and current. */
function values(bank: Bank, state: ReturnType<typeof createBankState>, lowV: number, highV: number, currentA: number) {
  const of = (value: number): Float64Array => new Float64Array(bank.modules).fill(value);
  const value = new Float64Array(PROTECTION_KINDS * bank.modules);
  protectionValuesInto(bank, state, of(highV), of(lowV), new Float64Array(1).fill(currentA), value);
  return (kind: number): number => value[kind * bank.modules];
}

describe('the conditions of a BMS', () => {
  it('watch the largest cell against its threshold, then against its release', () => {
    const bank = stringOf({});
    const state = createBankState(bank);
    expect(values(bank, state, 3, 3.7, 0)(OVER_VOLTAGE)).toBeCloseTo(0.05, 12);
    expect(values(bank, state, 3, 3.6, 0)(OVER_VOLTAGE)).toBeCloseTo(-0.05, 12);
    state.overVoltage[0] = 1;
    expect(values(bank, state, 3, 3.4, 0)(OVER_VOLTAGE)).toBeCloseTo(0.05, 12);
    expect(values(bank, state, 3, 3.6, 0)(OVER_VOLTAGE)).toBeCloseTo(-0.15, 12);
  });

  it('watch the smallest cell against its threshold, then against its release', () => {
    const bank = stringOf({});
    const state = createBankState(bank);
    expect(values(bank, state, 2.4, 3, 0)(UNDER_VOLTAGE)).toBeCloseTo(0.1, 12);
    state.underVoltage[0] = 1;
    expect(values(bank, state, 2.8, 3, 0)(UNDER_VOLTAGE)).toBeCloseTo(-0.1, 12);
    expect(values(bank, state, 3, 3, 0)(UNDER_VOLTAGE)).toBeCloseTo(0.1, 12);
  });

  it('ask for charge current to release an under-voltage latch if the BMS does', () => {
    const bank = stringOf({ underVoltageReleaseOnCharge: true });
    const state = createBankState(bank);
    state.underVoltage[0] = 1;
    expect(values(bank, state, 3, 3, 0)(UNDER_VOLTAGE)).toBeLessThan(0);
    // 10 mA is taken for charging.
    expect(values(bank, state, 3, 3, 0.009)(UNDER_VOLTAGE)).toBeLessThan(0);
    expect(values(bank, state, 3, 3, 0.02)(UNDER_VOLTAGE)).toBeGreaterThan(0);
  });

  it('watch currents by direction, not while the path is open for that reason', () => {
    const bank = stringOf({});
    const state = createBankState(bank);
    expect(values(bank, state, 3, 3, 60)(OVER_CURRENT_CHARGE)).toBeCloseTo(10, 12);
    expect(values(bank, state, 3, 3, 60)(OVER_CURRENT_DISCHARGE)).toBeLessThan(0);
    expect(values(bank, state, 3, 3, -120)(OVER_CURRENT_DISCHARGE)).toBeCloseTo(20, 12);
    state.overCurrentDischarge[0] = 1;
    expect(values(bank, state, 3, 3, -120)(OVER_CURRENT_DISCHARGE)).toBeLessThan(0);
  });

  it('watch the permitted current for the bridge of the drop, with exactly one path open', () => {
    const bank = stringOf({ recloseA: 1 });
    const state = createBankState(bank);
    expect(values(bank, state, 3, 3, -5)(RECLOSE)).toBeLessThan(0);
    state.overVoltage[0] = 1;
    expect(values(bank, state, 3, 3, -5)(RECLOSE)).toBeCloseTo(4, 12);
    expect(values(bank, state, 3, 3, -0.5)(RECLOSE)).toBeCloseTo(-0.5, 12);
    expect(values(bank, state, 3, 3, 5)(RECLOSE)).toBeLessThan(0);
    state.underVoltage[0] = 1;
    expect(values(bank, state, 3, 3, -5)(RECLOSE)).toBeLessThan(0);
    state.overVoltage[0] = 0;
    expect(values(bank, state, 3, 3, 5)(RECLOSE)).toBeCloseTo(4, 12);
  });

  it('take the bridge away when the current stops', () => {
    const bank = stringOf({ recloseA: 1 });
    const state = createBankState(bank);
    state.overVoltage[0] = state.reclosed[0] = 1;
    expect(values(bank, state, 3, 3, -0.5)(RECLOSE)).toBeLessThan(0);
    expect(values(bank, state, 3, 3, 0)(RECLOSE)).toBeGreaterThanOrEqual(0);
    expect(protectionDelayS(bank, state, RECLOSE, 0)).toBe(0);
  });

  it('never bridge where the BMS does not', () => {
    const bank = stringOf({ recloseA: null });
    const state = createBankState(bank);
    state.overVoltage[0] = 1;
    expect(values(bank, state, 3, 3, -1e9)(RECLOSE)).toBe(Number.NEGATIVE_INFINITY);
  });

  it('wait for their own times', () => {
    const bank = stringOf({
      overVoltageDelayS: 1,
      overVoltageReleaseHoldS: 2,
      underVoltageDelayS: 3,
      underVoltageReleaseHoldS: 4,
      overCurrent: { ...PLAIN_BMS.overCurrent, delayS: 5 },
      recloseDelayS: 6,
    });
    const state = createBankState(bank);
    const delays = (): number[] =>
      [OVER_VOLTAGE, UNDER_VOLTAGE, OVER_CURRENT_CHARGE, OVER_CURRENT_DISCHARGE, RECLOSE, UNLOCK].map((kind) =>
        protectionDelayS(bank, state, kind, 0),
      );
    expect(delays()).toEqual([1, 3, 5, 5, 6, 0]);
    state.overVoltage[0] = state.underVoltage[0] = 1;
    expect(delays()).toEqual([2, 4, 5, 5, 6, 0]);
  });
});

describe('the acts of a BMS', () => {
  it('latch and release by voltage', () => {
    const bank = stringOf({});
    const state = createBankState(bank);
    const act = (kind: number): string[] => actOnProtection(bank, state, kind, 0, 0);
    expect(act(OVER_VOLTAGE)).toEqual(['over-voltage-trip']);
    expect([chargePathOpen(bank, state, 0), dischargePathOpen(bank, state, 0)]).toEqual([true, false]);
    expect(act(OVER_VOLTAGE)).toEqual(['over-voltage-release']);
    expect(act(UNDER_VOLTAGE)).toEqual(['under-voltage-trip']);
    expect([chargePathOpen(bank, state, 0), dischargePathOpen(bank, state, 0)]).toEqual([false, true]);
    expect(act(UNDER_VOLTAGE)).toEqual(['under-voltage-release']);
    expect(moduleMode(bank, state, 0)).toBe(BOTH_WAYS);
  });

  it('try again after an over-current, and lock after too many trips within the window', () => {
    const bank = stringOf({
      overCurrent: { ...PLAIN_BMS.overCurrent, retryS: 60, lockAfterTrips: 3, lockWindowS: 1000 },
    });
    const state = createBankState(bank);
    const tripAt = (nowS: number): string[] => {
      const told = actOnProtection(bank, state, OVER_CURRENT_DISCHARGE, 0, nowS);
      return [...told, ...actOnTime(state, 0, nowS + 60)];
    };
    const trip = ['over-current-discharge-trip', 'over-current-retry'];
    expect(tripAt(0)).toEqual(trip);
    expect(tripAt(900)).toEqual(trip);
    // The first trip has left the window by 1000 s.
    expect(tripAt(1000)).toEqual(trip);
    expect(tripAt(1800)).toEqual(['over-current-discharge-trip', 'over-current-lock']);
    expect(dischargePathOpen(bank, state, 0)).toBe(true);
    expect(nextTimeS(state, 0)).toBe(Number.POSITIVE_INFINITY);
    // Released, and the count begins anew.
    expect(actOnProtection(bank, state, UNLOCK, 0, 1900)).toEqual(['over-current-unlock']);
    expect(moduleMode(bank, state, 0)).toBe(BOTH_WAYS);
    expect(tripAt(1950)).toEqual(trip);
  });

  it('count trips of each direction for themselves', () => {
    const bank = stringOf({ overCurrent: { ...PLAIN_BMS.overCurrent, lockAfterTrips: 2 } });
    const state = createBankState(bank);
    const kinds = [OVER_CURRENT_DISCHARGE, OVER_CURRENT_CHARGE, OVER_CURRENT_CHARGE].flatMap((kind) =>
      actOnProtection(bank, state, kind, 0, 10),
    );
    expect(kinds.filter((kind) => kind === 'over-current-lock')).toHaveLength(1);
    expect([state.lockedCharge[0], state.lockedDischarge[0]]).toEqual([1, 0]);
  });

  it('never lock where the BMS does not', () => {
    const bank = stringOf({ overCurrent: { ...PLAIN_BMS.overCurrent, lockAfterTrips: null } });
    const state = createBankState(bank);
    for (let trip = 0; trip < 50; trip++) actOnProtection(bank, state, OVER_CURRENT_CHARGE, 0, trip);
    expect(state.lockedCharge[0]).toBe(0);
    expect(nextTimeS(state, 0)).toBe(49 + 60);
  });

  it('unlock by opposite current only, and not where only a visit does', () => {
    for (const [lock, released] of [
      ['opposite-current', true],
      ['manual', false],
    ] as const) {
      const bank = stringOf({ overCurrent: { ...PLAIN_BMS.overCurrent, lock } });
      const state = createBankState(bank);
      state.overCurrentDischarge[0] = state.lockedDischarge[0] = 1;
      expect(values(bank, state, 3, 3, -1)(UNLOCK)).toBeLessThan(0);
      expect(values(bank, state, 3, 3, 1)(UNLOCK) >= 0).toBe(released);
      state.overCurrentDischarge[0] = state.lockedDischarge[0] = 0;
      state.overCurrentCharge[0] = state.lockedCharge[0] = 1;
      expect(values(bank, state, 3, 3, 1)(UNLOCK)).toBeLessThan(0);
      expect(values(bank, state, 3, 3, -1)(UNLOCK) >= 0).toBe(released);
    }
  });

  it('open one path, or both', () => {
    for (const [opens, mode] of [
      ['path', CHARGE_ONLY],
      ['both', NO_WAY],
    ] as const) {
      const bank = stringOf({ overCurrent: { ...PLAIN_BMS.overCurrent, opens } });
      const state = createBankState(bank);
      state.overCurrentDischarge[0] = 1;
      expect(moduleMode(bank, state, 0)).toBe(mode);
    }
  });

  it('put a BMS to sleep after its time with the discharge path open, and wake it', () => {
    const bank = stringOf({ asleepAfterS: 3600 });
    const state = createBankState(bank);
    state.underVoltage[0] = 1;
    expect(updateSleep(bank, state, 0, 100)).toBe(false);
    expect(nextTimeS(state, 0)).toBe(3700);
    // A path that closes in between starts the clock anew.
    state.underVoltage[0] = 0;
    updateSleep(bank, state, 0, 200);
    expect(nextTimeS(state, 0)).toBe(Number.POSITIVE_INFINITY);
    state.underVoltage[0] = 1;
    updateSleep(bank, state, 0, 300);
    expect(updateSleep(bank, state, 0, 3900)).toBe(true);
    expect(state.asleep[0]).toBe(1);
    expect(updateSleep(bank, state, 0, 9999)).toBe(false);
    state.underVoltage[0] = 0;
    expect(updateSleep(bank, state, 0, 10_000)).toBe(true);
    expect(state.asleep[0]).toBe(0);
  });
});

describe('the way through a string', () => {
  it('is that of all its modules together, with the drops of open paths that are not bridged', () => {
    const bank = stringOf({ forwardDropV: 0.7 }, { forwardDropV: 0.5 }, {});
    const state = createBankState(bank);
    const way = (): number[] => {
      updateChainModes(bank, state);
      return [state.chainMode[0], state.chainDropV[0]];
    };
    expect(way()).toEqual([BOTH_WAYS, 0]);
    state.overVoltage[0] = state.overVoltage[1] = 1;
    expect(way()).toEqual([DISCHARGE_ONLY, 1.2]);
    state.reclosed[0] = 1;
    expect(way()).toEqual([DISCHARGE_ONLY, 0.5]);
    state.overVoltage.fill(0);
    state.reclosed[0] = 0;
    state.underVoltage[1] = 1;
    expect(way()).toEqual([CHARGE_ONLY, 0.5]);
    state.overVoltage[0] = 1;
    expect(way()[0]).toBe(NO_WAY);
  });
});
