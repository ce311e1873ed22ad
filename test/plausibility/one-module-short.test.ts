import { describe, expect, it } from 'vitest';
import { missingAh, runStudy, sampleBefore, traceStudy } from './run-study.js';

/** A 24 V pair without bleed or losses, one module 5 Ah short; emptied and charged ten times. */
const STUDY = `motleybank: 1
instances: 1
cycles: 10
stock:
  house:
    defaults:
      capacity_Ah: 100
      standby_mA: 0
      leakage_mA: 0
      coulombic_efficiency: 1
      bms: {bleed: {rule: none}, asleep_mA: 0}
    modules: {short: {arrival_charge_percent: 95}, full: {arrival_charge_percent: 100}}
bank: {charger: {absorption_V: 28.8}, load: {disconnect_V: null}}
duty: {phases: [{discharge_A: 20, for_h: 6}, {rest_h: 1}, {charge: to-full, at_most_h: 10}, {rest_h: 1}]}
candidates:
  strings: {wiring: strings, modules: [[short, full]]}
`;
const [SHORT, FULL] = [0, 1];

describe('a pair with one module 5 Ah short', () => {
  const trace = traceStudy(STUDY);

  it('can use 95.0 Ah', () => {
    // By hand: 100 Ah less the 5 Ah. 20 A through 1.8 mOhm a cell leave 36 mV at either end, worth 0.1 Ah each (slopes
    // 30 and 38 V per unit of charge).
    const [bank] = runStudy(STUDY).strings?.banks ?? [];
    expect(Math.abs((bank?.('usable_capacity_start') ?? 0) - 95)).toBeLessThan(0.3);
    expect(Math.abs((bank?.('usable_capacity') ?? 0) - 95)).toBeLessThan(0.3);
  });

  it('keeps its drift of 5.00 Ah at every hour', () => {
    // Law: one current through both changes no difference of missing charge.
    expect(trace.samples.length).toBeGreaterThan(100);
    for (const sample of trace.samples) {
      const missing = missingAh(trace.bank, sample);
      expect((missing[SHORT] ?? 0) - (missing[FULL] ?? 0)).toBeCloseTo(5, 9);
    }
  });

  it('stops at every charge by its fuller module, at every discharge by its emptier one, never the reverse', () => {
    // Common practice, no source.
    const trips = trace.events
      .filter(({ kind }) => kind.endsWith('trip'))
      .map(({ kind, module }) => `${kind} ${module}`);
    const cycle = [`under-voltage-trip ${SHORT}`, `over-voltage-trip ${FULL}`];
    expect(trips).toEqual(Array.from({ length: 10 }, () => cycle).flat());
  });

  it('stands at about 14.5 against 13.5 V when the fuller module stops a 28.8 V charge', () => {
    // Common practice, no source: the sum cannot reach 28.8 V. A tenth of a volt is what "about" may hide.
    const fine = traceStudy(STUDY.replace('cycles: 10', 'cycles: 1'), { everyS: 20 });
    const trip = fine.events.find(({ kind }) => kind === 'over-voltage-trip');
    const { modules, busV } = sampleBefore(fine, trip?.timeS ?? 0);
    expect(busV).toBeLessThan(28.8);
    expect(modules[FULL]?.terminalV).toBeGreaterThan(14.4);
    expect(modules[FULL]?.terminalV).toBeLessThan(14.65);
    expect(modules[SHORT]?.terminalV).toBeGreaterThan(13.4);
    expect(modules[SHORT]?.terminalV).toBeLessThan(13.7);
  });
});
