import type { Law, PopulationStock, Spread, Study } from '../../src/study/study.js';

// Invented data: no stock, module or site of this file exists.

const FIXED: Law = { law: 'fixed' };

/** A relative spread with normal laws; a level without standard deviation is fixed. */
export function relativeSpread(nominal: number, moduleSd = 0, cellSd = 0, lotSd = 0): Spread {
  const normal = (sd: number): Law => (sd === 0 ? FIXED : { law: 'normal', sd });
  return { nominal, relative: true, lot: normal(lotSd), module: normal(moduleSd), cell: normal(cellSd) };
}

/** Four modules of four cells; seven quantities spread by module, four of them by cell too. */
export function inventedStock(changes: Partial<PopulationStock> = {}): PopulationStock {
  return {
    kind: 'population',
    key: 'newer',
    moduleIds: ['N1', 'N2', 'N3', 'N4'],
    cellsInSeries: 4,
    ratedAh: 100,
    quantities: {
      capacityAh: relativeSpread(100, 0.01, 0.004),
      resistanceOhm: relativeSpread(0.0008, 0.03, 0.02),
      leakagePerMonth: {
        ...relativeSpread(0.003),
        cell: { law: 'lognormal', sd: 0.3 },
      },
      standbyA: { ...relativeSpread(0.008), module: { law: 'lognormal', sd: 0.13 } },
      efficiency: { ...relativeSpread(0.9998), relative: false, module: { law: 'normal', sd: 5e-5 } },
      arrivalCharge: {
        nominal: 0.5,
        relative: false,
        lot: FIXED,
        module: { law: 'normal', sd: 0.03 },
        cell: { law: 'normal', sd: 0.003 },
      },
      pathResistanceOhm: { ...relativeSpread(0.0015), module: { law: 'lognormal', sd: 0.15 } },
      jointResistanceOhm: { ...relativeSpread(0.0013), module: { law: 'lognormal', sd: 0.15 } },
      overVoltageV: {
        ...relativeSpread(3.65),
        relative: false,
        module: { law: 'truncated-normal', sd: 0.012, lower: -0.04, upper: 0.04 },
      },
      overVoltageReleaseV: relativeSpread(3.45),
      underVoltageV: {
        ...relativeSpread(2.5),
        relative: false,
        module: { law: 'truncated-normal', sd: 0.03, lower: -0.1, upper: 0.1 },
      },
      underVoltageReleaseV: relativeSpread(2.9),
      overCurrentChargeA: relativeSpread(100),
      overCurrentDischargeA: relativeSpread(100),
      bleedA: relativeSpread(0.05),
      bleedStartV: relativeSpread(3.45),
      ageingRate: {
        nominal: 1,
        relative: false,
        lot: { law: 'fixed' },
        module: { law: 'fixed' },
        cell: { law: 'fixed' },
      },
      temperatureOffsetK: { ...relativeSpread(0), relative: false },
      refusalBelowK: { ...relativeSpread(273.15), relative: false },
      refusalReleaseK: { ...relativeSpread(278.15), relative: false },
    },
    correlations: [{ level: 'module', of: ['capacityAh', 'resistanceOhm'], rho: -0.3 }],
    cell: {
      ocv: 0,
      polarisation: [
        { resistanceOhm: 0.0004, timeConstantS: 60 },
        { resistanceOhm: 0.0006, timeConstantS: 1800 },
      ],
      hysteresisV: 0.0075,
      hysteresisRate: 60,
    },
    bms: {
      overVoltageDelayS: 2,
      overVoltageReleaseHoldS: 2,
      underVoltageDelayS: 2,
      underVoltageReleaseHoldS: 60,
      underVoltageReleaseOnCharge: false,
      overCurrent: {
        delayS: 10,
        opens: 'path',
        retryS: 60,
        lockAfterTrips: null,
        lockWindowS: 3600,
        lock: 'opposite-current',
      },
      forwardDropV: 0.7,
      recloseA: 1,
      recloseDelayS: 0.1,
      bleed: { rule: 'above-lowest', when: 'always', stopBelowStartV: 0.02, deltaV: 0.01 },
      asleepA: 1e-4,
      asleepAfterS: 86400,
    },
    ...changes,
  };
}

/** A stock whose changed quantities stand beside those of `inventedStock`. */
export function stockWith(
  quantities: Partial<PopulationStock['quantities']>,
  changes: Partial<PopulationStock> = {},
): PopulationStock {
  return inventedStock({ quantities: { ...inventedStock().quantities, ...quantities }, ...changes });
}

/** The quantities of `inventedStock` with every level fixed. */
export function withoutSpread(): PopulationStock['quantities'] {
  const { quantities } = inventedStock();
  const fixed = Object.entries(quantities).map(([name, { nominal }]) => [name, relativeSpread(nominal)]);
  return { ...quantities, ...Object.fromEntries(fixed) };
}

/** A study around `inventedStock`, without candidates: sampling reads none. */
export function inventedStudy(changes: Partial<Study> = {}): Study {
  return {
    format: 1,
    title: 'Invented',
    seed: '4711',
    instances: 512,
    blockSize: 32,
    plan: 'independent',
    cycles: 180,
    confidenceFraction: 0.95,
    driftLimitFraction: 0.1,
    ocvTables: [],
    stocks: [inventedStock()],
    duty: {
      kind: 'phases',
      cycleS: 86400,
      parts: [],
      loadFactor: { nominal: 1, relative: true, bank: { law: 'normal', sd: 0.05 } },
      chargeFactor: { nominal: 1, relative: true, bank: { law: 'normal', sd: 0.05 } },
    },
    candidates: [],
    reference: 'strings',
    acceptance: [],
    ...changes,
  };
}
