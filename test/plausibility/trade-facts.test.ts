import { describe, expect, it } from 'vitest';
import { sampleBefore, traceStudy } from './run-study.js';

// What trade practice says of whole modules and banks, without a source; further such facts are in the other checks.

describe('a 12.8 V module', () => {
  const trace = traceStudy(
    `motleybank: 1
instances: 1
cycles: 1
stock:
  house:
    defaults: {capacity_Ah: 100, arrival_charge_percent: 50}
    modules: {A1: {}}
bank: {charger: {absorption_V: 14.4}}
duty: {phases: [{rest_h: 1}, {charge: to-full, at_most_h: 10}]}
candidates:
  strings: {wiring: strings, modules: [[A1]]}
`,
    { everyS: 60 },
  );

  it('has four cells of about 3.2 V', () => {
    // Nominal; half charged and at rest a cell stands a little above it, at 3.3 V.
    const cells = trace.samples[0]?.modules[0]?.cellV ?? [];
    expect(cells).toHaveLength(4);
    for (const volts of cells) expect(Math.abs(volts - 3.25)).toBeLessThan(0.1);
  });

  it('ends its charge near 14.4 V, full, without its BMS', () => {
    expect(trace.events.map(({ kind }) => kind)).toEqual(['charge-ended']);
    const { busV, modules } = sampleBefore(trace, trace.events[0]?.timeS ?? 0);
    expect(Math.abs(busV - 14.4)).toBeLessThan(0.05);
    expect(Math.min(...(modules[0]?.charge ?? [0]))).toBeGreaterThan(0.98);
  });
});

describe('a newer and an older string in parallel', () => {
  it('share so that the stronger gives more at first and less later in the discharge', () => {
    // By hand, ohmic: 4 x 0.8 + 2.8 + 1.5 = 7.5 against 4 x 1.2 + 4.3 = 9.1 mOhm, so 0.548 of the current at first.
    // Once polarised 11.5 against 15.1 mOhm: 102 x 11.5 is less than 92 x 15.1 Ah mOhm, so the newer one runs ahead in
    // charge fraction and falls behind in current where the curve bends down.
    const { samples } = traceStudy(
      `motleybank: 1
instances: 1
cycles: 1
stock:
  house:
    defaults: {rated_Ah: 100, arrival_charge_percent: 100}
    modules:
      newer: {capacity_Ah: 102}
      older: {capacity_Ah: 92, cell_resistance_mOhm: 1.2}
bank: {load: {disconnect_V: null}}
duty: {phases: [{discharge_A: 80, for_h: 2.4}]}
candidates:
  strings: {wiring: strings, modules: [[newer], [older]]}
`,
      { everyS: 60 },
    );
    const served = samples.filter(
      ({ servedW, modules }) => servedW > 0 && modules.every((module) => !module.dischargeOpen),
    );
    const share = served.map(({ modules }) => (modules[0]?.currentA ?? Number.NaN) / -80);
    expect(share[0]).toBeCloseTo(9.1 / 16.6, 2);
    expect(Math.min(...share.slice(0, 60))).toBeGreaterThan(0.54);
    const crossing = share.findIndex((newer) => newer < 0.5);
    expect(crossing).toBeGreaterThan(share.length / 2);
    expect(Math.min(...share.slice(crossing))).toBeLessThan(0.48);
  });
});
