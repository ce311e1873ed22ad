import { describe, expect, it } from 'vitest';
import { explicitOf, populationOf, read, studyOf, studyWithStock } from './study-under-test.js';

describe('a stock like another', () => {
  const barn = `  barn:
    like: house
    modules: [B1]
    capacity_Ah: {nominal: 88, module_sd: 2}
    bms:
      bleed: {rule: none}
`;
  const text = studyWithStock(
    [
      'rated_Ah: 100',
      'grade: mixed-purchase',
      'capacity_Ah: {nominal: 101, module_sd_percent: 1, cell_sd_percent: 0.4}',
      'bms: {bleed: {rule: each, start_V: 3.42, current_mA: 60}, reclose_A: null}',
    ],
    barn,
  );
  const stock = populationOf(studyOf(text), 'barn');

  it('copies key by key, deep, and what it writes itself wins', () => {
    expect(stock.bms.bleed.rule).toBe('none');
    expect(stock.quantities.bleedStartV.nominal).toBe(3.42);
    expect(stock.quantities.bleedA.nominal).toBe(0.06);
    expect(stock.bms.recloseA).toBeNull();
    expect(stock.ratedAh).toBe(100);
    expect(stock.quantities.standbyA.nominal).toBe(0.008);
  });

  it('replaces one level of a spread whatever way the other wrote it', () => {
    // 2 Ah between modules and 0.4 % of 88 Ah between cells: mixed units become amounts, 0.352 Ah by hand.
    const { capacityAh } = stock.quantities;
    expect(capacityAh.relative).toBe(false);
    expect(capacityAh.module).toEqual({ law: 'normal', sd: 2 });
    expect(capacityAh.cell).toMatchObject({ law: 'normal' });
    expect('sd' in capacityAh.cell && capacityAh.cell.sd).toBeCloseTo(0.352, 12);
  });

  it('keeps its own modules and tells where values come from', () => {
    expect(stock.moduleIds).toEqual(['B1']);
    const result = read(text);
    const origin = result.kind === 'read' && result.origins.find(({ path }) => path === 'stock.barn.bms.bleed.start_V');
    expect(origin).toMatchObject({ value: '3.42', unit: 'V', source: 'like house' });
  });
});

describe('a stock', () => {
  it('is rated at its nominal capacity where no label is given', () => {
    expect(populationOf(studyOf(studyWithStock(['capacity_Ah: {nominal: 120}'])), 'house').ratedAh).toBe(120);
  });

  it('stops bleeding 20 mV below its own start unless it says otherwise', () => {
    const gap = (lines: readonly string[]): number =>
      populationOf(studyOf(studyWithStock(['rated_Ah: 100', ...lines])), 'house').bms.bleed.stopBelowStartV;
    expect(gap(['bms: {bleed: {start_V: 3.42}}'])).toBe(0.02);
    expect(gap(['bms: {bleed: {start_V: 3.42, stop_V: 3.37}}'])).toBe(0.05);
  });

  it('may spread every threshold, limit and bleed setting between modules', () => {
    const { quantities } = populationOf(
      studyOf(
        studyWithStock([
          'rated_Ah: 100',
          'bms:',
          '  over_voltage: {release_V: {nominal: 3.45, module_sd: 0.004}}',
          '  under_voltage: {release_V: {nominal: 2.9, lot_sd: 0.01}}',
          '  over_current: {charge_A: {nominal: 100, module_sd_percent: 2}, discharge_A: {nominal: 110, module: {law: uniform, half_width: 5}}}',
          '  bleed: {current_mA: {nominal: 60, module_sd_percent: 5}, start_V: {nominal: 3.42, module: {law: truncated-normal, sd: 0.01, half_width: 0.02}}}',
        ]),
      ),
      'house',
    );
    expect(quantities.overVoltageReleaseV.module).toEqual({ law: 'normal', sd: 0.004 });
    expect(quantities.underVoltageReleaseV.lot).toEqual({ law: 'normal', sd: 0.01 });
    expect(quantities.overCurrentChargeA).toMatchObject({ relative: true, module: { law: 'normal', sd: 0.02 } });
    expect(quantities.overCurrentDischargeA.module).toEqual({ law: 'uniform', halfWidth: 5 });
    expect(quantities.bleedA).toMatchObject({ nominal: 0.06, relative: true, module: { law: 'normal', sd: 0.05 } });
    expect(quantities.bleedStartV.module).toEqual({ law: 'truncated-normal', sd: 0.01, lower: -0.02, upper: 0.02 });
  });
});

