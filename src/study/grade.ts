import type { Grade } from './grade-name.js';
import type { StockInput } from './stock.js';

/** Nominal thresholds of every grade [trade practice], V per cell. */
export const NOMINAL_OVER_VOLTAGE_V = 3.65;
export const NOMINAL_UNDER_VOLTAGE_V = 2.5;

/** Cell resistance of a new cell of 100 Ah [own choice], mOhm; inversely proportional to rated capacity. */
const RESISTANCE_MOHM_AT_100_AH = 0.8;
/** Joints of a module of four cells [own choice], mOhm; proportional to the number of cells. */
const JOINTS_MOHM_OF_4_CELLS = 1.3;

/** What distinguishes the grades. Spreads are one standard deviation. */
interface GradeFigures {
  readonly capacity: { readonly ofRated: number; readonly modulePercent: number; readonly cellPercent: number };
  readonly resistance: { readonly factor: number; readonly modulePercent: number; readonly cellPercent: number };
  readonly capacityAgainstResistance: number;
  readonly leakagePercentPerMonth: number;
  readonly standbyMA: { readonly mean: number; readonly sd: number };
  readonly efficiency: { readonly mean: number; readonly sd: number };
  readonly arrivalPoints: { readonly module: number; readonly cell: number };
  readonly overVoltage: { readonly sdV: number; readonly withinV: number };
  readonly underVoltage: { readonly sdV: number; readonly withinV: number };
}

/** Own choice, documented in the model pages; guided by published variation of new cells and by trade practice. */
const FIGURES: Readonly<Record<Grade, GradeFigures>> = {
  'new-same-make': {
    capacity: { ofRated: 1.02, modulePercent: 0.5, cellPercent: 0.3 },
    resistance: { factor: 1, modulePercent: 2, cellPercent: 1.5 },
    capacityAgainstResistance: -0.2,
    leakagePercentPerMonth: 0.3,
    standbyMA: { mean: 5, sd: 0.5 },
    efficiency: { mean: 0.9998, sd: 5e-5 },
    arrivalPoints: { module: 3, cell: 0.3 },
    overVoltage: { sdV: 0.012, withinV: 0.04 },
    underVoltage: { sdV: 0.03, withinV: 0.1 },
  },
  'mixed-purchase': {
    capacity: { ofRated: 1.01, modulePercent: 1, cellPercent: 0.5 },
    resistance: { factor: 1, modulePercent: 4, cellPercent: 2 },
    capacityAgainstResistance: -0.3,
    leakagePercentPerMonth: 0.3,
    standbyMA: { mean: 8, sd: 3 },
    efficiency: { mean: 0.9998, sd: 1e-4 },
    arrivalPoints: { module: 5, cell: 0.5 },
    overVoltage: { sdV: 0.02, withinV: 0.06 },
    underVoltage: { sdV: 0.05, withinV: 0.15 },
  },
  older: {
    capacity: { ofRated: 0.92, modulePercent: 3, cellPercent: 0.5 },
    resistance: { factor: 1.5, modulePercent: 6, cellPercent: 3 },
    capacityAgainstResistance: -0.7,
    leakagePercentPerMonth: 0.5,
    standbyMA: { mean: 15, sd: 1.5 },
    efficiency: { mean: 0.9995, sd: 2e-4 },
    arrivalPoints: { module: 5, cell: 0.8 },
    overVoltage: { sdV: 0.02, withinV: 0.06 },
    underVoltage: { sdV: 0.05, withinV: 0.15 },
  },
};

/**
 * What a grade fills in, in the words of the study file itself.
 *
 * Standby is lognormal, since a normal law of the widest grade would reach below 0. Coulombic efficiency is cut where
 * it would pass 1 (symmetrically, so that the mean stays).
 */
export function gradeLayer(grade: Grade, ratedAh: number, cellsInSeries: number): Partial<StockInput> {
  const figures = FIGURES[grade];
  const { capacity, resistance, efficiency } = figures;
  const cellMOhm = (RESISTANCE_MOHM_AT_100_AH * 100 * resistance.factor) / ratedAh;
  return {
    capacity_Ah: {
      nominal: ratedAh * capacity.ofRated,
      module_sd_percent: capacity.modulePercent,
      cell_sd_percent: capacity.cellPercent,
    },
    cell_resistance_mOhm: {
      nominal: cellMOhm,
      module_sd_percent: resistance.modulePercent,
      cell_sd_percent: resistance.cellPercent,
    },
    correlation: [
      { level: 'module', of: ['capacity_Ah', 'cell_resistance_mOhm'], rho: figures.capacityAgainstResistance },
    ],
    leakage_percent_per_month: {
      nominal: figures.leakagePercentPerMonth,
      cell: { law: 'lognormal', sd_percent: 30 },
    },
    standby_mA: { nominal: figures.standbyMA.mean, module: { law: 'lognormal', sd: figures.standbyMA.sd } },
    coulombic_efficiency: {
      nominal: efficiency.mean,
      module: { law: 'truncated-normal', sd: efficiency.sd, half_width: efficiencyHalfWidth(efficiency) },
    },
    arrival_charge_percent: {
      nominal: 50,
      module_sd: figures.arrivalPoints.module,
      cell_sd: figures.arrivalPoints.cell,
    },
    path_resistance_mOhm: { nominal: 1.5, module: { law: 'lognormal', sd_percent: 15 } },
    joint_resistance_mOhm: {
      nominal: (JOINTS_MOHM_OF_4_CELLS * cellsInSeries) / 4,
      module: { law: 'lognormal', sd_percent: 15 },
    },
    bms: {
      over_voltage: { cell_V: thresholdOf(NOMINAL_OVER_VOLTAGE_V, figures.overVoltage) },
      under_voltage: { cell_V: thresholdOf(NOMINAL_UNDER_VOLTAGE_V, figures.underVoltage) },
    },
  };
}

function thresholdOf(nominal: number, { sdV, withinV }: { readonly sdV: number; readonly withinV: number }) {
  return { nominal, module: { law: 'truncated-normal', sd: sdV, half_width: withinV } as const };
}

function efficiencyHalfWidth({ mean, sd }: { readonly mean: number; readonly sd: number }): number {
  // 1 - mean carries the rounding of the decimal mean; a billionth is far below any efficiency that is known.
  const roomBelowOne = Math.round((1 - mean) * 1e9) / 1e9;
  return Math.min(5 * sd, roomBelowOne);
}
