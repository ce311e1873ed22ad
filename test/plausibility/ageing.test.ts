import { describe, expect, it } from 'vitest';
import { calendarFactor } from '../../src/bank/naumann-2018.js';
import { cycleFactor } from '../../src/bank/naumann-2020.js';
import { runStudy } from './run-study.js';

const CYCLES = 3650;
const HOUR_S = 3600;

describe('ten years of daily cycles of a pair that ages', () => {
  const { strings } = runStudy(`motleybank: 1
instances: 1
cycles: ${CYCLES}
stock:
  house: {modules: [A1, A2], rated_Ah: 100, ageing: {law: naumann}}
bank: {charger: {limit_A: 20}}
duty: {phases: [{discharge_A: 10, for_h: 5}, {rest_h: 5}, {charge: to-full, at_most_h: 6}, {rest_h: 8}]}
candidates:
  strings: {wiring: strings, modules: [[A1, A2]]}
`);
  const of = strings?.banks[0] ?? (() => Number.NaN);

  it('take what lies between the laws of a day milder and of one harder than any of them', () => {
    // By hand: 50 Ah a day are 0.48 to 0.5 of a new cell of about 102 Ah and 0.48 to 0.65 of one that has faded; the cell
    // stands at 0.75 to 1 on average and is charged at 0.1 to 0.2 C; a day has 20 to 24 h.
    const fadeOf = (charge: number, hours: number, ratePerH: number, depth: number, perDay: number): number =>
      calendarFactor(298.15, charge) * Math.sqrt(CYCLES * hours * HOUR_S) +
      cycleFactor(ratePerH, depth) * Math.sqrt(CYCLES * perDay);
    expect(of('capacity_fade') / 100).toBeGreaterThan(fadeOf(0.75, 20, 0.1, 0.48, 0.48));
    expect(of('capacity_fade') / 100).toBeLessThan(fadeOf(1, 24, 0.2, 0.65, 0.5));
  });

  it('leave no more to use than the cells have', () => {
    // Capacity of 102 Ah when new, spread by 0.5 and 0.3 % between modules and cells: within 3 % of it.
    expect(of('usable_capacity')).toBeLessThan(1.03 * 102 * (1 - of('capacity_fade') / 100));
    expect(of('capacity_fade_worst_cell')).toBeGreaterThanOrEqual(of('capacity_fade'));
  });
});
