import { describe, expect, it } from 'vitest';
import type { PopulationStock } from '../../src/study/study.js';
import { populationOf, read, studyOf, studyWithStock } from './study-under-test.js';

const gradeStock = (grade: string, more: readonly string[] = []): PopulationStock =>
  populationOf(studyOf(studyWithStock(['rated_Ah: 100', `grade: ${grade}`, ...more])), 'house');

// The table of default spreads: own choice, documented in the model pages.
const TABLE = {
  'new-same-make': {
    capacity: [1.02, 0.005, 0.003],
    resistance: [1, 0.02, 0.015],
    rho: -0.2,
    leakage: 0.003,
    standby: [0.005, 0.0005],
    efficiency: [0.9998, 5e-5],
    arrival: [0.5, 0.03, 0.003],
    over: [3.65, 0.012, 0.04],
    under: [2.5, 0.03, 0.1],
  },
  'mixed-purchase': {
    capacity: [1.01, 0.01, 0.005],
    resistance: [1, 0.04, 0.02],
    rho: -0.3,
    leakage: 0.003,
    standby: [0.008, 0.003],
    efficiency: [0.9998, 1e-4],
    arrival: [0.5, 0.05, 0.005],
    over: [3.65, 0.02, 0.06],
    under: [2.5, 0.05, 0.15],
  },
  older: {
    capacity: [0.92, 0.03, 0.005],
    resistance: [1.5, 0.06, 0.03],
    rho: -0.7,
    leakage: 0.005,
    standby: [0.015, 0.0015],
    efficiency: [0.9995, 2e-4],
    arrival: [0.5, 0.05, 0.008],
    over: [3.65, 0.02, 0.06],
    under: [2.5, 0.05, 0.15],
  },
} as const;

describe.each(Object.entries(TABLE))('grade %s', (grade, row) => {
  const { quantities, correlations, bms } = gradeStock(grade);

  it('has the capacity and cell resistance of the table, relative to the label', () => {
    const { capacityAh, resistanceOhm } = quantities;
    const [ofRated, capacityModule, capacityCell] = row.capacity;
    const [factor, resistanceModule, resistanceCell] = row.resistance;
    expect(capacityAh.nominal).toBeCloseTo(100 * ofRated, 9);
    expect(resistanceOhm.nominal).toBeCloseTo(0.8e-3 * factor, 9);
    expect(capacityAh.relative && resistanceOhm.relative).toBe(true);
    expect(capacityAh.module).toEqual({ law: 'normal', sd: capacityModule });
    expect(capacityAh.cell).toEqual({ law: 'normal', sd: capacityCell });
    expect(resistanceOhm.module).toEqual({ law: 'normal', sd: resistanceModule });
    expect(resistanceOhm.cell).toEqual({ law: 'normal', sd: resistanceCell });
    expect(correlations).toEqual([{ level: 'module', of: ['capacityAh', 'resistanceOhm'], rho: row.rho }]);
  });

  it('has the losses of the table', () => {
    const { leakagePerMonth, standbyA, efficiency } = quantities;
    expect(leakagePerMonth.nominal).toBe(row.leakage);
    expect(leakagePerMonth.cell).toEqual({ law: 'lognormal', sd: 0.3 });
    expect([standbyA.nominal, standbyA.module]).toEqual([row.standby[0], { law: 'lognormal', sd: row.standby[1] }]);
    expect(efficiency.nominal).toBe(row.efficiency[0]);
    expect(efficiency.module).toMatchObject({ law: 'truncated-normal', sd: row.efficiency[1] });
    // Cut where it would pass 1.
    expect(efficiency.module).toMatchObject({
      upper: Math.min(5 * row.efficiency[1], 1e-4 * Math.round(1e4 * (1 - row.efficiency[0]))),
    });
  });

  it('arrives and is protected as in the table', () => {
    const { arrivalCharge, overVoltageV, underVoltageV, overVoltageReleaseV, underVoltageReleaseV } = quantities;
    expect(arrivalCharge.nominal).toBe(row.arrival[0]);
    expect(arrivalCharge.relative).toBe(false);
    expect([arrivalCharge.module, arrivalCharge.cell]).toEqual([
      { law: 'normal', sd: row.arrival[1] },
      { law: 'normal', sd: row.arrival[2] },
    ]);
    const cut = ([nominal, sd, within]: readonly [number, number, number]) => ({
      nominal,
      module: { law: 'truncated-normal', sd, lower: -within, upper: within },
    });
    expect(overVoltageV).toMatchObject(cut(row.over));
    expect(underVoltageV).toMatchObject(cut(row.under));
    expect([overVoltageReleaseV.nominal, underVoltageReleaseV.nominal]).toEqual([3.45, 2.9]);
    expect([bms.overVoltageDelayS, bms.underVoltageDelayS]).toEqual([2, 2]);
  });

  it('has the series resistances and limits that all grades share', () => {
    const { pathResistanceOhm, jointResistanceOhm, overCurrentChargeA, overCurrentDischargeA } = quantities;
    expect([pathResistanceOhm.nominal, jointResistanceOhm.nominal]).toEqual([1.5e-3, 1.3e-3]);
    expect([pathResistanceOhm.module, jointResistanceOhm.module]).toEqual(
      Array(2).fill({ law: 'lognormal', sd: 0.15 }),
    );
    expect([overCurrentChargeA.nominal, overCurrentDischargeA.nominal]).toEqual([100, 100]);
    expect(bms.overCurrent.delayS).toBe(10);
  });
});

