import { type NominalModule, nominalModules } from './bank-module.js';
import type { Reading } from './reading.js';
import type { BmsSettings, Candidate, Study } from './study.js';
import type { StudyPath } from './study-path.js';

/** Delays at least this long keep a BMS from switching without end, s. */
const SHORTEST_DELAY_S = 0.1;

/**
 * Refuses a BMS that would switch without end: when a path opens, the cell voltage jumps by I R0; if that reaches the
 * release and trip or release are not delayed, the path closes again in the same instant.
 *
 * I is the largest current that the charger, or the load at the lowest cell voltage, can drive through one module.
 */
export function checkReleaseGaps(study: Study, reading: Reading): void {
  for (const candidate of study.candidates) {
    for (const module of nominalModules(study, candidate).flat()) {
      const home = bmsOf(study, module);
      if (home === undefined) continue;
      const { bms, path } = home;
      const refuse = (section: string, gapV: number, currentA: number): void => {
        const jumpV = currentA * module.resistanceOhm;
        if (gapV > jumpV) return;
        reading.faultWith(
          [...path, 'bms', section],
          `must be a release further from the threshold than the jump of ${millivolts(jumpV)} when ${round(currentA)} A ` +
            `is cut, or trip and release delayed by ${SHORTEST_DELAY_S} s, ` +
            `got ${millivolts(gapV)} in candidate ${candidate.key}`,
        );
      };
      if (!isDelayed(bms.overVoltageDelayS, bms.overVoltageReleaseHoldS)) {
        const chargeA = Math.min(module.overCurrentChargeA, candidate.charger.limitA);
        refuse('over_voltage', module.overVoltageV - module.overVoltageReleaseV, chargeA);
      }
      if (!isDelayed(bms.underVoltageDelayS, bms.underVoltageReleaseHoldS)) {
        const dischargeA = Math.min(module.overCurrentDischargeA, largestLoadA(study, candidate));
        refuse('under_voltage', module.underVoltageReleaseV - module.underVoltageV, dischargeA);
      }
    }
  }
}

function isDelayed(tripS: number, releaseS: number): boolean {
  return tripS >= SHORTEST_DELAY_S && releaseS >= SHORTEST_DELAY_S;
}

function bmsOf(
  study: Study,
  { id, stock: stockKey }: NominalModule,
): { readonly bms: BmsSettings; readonly path: StudyPath } | undefined {
  const stock = study.stocks.find(({ key }) => key === stockKey);
  if (stock?.kind === 'population') return { bms: stock.bms, path: ['stock', stockKey] };
  const module = stock?.modules.find((candidate) => candidate.id === id);
  return module && { bms: module.bms, path: ['stock', stockKey, 'modules', id] };
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
