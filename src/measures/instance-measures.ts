import type { Bank } from '../bank/bank.js';
import { type AccountNames, accountMeasures } from './account-measures.js';
import { type AgeingFacts, type AgeingNames, ageingMeasures } from './ageing.js';
import type { BankAccount } from './bank-account.js';
import { type CycleLog, MAIN_MARGIN } from './cycle-log.js';
import { growthPerMonth, meanOf } from './drift.js';
import { windowCycles } from './measure.js';
import { CYCLE_MEASURES, type CycleMeasureName, MEASURES, type MeasureName } from './registry.js';
import { type SharingFacts, type SharingNames, sharingMeasures } from './sharing.js';

/** What a capacity test found. */
export interface TestedCapacity {
  readonly usableAh: number;
  readonly usableWh: number;
  /** Delivered until the first string was lost; all of it if none was. */
  readonly toFirstStringAh: number;
  /** Sum of all cell capacities over the cells in series. */
  readonly idealAh: number;
}

export interface InstanceFacts {
  readonly log: CycleLog;
  /** The twin's log and capacity; null for the twin itself. */
  readonly twin: { readonly log: CycleLog; readonly capacity: TestedCapacity } | null;
  readonly account: BankAccount;
  readonly start: TestedCapacity;
  readonly end: TestedCapacity;
  readonly driftLimitFraction: number;
  readonly sharing: SharingFacts;
  /** Null or absent where no cell ages. */
  readonly ageing?: AgeingFacts | null;
}

/** All measures of one instance in the order of the registry, in the registry's units; null where one does not apply. */
export function instanceMeasures(bank: Bank, facts: InstanceFacts): (number | null)[] {
  const values: Record<MeasureName, number | null> = {
    ...cutoffMeasures(facts),
    ...lossMeasures(facts),
    ...driftMeasures(bank, facts),
    ...capacityMeasures(bank, facts),
    ...sharingMeasures(facts.sharing),
    ...accountMeasures(facts.account, facts.log.elapsedS),
    ...ageingMeasures(facts.ageing ?? null),
  };
  return MEASURES.map(({ name }) => values[name]);
}

/** Values at a checkpoint cycle (from 1), in the order of the cycle measures. */
export function cycleValues(bank: Bank, log: CycleLog, cycle: number): (number | null)[] {
  const upTo = (flags: Uint8Array, bit = 255): number => count(flags, bit, 0, cycle);
  const percent = 100 / bank.driftRatedAh;
  const values: Record<CycleMeasureName, number | null> = {
    drift: bank.positions > 1 ? percent * log.moduleDriftAh[cycle - 1] : null,
    cell_drift: percent * log.cellDriftAh[cycle - 1],
    trips: log.trips.subarray(0, cycle).reduce((sum, trips) => sum + trips, 0),
    energy_not_supplied: log.lostWh.subarray(0, cycle).reduce((sum, wh) => sum + wh, 0) / 1000,
    early_cutoffs_on_charge: upTo(log.chargeCutoff, MAIN_MARGIN),
    early_cutoffs_on_discharge: upTo(log.dischargeCutoff),
  };
  return CYCLE_MEASURES.map(({ name }) => values[name]);
}

type Part<Names extends MeasureName> = Record<Names, number | null>;
type CutoffNames = Extract<MeasureName, `early_cutoff${string}` | `charge_missed${string}`>;
type DriftNames = Extract<MeasureName, `drift${string}` | `cell_drift${string}` | 'charge_spread_at_end_of_charge'>;
type CapacityNames = Extract<MeasureName, `usable${string}` | `lost_capacity${string}`>;
type LossNames = Exclude<
  MeasureName,
  CutoffNames | DriftNames | CapacityNames | SharingNames | AccountNames | AgeingNames
>;

