import { describe, expect, it } from 'vitest';
import { missingAh, sampleBefore, traceStudy } from './run-study.js';

const BLEED_A = 0.05;
const DAYS = 60;

/** A pair that goes to and fro between 80 and 40 % for sixty days, one BMS drawing 2 mA more; then a charge to full. */
const TRACE = traceStudy(
  `motleybank: 1
instances: 1
cycles: ${DAYS + 4}
stock:
  house:
    defaults:
      capacity_Ah: 100
      leakage_mA: 0
      coulombic_efficiency: 1
      arrival_charge_percent: 80
      bms: {bleed: {rule: each, current_mA: ${1000 * BLEED_A}}}
    modules: {A1: {standby_mA: 0}, A2: {standby_mA: 2}}
bank: {charger: {limit_A: 10, absorption_V: 28.8, until: {tail_A: 0}}}
duty:
  parts:
    - {name: partial, repeat: ${DAYS}, phases: [{discharge_A: 10, for_h: 4}, {rest_h: 8}, {charge_for_h: 4}, {rest_h: 8}]}
    - {name: full, repeat: 4, phases: [{charge_for_h: 24}]}
candidates:
  strings: {wiring: strings, modules: [[A1, A2]]}
`,
  { everyS: 600 },
);
const DAY_S = 86_400;

function driftAhBefore(timeS: number): number {
  const [first, second] = missingAh(TRACE.bank, sampleBefore(TRACE, timeS + 1));
  return (second ?? Number.NaN) - (first ?? Number.NaN);
}

describe('sixty days between 40 and 80 % of charge', () => {
  const trips = TRACE.events.filter(({ kind }) => kind === 'over-voltage-trip');
  const firstTripS = trips[0]?.timeS ?? Number.NaN;

  it('let a standby difference of 2 mA grow to 2.88 Ah, the same every day', () => {
    // By hand: 2 mA x 24 h = 0.048 Ah a day, x 60 = 2.88 Ah.
    for (let day = 1; day <= DAYS; day++) expect(driftAhBefore(day * DAY_S)).toBeCloseTo(0.048 * day, 6);
  });

  it('pass without a trip and without a full charge', () => {
    expect(TRACE.events.filter(({ timeS }) => timeS <= DAYS * DAY_S)).toEqual([]);
    for (const { cycle, modules } of TRACE.samples) {
      if (cycle <= DAYS) expect(Math.max(...modules.flatMap(({ charge }) => charge))).toBeLessThan(0.81);
    }
  });

  it('then end the first full charge by over-voltage with the other module about 2.9 Ah short', () => {
    // By hand: 2.88 Ah; 10 A through 1.8 mOhm a cell leave the first one 18 mV or 0.05 Ah from full too.
    expect(firstTripS).toBeGreaterThan(DAYS * DAY_S);
    expect(trips[0]?.module).toBe(0);
    const [fuller, emptier] = missingAh(TRACE.bank, sampleBefore(TRACE, firstTripS));
    expect(fuller).toBeLessThan(0.1 + (10 * 600) / 3600);
    expect((emptier ?? Number.NaN) - (fuller ?? Number.NaN)).toBeCloseTo(2.88, 1);
  });

  it('take the bleed current its time to make good, 2.9 Ah / 50 mA or more', () => {
    // By hand: nothing but the bleed of the fuller module closes the gap, at most 50 mA; it began below the trip.
    const bledFromS = TRACE.samples.find(({ modules }) => modules[0]?.bleeding.includes(true))?.timeS ?? Number.NaN;
    const after = TRACE.samples.filter(({ timeS }) => timeS > bledFromS);
    expect(after.length).toBeGreaterThan(100);
    for (const { timeS } of after) {
      const bledAh = (BLEED_A * (timeS - bledFromS + 600)) / 3600;
      expect(driftAhBefore(timeS)).toBeGreaterThan(2.88 - bledAh);
    }
    // It is nearly made good at the end, so the bound has been tested; the last tenth stays, since the other module
    // bleeds by then too.
    expect(driftAhBefore((DAYS + 4) * DAY_S)).toBeLessThan(0.4);
  });
});