describe('modules written down', () => {
  const stock = explicitOf(
    studyOf(`motleybank: 1
ocv:
  bench: {interpolation: linear, charge_fraction: [0, 0.5, 1], V: [2.5, 3.3, 3.5]}
stock:
  bench:
    defaults:
      ocv: bench
      hysteresis_mV: 0
      capacity_Ah: 100
      cell_resistance_mOhm: 0.9
      polarisation: [{mOhm: 0.6, tau_s: 60}]
      leakage_mA: 0
      standby_mA: 0
      coulombic_efficiency: 1
      arrival_charge_percent: 90
      path_resistance_mOhm: 8
      joint_resistance_mOhm: 0
      bms:
        over_voltage: {cell_V: 3.65, release_V: 3.45, delay_s: 0, release_hold_s: 0}
        under_voltage: {cell_V: 2.5, release_V: 2.9, delay_s: 0, release_hold_s: 0}
        over_current: {charge_A: 1000, discharge_A: 1000}
        bleed: {rule: none}
        forward_drop_V: 0
        reclose_A: null
    modules:
      m1: {}
      m2:
        rated_Ah: 100
        capacity_Ah: [96, 97, 98, 99]
        cell_resistance_mOhm: [1, 1.1, 1.2, 1.3]
        polarisation: [{mOhm: 0.6, tau_s: 60}, {mOhm: [0.1, 0.2, 0.3, 0.4], tau_s: 600}]
        leakage_percent_per_month: 7.2
        arrival_charge_percent: [85, 86, 87, 88]
        bms: {over_voltage: {delay_s: 2}}
duty: {phases: [{discharge_A: 50, for_h: 4}]}
candidates:
  one: {wiring: strings, modules: [[m1, m2]]}
`),
    'bench',
  );
  const [first, second] = stock.modules;

  it('share what stands under defaults', () => {
    expect(first).toMatchObject({
      id: 'm1',
      stock: 'bench',
      ratedAh: 100,
      ocv: 1,
      capacityAh: [100, 100, 100, 100],
      resistanceOhm: Array(4).fill(0.9e-3),
      polarisation: [{ timeConstantS: 60, resistanceOhm: Array(4).fill(0.6e-3) }],
      leakageA: [0, 0, 0, 0],
      efficiency: [1, 1, 1, 1],
      arrivalCharge: Array(4).fill(0.9),
      pathResistanceOhm: 0.008,
      standbyA: 0,
    });
    expect(first?.bms).toMatchObject({
      forwardDropV: 0,
      recloseA: null,
      overVoltageDelayS: 0,
      bleed: { rule: 'none' },
    });
  });

  it('have values down to each cell, any number of polarisation pairs and keys of their own inside bms', () => {
    expect(second).toMatchObject({
      capacityAh: [96, 97, 98, 99],
      arrivalCharge: [0.85, 0.86, 0.87, 0.88],
      resistanceOhm: [0.001, 0.0011, 0.0012, 0.0013],
    });
    expect(second?.polarisation[1]).toEqual({ timeConstantS: 600, resistanceOhm: [0.0001, 0.0002, 0.0003, 0.0004] });
    expect(second?.bms).toMatchObject({ overVoltageDelayS: 2, underVoltageDelayS: 0 });
  });

  it('leak a share of capacity per month of 30 days', () => {
    // By hand: 7.2 % of 96 Ah in 720 h is 9.6 mA.
    expect(second?.leakageA[0]).toBeCloseTo(0.0096, 12);
  });
});