function cutoffMeasures({ log, twin }: InstanceFacts): Part<CutoffNames> {
  const { from } = windowCycles('last-30', log.cycles);
  const start = from - 1;
  const cycles = log.cycles;
  const days = ((cycles - start) * log.elapsedS) / cycles / 86400;
  const some = (flags: Uint8Array, bit = 255): number => (count(flags, bit, start, cycles) > 0 ? 1 : 0);
  const share = (flags: Uint8Array, bit = 255): number => (100 * count(flags, bit, start, cycles)) / (cycles - start);
  const spread = (flags: Uint8Array, twinFlags: Uint8Array, bit: number, byDuty: boolean): number => {
    for (let at = start; at < cycles; at++) {
      const inTwin = (twinFlags[at] & bit) !== 0;
      if ((flags[at] & bit) !== 0 && inTwin === byDuty) return 1;
    }
    return 0;
  };
  const own = twin?.log ?? log;
  return {
    early_cutoff_on_charge: some(log.chargeCutoff, MAIN_MARGIN),
    early_cutoff_on_charge_margin_2: some(log.chargeCutoff, 1),
    early_cutoff_on_charge_margin_10: some(log.chargeCutoff, 4),
    early_cutoff_on_charge_ever: log.firstOnCharge === null ? 0 : 1,
    early_cutoff_on_charge_by_spread: spread(log.chargeCutoff, own.chargeCutoff, MAIN_MARGIN, false),
    early_cutoff_on_charge_by_duty: spread(log.chargeCutoff, own.chargeCutoff, MAIN_MARGIN, true),
    early_cutoff_on_charge_by_over_voltage: some(log.chargeCutoffByVoltage),
    early_cutoff_on_charge_by_over_current: some(log.chargeCutoffByCurrent),
    early_cutoff_on_charge_cycles: share(log.chargeCutoff, MAIN_MARGIN),
    early_cutoff_on_charge_first_cycle: log.firstOnCharge?.cycle ?? null,
    early_cutoff_on_charge_first_string: log.firstOnCharge?.string ?? null,
    early_cutoff_on_charge_first_position: log.firstOnCharge?.position ?? null,
    early_cutoff_on_charge_first_cell: cellOf(log.firstOnCharge),
    charge_missed_on_charge: (meanOf(log.chargeMissedAh, start, cycles) * (cycles - start)) / days,
    early_cutoff_on_discharge: some(log.dischargeCutoff),
    early_cutoff_on_discharge_ever: log.firstOnDischarge === null ? 0 : 1,
    early_cutoff_on_discharge_by_spread: spread(log.dischargeCutoff, own.dischargeCutoff, 1, false),
    early_cutoff_on_discharge_by_duty: spread(log.dischargeCutoff, own.dischargeCutoff, 1, true),
    early_cutoff_on_discharge_by_under_voltage: some(log.dischargeCutoffByVoltage),
    early_cutoff_on_discharge_by_over_current: some(log.dischargeCutoffByCurrent),
    early_cutoff_on_discharge_cycles: share(log.dischargeCutoff),
    early_cutoff_on_discharge_first_cycle: log.firstOnDischarge?.cycle ?? null,
    early_cutoff_on_discharge_first_string: log.firstOnDischarge?.string ?? null,
    early_cutoff_on_discharge_first_position: log.firstOnDischarge?.position ?? null,
    early_cutoff_on_discharge_first_cell: cellOf(log.firstOnDischarge),
    charge_missed_on_discharge: (meanOf(log.chargeLeftAh, start, cycles) * (cycles - start)) / days,
  };
}

