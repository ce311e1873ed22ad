import { describe, expect, it } from 'vitest';
import { buildBank } from '../../src/bank/bank.js';
import { compileOcvCurves } from '../../src/bank/ocv-curves.js';
import type { BankAccount } from '../../src/measures/bank-account.js';
import { type Cutoff, type CycleLog, createCycleLog, logCutoff } from '../../src/measures/cycle-log.js';
import { cycleValues, type InstanceFacts, instanceMeasures } from '../../src/measures/instance-measures.js';
import { CYCLE_MEASURES, MEASURES, type MeasureName } from '../../src/measures/registry.js';
import type { Candidate } from '../../src/study/study.js';
import { bankOf } from '../reference/bank-of.js';
import { DEFAULT_TABLE } from '../reference/default-table.js';
import { plainModule } from '../reference/plain-module.js';
import { SHARED } from './shared-facts.js';

/** 2S2P of 100 Ah: rated 200 Ah. */
function bankWired(wiring: Candidate['wiring'] = 'strings') {
  const modules = ['a', 'b'].map((s) => ['1', '2'].map((p) => plainModule(s + p)));
  const { candidate } = bankOf('bank', { modules, cycles: [], wiring });
  const named = new Map(modules.flat().map((module) => [module.id, module]));
  return buildBank(candidate, named, compileOcvCurves([DEFAULT_TABLE]));
}

const capacity = (usableAh: number) => ({
  usableAh,
  usableWh: 25 * usableAh,
  toFirstStringAh: 0.9 * usableAh,
  idealAh: 200,
});

const NO_ACCOUNT: BankAccount = {
  visits: 0,
  inWh: 0,
  outWh: 0,
  storedGainWh: 0,
  wiringWh: 0,
  bleedWh: 0,
  equaliserAh: 0,
  equaliserCounterAh: 0,
  equaliserWh: 0,
  chargerOnlyS: 0,
  damagedCells: 0,
  longestUnfilledS: 0,
  tripsToFull: null,
  toFullAh: null,
};

/** A log of one-day cycles. */
function logOf(cycles: number): CycleLog {
  const log = createCycleLog(cycles);
  log.elapsedS = 86_400 * cycles;
  return log;
}

/** Measures by name. */
function measures(facts: Partial<InstanceFacts> & Pick<InstanceFacts, 'log'>, wiring?: Candidate['wiring']) {
  const values = instanceMeasures(bankWired(wiring), {
    twin: null,
    account: NO_ACCOUNT,
    start: capacity(198),
    end: capacity(190),
    driftLimitFraction: 0.05,
    sharing: SHARED,
    ...facts,
  });
  return (name: MeasureName): number | null => values[MEASURES.findIndex((measure) => measure.name === name)];
}

const cutoff = (direction: Cutoff['direction'], sketch: Partial<Cutoff> = {}): Cutoff => ({
  direction,
  cause: 'voltage',
  string: 1,
  position: 1,
  cell: 1,
  shortfall: 0.06,
  chargeLeftAh: 10,
  ...sketch,
});

