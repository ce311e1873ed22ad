import type { NominalModule } from './bank-module.js';
import type { Candidate } from './study.js';

/** Float this close below a release keeps the latch of an over-voltage trip from clearing, V per cell [common practice]. */
const FLOAT_MARGIN_V = 0.02;
/** Room between absorption and threshold that unlike cells use up, V per cell [common practice]. */
const ABSORPTION_ROOM_V = 0.05;
/** Sums of decimals are exact only up to rounding, V. */
const ROUNDING_V = 1e-9;

type Strings = readonly (readonly NominalModule[])[];
type Warn = (text: string) => void;

/** Warns where float may hold the latch of an over-voltage trip. */
export function warnOfFloat({ charger }: Candidate, strings: Strings, warn: Warn): void {
  if (charger.floatV === null) return;
  const cells = strings[0]?.reduce((sum, module) => sum + module.cells, 0) ?? 0;
  const floatCellV = charger.floatV / cells;
  const stocks = new Set<string>();
  for (const { stock, overVoltageReleaseV } of strings.flat()) {
    if (stocks.has(stock) || overVoltageReleaseV > floatCellV + FLOAT_MARGIN_V) continue;
    stocks.add(stock);
    warn(
      `stock ${stock}: the over-voltage release, ${volts(overVoltageReleaseV)} per cell, lies at or below float, ` +
        `${volts(floatCellV)} per cell, plus ${FLOAT_MARGIN_V * 1000} mV: a trip may last as long as the float; lower ` +
        `float_V to less than ${volts(cells * (overVoltageReleaseV - FLOAT_MARGIN_V))}, or let it end (float_V: null)`,
    );
  }
}

/** Warns of an absorption at which charges end by BMS: above the sum of the thresholds of a string, or near it. */
export function warnOfAbsorption({ charger }: Candidate, strings: Strings, warn: Warn): void {
  const thresholds = strings.map((string) => ({
    cells: string.reduce((sum, { cells }) => sum + cells, 0),
    sumV: string.reduce((sum, { cells, overVoltageV }) => sum + cells * overVoltageV, 0),
  }));
  const lowest = thresholds.reduce((least, one) => (one.sumV < least.sumV ? one : least));
  const roomV = lowest.sumV - charger.absorptionV;
  const absorption = `absorption, ${volts(charger.absorptionV)}, lies`;
  const sum = `the sum of the over-voltage thresholds of a string, ${volts(lowest.sumV)}`;
  if (roomV < -ROUNDING_V) {
    warn(`${absorption} above ${sum}: every charge ends in a trip; lower absorption_V`);
  } else if (roomV / lowest.cells < ABSORPTION_ROOM_V - ROUNDING_V) {
    const room = `${Number(((1000 * roomV) / lowest.cells).toFixed(1))} mV per cell`;
    warn(
      `${absorption} only ${room} below ${sum}: cells that are a little fuller trip before the rest is full; lower ` +
        `absorption_V to at most ${volts(lowest.sumV - ABSORPTION_ROOM_V * lowest.cells)}`,
    );
  }
}

function volts(value: number): string {
  return `${Number(value.toFixed(3))} V`;
}