function lossMeasures({ log, twin }: InstanceFacts): Part<LossNames> {
  const own = twin?.log ?? log;
  const { cycles } = log;
  let [stringBySpread, loadBySpread, loadByDuty, lostWh, lostBySpreadWh] = [0, 0, 0, 0, 0];
  for (let at = 0; at < cycles; at++) {
    if (log.stringLost[at] === 1 && own.stringLost[at] === 0) stringBySpread = 1;
    if (log.loadLost[at] === 1 && own.loadLost[at] === 0) loadBySpread = 1;
    if (log.loadLost[at] === 1 && own.loadLost[at] === 1) loadByDuty = 1;
    lostWh += log.lostWh[at];
    if (own.loadLost[at] === 0) lostBySpreadWh += log.lostWh[at];
  }
  const stringLostDays = count(log.stringLost, 1, 0, cycles);
  const loadLostDays = count(log.loadLost, 1, 0, cycles);
  return {
    string_lost: stringLostDays > 0 ? 1 : 0,
    string_lost_days: stringLostDays,
    string_lost_by_spread: stringBySpread,
    load_lost: loadLostDays > 0 ? 1 : 0,
    load_lost_days: loadLostDays,
    load_lost_by_spread: loadBySpread,
    load_lost_by_duty: loadByDuty,
    energy_not_supplied: lostWh / 1000,
    energy_not_supplied_by_spread: lostBySpreadWh / 1000,
    charge_ended_by_bms: (100 * count(log.endedByBms, 1, 0, cycles)) / cycles,
    over_voltage_trips: log.overVoltageTrips / cycles,
    under_voltage_trips: log.underVoltageTrips / cycles,
    over_current_trips: log.overCurrentTrips / cycles,
    averaged_chatter: log.averagedChatter ? 1 : 0,
  };
}

function driftMeasures(bank: Bank, { log, driftLimitFraction }: InstanceFacts): Part<DriftNames> {
  const { cycles } = log;
  const { from } = windowCycles('last-7', cycles);
  const percent = 100 / bank.driftRatedAh;
  const cycleDays = log.elapsedS / cycles / 86400;
  const moduleAh = meanOf(log.moduleDriftAh, from - 1, cycles);
  const cellAh = meanOf(log.cellDriftAh, from - 1, cycles);
  const scaled = (growthAh: number | null): number | null => (growthAh === null ? null : percent * growthAh);
  const several = bank.positions > 1;
  const past = log.moduleDriftAh.findIndex((driftAh) => driftAh > driftLimitFraction * bank.driftRatedAh);
  return {
    drift: several ? percent * moduleAh : null,
    drift_charge: several ? moduleAh : null,
    drift_growth: several ? scaled(growthPerMonth(log.moduleDriftAh, cycleDays)) : null,
    cell_drift: percent * cellAh,
    cell_drift_charge: cellAh,
    cell_drift_growth: scaled(growthPerMonth(log.cellDriftAh, cycleDays)),
    drift_past_limit: several ? (past >= 0 ? 1 : 0) : null,
    drift_past_limit_first_cycle: several && past >= 0 ? past + 1 : null,
    charge_spread_at_end_of_charge: several ? 100 * meanOf(log.chargeSpread, from - 1, cycles) : null,
  };
}

function capacityMeasures(bank: Bank, { start, end, twin }: InstanceFacts): Part<CapacityNames> {
  const twinAh = twin?.capacity.usableAh ?? end.usableAh;
  return {
    usable_capacity_start: start.usableAh,
    usable_capacity: end.usableAh,
    usable_energy_start: start.usableWh / 1000,
    usable_energy: end.usableWh / 1000,
    usable_to_first_string_start: start.toFirstStringAh,
    usable_to_first_string: end.toFirstStringAh,
    lost_capacity_start: 100 * (1 - start.usableAh / start.idealAh),
    lost_capacity: 100 * (1 - end.usableAh / end.idealAh),
    lost_capacity_of_rated: 100 * (1 - end.usableAh / bank.ratedAh),
    // A twin that can deliver nothing is no measure of anything.
    lost_capacity_of_twin: twinAh > 0 ? 100 * (1 - end.usableAh / twinAh) : null,
  };
}

function count(flags: Uint8Array, bit: number, from: number, to: number): number {
  let sum = 0;
  for (let at = from; at < to; at++) if ((flags[at] & bit) !== 0) sum++;
  return sum;
}

function cellOf(first: { readonly cell: number } | null): number | null {
  return first === null || first.cell === 0 ? null : first.cell;
}