describe('cutoff measures', () => {
  it('look at the last 30 cycles, and at the whole horizon where they say ever', () => {
    const log = logOf(100);
    logCutoff(log, 70, cutoff('charge'));
    let of = measures({ log });
    expect([of('early_cutoff_on_charge'), of('early_cutoff_on_charge_ever')]).toEqual([0, 1]);
    expect(of('early_cutoff_on_charge_cycles')).toBe(0);
    logCutoff(log, 71, cutoff('charge', { shortfall: 0.03 }));
    of = measures({ log });
    expect([of('early_cutoff_on_charge'), of('early_cutoff_on_charge_margin_2')]).toEqual([0, 1]);
    logCutoff(log, 72, cutoff('charge', { shortfall: 0.3, cause: 'current', cell: 0 }));
    of = measures({ log });
    expect([of('early_cutoff_on_charge'), of('early_cutoff_on_charge_margin_10')]).toEqual([1, 1]);
    expect(of('early_cutoff_on_charge_by_over_current')).toBe(1);
    expect(of('early_cutoff_on_charge_by_over_voltage')).toBe(0);
    // One of thirty.
    expect(of('early_cutoff_on_charge_cycles')).toBeCloseTo(100 / 30, 12);
    expect(of('early_cutoff_on_charge_first_cycle')).toBe(70);
  });

  it('put a cutoff down to the duty on a cycle on which the twin has one too, else to spread', () => {
    const [log, twinLog] = [logOf(40), logOf(40)];
    const twin = { log: twinLog, capacity: capacity(195) };
    logCutoff(log, 20, cutoff('discharge'));
    logCutoff(twinLog, 21, cutoff('discharge'));
    const byWhat = (): (number | null)[] => {
      const of = measures({ log, twin });
      return [of('early_cutoff_on_discharge_by_spread'), of('early_cutoff_on_discharge_by_duty')];
    };
    expect(byWhat()).toEqual([1, 0]);
    logCutoff(log, 21, cutoff('discharge'));
    expect(byWhat()).toEqual([1, 1]);
    // On charge the margin of 5 points decides for both.
    logCutoff(log, 30, cutoff('charge'));
    logCutoff(twinLog, 30, cutoff('charge', { shortfall: 0.03 }));
    const of = measures({ log, twin });
    expect([of('early_cutoff_on_charge_by_spread'), of('early_cutoff_on_charge_by_duty')]).toEqual([1, 0]);
  });

  it('put everything of the twin itself down to the duty', () => {
    const log = logOf(10);
    logCutoff(log, 9, cutoff('discharge'));
    log.loadLost[8] = log.stringLost[8] = 1;
    const of = measures({ log });
    expect(of('early_cutoff_on_discharge_by_spread')).toBe(0);
    expect(of('early_cutoff_on_discharge_by_duty')).toBe(1);
    expect([of('load_lost_by_spread'), of('load_lost_by_duty'), of('string_lost_by_spread')]).toEqual([0, 1, 0]);
  });

  it('name the place of the first cutoff, the cell only if one caused it', () => {
    const log = logOf(10);
    let of = measures({ log });
    expect(of('early_cutoff_on_discharge_first_cycle')).toBeNull();
    expect(of('early_cutoff_on_discharge_first_cell')).toBeNull();
    logCutoff(log, 3, cutoff('discharge', { string: 2, position: 1, cell: 0, cause: 'current' }));
    of = measures({ log });
    expect(of('early_cutoff_on_discharge_first_string')).toBe(2);
    expect(of('early_cutoff_on_discharge_first_position')).toBe(1);
    expect(of('early_cutoff_on_discharge_first_cell')).toBeNull();
  });

  it('give charge missed per day of the window', () => {
    // By hand: 6 + 9 Ah in 30 cycles of two days; 12 Ah left behind in them.
    const log = createCycleLog(40);
    log.elapsedS = 40 * 2 * 86_400;
    log.chargeMissedAh[9] = 500;
    log.chargeMissedAh[10] = 6;
    log.chargeMissedAh[39] = 9;
    logCutoff(log, 40, cutoff('discharge', { chargeLeftAh: 12 }));
    const of = measures({ log });
    expect(of('charge_missed_on_charge')).toBeCloseTo(15 / 60, 12);
    expect(of('charge_missed_on_discharge')).toBeCloseTo(12 / 60, 12);
  });
});

describe('loss measures', () => {
  it('count days and energy over the horizon, by spread on days on which the twin loses none', () => {
    const [log, twinLog] = [logOf(50), logOf(50)];
    log.loadLost.set([1, 1, 0], 10);
    log.lostWh.set([1500, 700], 10);
    twinLog.loadLost[11] = 1;
    log.stringLost.set([1, 1, 1], 4);
    twinLog.stringLost.set([1, 1, 1], 4);
    const of = measures({ log, twin: { log: twinLog, capacity: capacity(195) } });
    expect([of('load_lost'), of('load_lost_days')]).toEqual([1, 2]);
    expect([of('load_lost_by_spread'), of('load_lost_by_duty')]).toEqual([1, 1]);
    expect(of('energy_not_supplied')).toBeCloseTo(2.2, 12);
    expect(of('energy_not_supplied_by_spread')).toBeCloseTo(1.5, 12);
    expect([of('string_lost'), of('string_lost_days'), of('string_lost_by_spread')]).toEqual([1, 3, 0]);
  });

  it('give trips per cycle and the share of charges ended by a BMS', () => {
    const log = logOf(40);
    log.overVoltageTrips = 60;
    log.underVoltageTrips = 4;
    log.overCurrentTrips = 2;
    log.endedByBms.set([1, 1]);
    const of = measures({ log });
    expect([of('over_voltage_trips'), of('under_voltage_trips'), of('over_current_trips')]).toEqual([1.5, 0.1, 0.05]);
    expect(of('charge_ended_by_bms')).toBe(5);
    expect(of('averaged_chatter')).toBe(0);
  });
});