describe('a grade', () => {
  it('scales with the label: half the capacity has twice the cell resistance', () => {
    const { quantities } = populationOf(studyOf(studyWithStock(['rated_Ah: 50'])), 'house');
    expect(quantities.capacityAh.nominal).toBeCloseTo(51, 9);
    expect(quantities.resistanceOhm.nominal).toBeCloseTo(1.6e-3, 9);
  });

  it('gives the default polarisation in proportion to the resistance', () => {
    // Own choice: 0.4 mOhm / 60 s and 0.6 mOhm / 1800 s beside 0.8 mOhm; times 1.5 for older cells.
    const { polarisation } = gradeStock('older').cell;
    expect(polarisation.map(({ timeConstantS }) => timeConstantS)).toEqual([60, 1800]);
    expect(polarisation[0]?.resistanceOhm).toBeCloseTo(0.6e-3, 9);
    expect(polarisation[1]?.resistanceOhm).toBeCloseTo(0.9e-3, 9);
  });

  it('leaves alone what is written out, part by part', () => {
    const { quantities } = gradeStock('older', ['capacity_Ah: {nominal: 88}', 'standby_mA: {module_sd: 0.5}']);
    expect(quantities.capacityAh).toMatchObject({ nominal: 88, module: { law: 'normal', sd: 0.03 } });
    expect(quantities.standbyA).toMatchObject({ nominal: 0.015, module: { law: 'normal', sd: 0.0005 } });
  });

  it('has no spread left where a number says exactly this', () => {
    const { quantities } = gradeStock('older', ['capacity_Ah: 88']);
    const fixed = { law: 'fixed' };
    expect(quantities.capacityAh).toEqual({ nominal: 88, relative: false, lot: fixed, module: fixed, cell: fixed });
  });

  it('is new-same-make where none is named, and check says so', () => {
    const result = read(studyWithStock(['rated_Ah: 100']));
    const grade = result.kind === 'read' && result.origins.find(({ path }) => path === 'stock.house.grade');
    expect(grade).toMatchObject({ value: 'new-same-make', source: 'default' });
  });

  it('is noted as the origin of what it fills in', () => {
    const result = read(studyWithStock(['rated_Ah: 100', 'grade: older', 'capacity_Ah: {nominal: 88}']));
    const sources = new Map(result.kind === 'read' ? result.origins.map(({ path, source }) => [path, source]) : []);
    expect(sources.get('stock.house.capacity_Ah')).toBe('study');
    expect(sources.get('stock.house.capacity_Ah.module')).toBe('grade older');
    expect(sources.get('stock.house.bms.over_voltage.release_V')).toBe('default');
  });
});
