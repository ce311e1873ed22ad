import { describe, expect, it } from 'vitest';
import { missingAh, runStudy, sampleBefore, traceStudy } from './run-study.js';

/** A pair that rests day by day; nothing drains it but its own standby. */
const resting = (cycles: number, defaults: string, [first, second]: readonly [number, number], bank: string): string =>
  `motleybank: 1
instances: 1
cycles: ${cycles}
stock:
  house:
    defaults: {capacity_Ah: 100, leakage_mA: 0${defaults}}
    modules: {A1: {standby_mA: ${first}}, A2: {standby_mA: ${second}}}
bank: {${bank}}
duty: {phases: [{rest_h: 24}]}
candidates:
  strings: {wiring: strings, modules: [[A1, A2]]}
`;

const only = (text: string) => {
  const [bank] = runStudy(text).strings?.banks ?? [];
  if (bank === undefined) throw new RangeError('no bank was simulated');
  return bank;
};

describe('a pair with 2 mA of difference that is visited every 30 days', () => {
  const everyDays = resting(64, '', [5, 7], 'commissioning: each-module-full, upkeep: {every_days: 30}');
  const everyCycles = everyDays.replace('every_days', 'every_cycles');

  it('is 1.44 Ah apart before each visit and what a visit leaves after it', () => {
    // By hand: 2 mA x 720 h, and 48 mAh in the day after a visit. What a visit leaves of it: 2 mA for the few hours on the
    // bench, at most 10 mAh.
    for (const text of [everyDays, everyCycles]) {
      const trace = traceStudy(text);
      const driftAh = (day: number): number => {
        const [first = 0, second = 0] = missingAh(trace.bank, sampleBefore(trace, day * 86_400));
        return second - first;
      };
      // The last sample is an hour before.
      for (const day of [30, 60]) expect(Math.abs(driftAh(day) - (1.44 - 0.002))).toBeLessThan(0.01);
      for (const day of [31, 61]) expect(Math.abs(driftAh(day) - (0.048 - 0.002))).toBeLessThan(0.01);
    }
  });

  it('has two visits in 64 days', () => {
    for (const bank of [only(everyDays), only(everyCycles)]) {
      expect(bank('upkeep_visits')).toBe(2);
      expect(bank('upkeep_visits_per_year')).toBeCloseTo((2 * 365) / 64, 12);
      expect(bank('longest_without_full_charge')).toBeCloseTo(30, 9);
    }
  });

  it('has lost what its standby took, with what visits put back left out', () => {
    // By hand: 12 mA x 240 h at 4 cells of 3.29 V (half full) to 3.46 V (nearly full): 37.9 to 39.9 Wh, while the visit
    // after day 5 puts in a kilowatt-hour.
    const lostWh = -1000 * only(resting(10, '', [5, 7], 'upkeep: {every_cycles: 5}'))('energy_stored');
    expect(lostWh).toBeGreaterThan(37.9);
    expect(lostWh).toBeLessThan(39.9);
  });

  it('is visited on the day its drift passes a limit', () => {
    // By hand: 48 mAh a day pass 1 Ah after 20.8 days, so at the end of days 21, 42 and 63.
    const text = resting(64, '', [5, 7], 'commissioning: each-module-full, upkeep: {at_drift_percent: 1}');
    expect(only(text)('upkeep_visits')).toBe(3);
    const visits = traceStudy(text).events.filter(({ kind }) => kind === 'upkeep-visit');
    expect(visits.map(({ cycle, timeS }) => [cycle, timeS / 86_400])).toEqual([
      [21, 21],
      [42, 42],
      [63, 63],
    ]);
  });

  it('is not visited after the last cycle', () => {
    expect(only(resting(10, '', [5, 7], 'upkeep: {every_cycles: 5}'))('upkeep_visits')).toBe(1);
  });
});

describe('a forgotten bank', () => {
  // By hand: at 10 % and 50 mA asleep or awake, cells reach 2.50 V (empty) after 200 h and 2.0 V, at 30 V per unit below,
  // after 100 Ah x 0.5 / 30 / 50 mA = 33.3 h more: on day 9.7.
  const forgotten = (days: number) =>
    only(resting(days, ', arrival_charge_percent: 10, bms: {asleep_mA: 50}', [50, 50], 'load: {disconnect_V: null}'));

  it('ends with damaged cells when its standby has emptied them', () => {
    expect(forgotten(9)('damaged_cells')).toBe(0);
    expect(forgotten(10)('damaged_cells')).toBe(8);
    expect(forgotten(10)('cell_damaged')).toBe(1);
  });
});

describe('a visit to a bank that a BMS keeps open for good', () => {
  it('clears its lock', () => {
    // 30 A above 20 A: three trips within the hour lock it until someone comes.
    const text = `motleybank: 1
instances: 1
cycles: 4
stock:
  house:
    defaults:
      capacity_Ah: 100
      bms: {over_current: {discharge_A: 20, delay_s: 10, retry_s: 60, lock_after: 3, lock: manual}}
    modules: {A1: {}, A2: {}}
bank: {upkeep: {every_cycles: 2}}
duty: {phases: [{discharge_A: 30, for_h: 1}, {rest_h: 23}]}
candidates:
  strings: {wiring: strings, modules: [[A1, A2]]}
`;
    const { events } = traceStudy(text);
    // Both modules of a string trip at the same instants: no more in cycle 2, again in cycle 3.
    const trips = [1, 2, 3, 4].map(
      (cycle) => events.filter((event) => event.cycle === cycle && event.kind === 'over-current-discharge-trip').length,
    );
    expect(trips).toEqual([6, 0, 6, 0]);
  });
});

describe('a 2S2P bank without spread', () => {
  it('gives back 97 to 99 % of what it takes in', () => {
    // Common practice for LiFePO4 banks at a tenth of their capacity per hour, no source.
    const { strings } = runStudy(`motleybank: 1
instances: 1
cycles: 5
stock:
  house:
    defaults: {capacity_Ah: 100, arrival_charge_percent: 100}
    modules: {A1: {}, A2: {}, B1: {}, B2: {}}
duty: {phases: [{discharge_W: 500, for_h: 6.4}, {charge: to-full, at_most_h: 12}]}
candidates:
  strings: {wiring: strings, modules: [[A1, A2], [B1, B2]]}
`);
    const [bank] = strings?.banks ?? [];
    expect(bank?.('round_trip')).toBeGreaterThan(97);
    expect(bank?.('round_trip')).toBeLessThan(99);
    // Every cycle takes 3.2 kWh.
    expect(bank?.('energy_out')).toBeCloseTo(16, 2);
  });
});
