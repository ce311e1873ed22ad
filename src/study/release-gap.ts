import { nominalModules } from './bank-module.js';
import type { Reading } from './reading.js';
import type { BmsSettings, Candidate, Study } from './study.js';

/** A delay at least this long keeps a BMS from switching without end, s. */
const SHORTEST_DELAY_S = 0.1;

/**
 * Refuses a BMS that would switch without end: when a path opens, the cell voltage jumps by I R0; if that reaches the
 * release at once and trip or release are not delayed, the path closes again in the same instant.
 *
 * I is the largest current that the charger, or the load at the lowest cell voltage, can drive through one module.
 */
export function checkReleaseGaps(study: Study, reading: Reading): void {
  for (const candidate of study.candidates) {
    for (const module of nominalModules(study, candidate).flat()) {
      const bms = bmsOf(study, module.stock, module.id);
      if (bms === undefined) continue;
      const chargeA = Math.min(module.overCurrentChargeA, candidate.charger.limitA);
      const dischargeA = Math.min(module.overCurrentDischargeA, largestLoadA(study, candidate));
      const over = module.overVoltageV - module.overVoltageReleaseV;
      const under = module.underVoltageReleaseV - module.underVoltageV;
      const isDelayed = (trip: number, release: number): boolean => Math.min(trip, release) >= SHORTEST_DELAY_S;
      const refuse = (section: string, gapV: number, currentA: number): void => {
        const jumpV = currentA * module.resistanceOhm;
        if (gapV > jumpV) return;
        const path = [...modulePath(study, module.stock, module.id), 'bms', section];
        reading.faultWith(
          path,
          `must be a release further from the threshold than the jump of ${millivolts(jumpV)} when ${round(currentA)} A is ` +
            `cut, or trip and release delayed by ${SHORTEST_DELAY_S} s, got ${millivolts(gapV)} in candidate ${candidate.key}`,
        );
      };
      if (!isDelayed(bms.overVoltageDelayS, bms.overVoltageReleaseHoldS)) refuse('over_voltage', over, chargeA);
      if (!isDelayed(bms.underVoltageDelayS, bms.underVoltageReleaseHoldS)) refuse('under_voltage', under, dischargeA);
    }
  }
}

function bmsOf(study: Study, stockKey: string, id: string): BmsSettings | undefined {
  const stock = study.stocks.find(({ key }) => key === stockKey);
  if (stock?.kind === 'population') return stock.bms;
  return stock?.modules.find((module) => module.id === id)?.bms;
}

function modulePath(study: Study, stockKey: string, id: string): readonly string[] {
  const stock = study.stocks.find(({ key }) => key === stockKey);
  return stock?.kind === 'explicit' ? ['stock', stockKey, 'modules', id] : ['stock', stockKey];
}

/** Largest current of the duty, its power taken at the lowest voltage that the cells of the bank can have. */
function largestLoadA(study: Study, candidate: Candidate): number {
  const lowestV = Math.min(
    ...nominalModules(study, candidate).map((string) =>
      string.reduce((sum, { cells, underVoltageV }) => sum + cells * underVoltageV, 0),
    ),
  );
  let largest = 0;
  for (const { cycles } of study.duty.parts) {
    for (const { loadA, loadW } of cycles.flat()) largest = Math.max(largest, loadA + loadW / lowestV);
  }
  return largest * study.duty.loadFactor.nominal;
}

function millivolts(volts: number): string {
  return `${round(volts * 1000)} mV`;
}

function round(value: number): number {
  return Number(value.toPrecision(4));
}