describe('drift measures', () => {
  const log = logOf(180);
  log.moduleDriftAh.forEach((_, day) => {
    log.moduleDriftAh[day] = 0.05 * (day + 1);
    log.cellDriftAh[day] = 0.1 * (day + 1);
  });

  it('are means of the last seven cycles, in Ah and in percent of a module', () => {
    // Days 174 to 180, mean 177; of 100 Ah.
    const of = measures({ log });
    expect(of('drift_charge')).toBeCloseTo(8.85, 10);
    expect(of('drift')).toBeCloseTo(8.85, 10);
    expect(of('cell_drift')).toBeCloseTo(17.7, 10);
    expect(of('drift_growth')).toBeCloseTo(1.5, 10);
    expect(of('cell_drift_growth')).toBeCloseTo(3, 10);
  });

  it('say when drift first passes its limit', () => {
    // 5 % of 100 Ah: 5 Ah on day 100, more on day 101.
    const of = measures({ log });
    expect([of('drift_past_limit'), of('drift_past_limit_first_cycle')]).toEqual([1, 101]);
    const never = measures({ log, driftLimitFraction: 0.5 });
    expect([never('drift_past_limit'), never('drift_past_limit_first_cycle')]).toEqual([0, null]);
  });

  it('leave out modules of native packs', () => {
    const of = measures({ log }, 'native');
    for (const name of [
      'drift',
      'drift_charge',
      'drift_growth',
      'drift_past_limit',
      'charge_spread_at_end_of_charge',
    ] as const) {
      expect(of(name)).toBeNull();
    }
    expect(of('cell_drift')).not.toBeNull();
  });
});

describe('capacity measures', () => {
  it('compare with ideal, rated and twin', () => {
    // By hand: ideal 200, rated 200, twin 195 Ah.
    const of = measures({ log: logOf(10), twin: { log: logOf(10), capacity: capacity(195) } });
    expect([of('usable_capacity_start'), of('usable_capacity')]).toEqual([198, 190]);
    expect([of('usable_energy_start'), of('usable_energy')]).toEqual([4.95, 4.75]);
    expect(of('usable_to_first_string')).toBeCloseTo(171, 12);
    expect(of('lost_capacity_start')).toBeCloseTo(1, 12);
    expect(of('lost_capacity')).toBeCloseTo(5, 12);
    expect(of('lost_capacity_of_rated')).toBeCloseTo(5, 12);
    expect(of('lost_capacity_of_twin')).toBeCloseTo(100 * (1 - 190 / 195), 12);
  });
});

describe('cycleValues', () => {
  it('give the state of the cycle and what has happened up to it', () => {
    const log = logOf(10);
    log.moduleDriftAh.set([1, 2, 3], 0);
    log.cellDriftAh.set([2, 4, 6], 0);
    log.trips.set([1, 0, 5, 7], 0);
    log.lostWh.set([0, 500, 250, 9000], 0);
    logCutoff(log, 1, cutoff('charge'));
    logCutoff(log, 2, cutoff('charge', { shortfall: 0.03 }));
    logCutoff(log, 3, cutoff('discharge'));
    logCutoff(log, 4, cutoff('discharge'));
    const values = cycleValues(bankWired(), log, 3);
    const of = (name: (typeof CYCLE_MEASURES)[number]['name']): number | null =>
      values[CYCLE_MEASURES.findIndex((measure) => measure.name === name)];
    expect([of('drift'), of('cell_drift'), of('trips'), of('energy_not_supplied')]).toEqual([3, 6, 6, 0.75]);
    expect([of('early_cutoffs_on_charge'), of('early_cutoffs_on_discharge')]).toEqual([1, 1]);
    const native = cycleValues(bankWired('native'), log, 3);
    expect(native[CYCLE_MEASURES.findIndex(({ name }) => name === 'drift')]).toBeNull();
  });
});

describe('measures of ageing', () => {
  const facts = { log: logOf(30) };

  it('are absent where no cell ages', () => {
    for (const name of ['capacity_fade', 'capacity_fade_worst_cell', 'capacity_fade_spread'] as const) {
      expect(measures(facts)(name)).toBeNull();
    }
  });

  it('are the mean and the largest loss of the cells, and the spread of the modules', () => {
    // By hand: 2, 4 and 6, 12 % lost: mean 6 %, modules 3 and 9 %.
    const ageing = { left: Float64Array.of(0.98, 0.96, 0.94, 0.88), cellStart: Int32Array.of(0, 2, 4) };
    const of = measures({ ...facts, ageing });
    expect(of('capacity_fade')).toBeCloseTo(6, 12);
    expect(of('capacity_fade_worst_cell')).toBeCloseTo(12, 12);
    expect(of('capacity_fade_spread')).toBeCloseTo(6, 12);
  });
});
