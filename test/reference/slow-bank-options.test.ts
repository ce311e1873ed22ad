import { describe, expect, it } from 'vitest';
import type { ModuleParameters } from '../../src/study/study.js';
import { bankOf } from './bank-of.js';
import { bareModule, noLeads, straightTable } from './bare-module.js';
import { segmentOf } from './duties.js';
import { deviceCurrentA } from './equaliser.js';
import { CHARGER, minutes, runOne, story } from './one-cell.js';
import { simulateSlowBank } from './slow-bank.js';

const kelvin = (celsius: number): number => celsius + 273.15;
const activation = { resistanceJPerMol: 20_000, leakageJPerMol: 39_000 };

describe('temperature', () => {
  it('acts on resistance, leakage and reach of a cell', () => {
    // By hand: U = 3 + z. At -10 degC 20 kJ/mol make 1 mOhm 2.9245 mOhm and z counts from 0.12: 3 + 0.38/0.88; 36 A out.
    const cold = minutes(1, { loadA: 36, ambientK: kelvin(-10) });
    const [sample] = runOne([[cold]], { activation }, {}, {}, [0]).samples;
    expect(sample.busV).toBeCloseTo(3 + 0.38 / 0.88 - 36 * (0.01 + 0.0029245), 5);
    // 10 mA for 100 h at 35 degC, 39 kJ/mol: 1.6662 Ah of 100.
    const warm = segmentOf(100, { ambientK: kelvin(35) });
    const leaky = runOne([[warm]], { activation, leakageA: [0.01] });
    expect(leaky.cycleEndCharge[0][0]).toBeCloseTo(0.5 - 0.016662, 6);
  });

  it('has a BMS refuse charge until it is warmer again', () => {
    const at = (celsius: number) => minutes(10, { chargeW: null, ambientK: kelvin(celsius) });
    const bms = { chargeRefusal: { belowK: kelvin(0), releaseK: kelvin(5) } };
    const run = runOne([[at(-1), at(3), at(5), at(1)]], {}, bms);
    expect(story(run)).toEqual(['0.00 cold-charge-refusal', '1200.00 cold-charge-release']);
    // 20 min of 36 A, of 100 Ah.
    expect(run.cycleEndCharge[0][0]).toBeCloseTo(0.62, 6);
  });
});

describe('ageing', () => {
  /** Capacity left of a module after cycles of the given use, found from what a current makes of its charge. */
  const leftAfter = (hours: number, amps: number, celsius: number, sketch: Partial<ModuleParameters>): number => {
    const ambientK = kelvin(celsius);
    const half = segmentOf(hours / 2, { loadA: amps, ambientK });
    const back = segmentOf(hours / 2, { chargeW: null, ambientK });
    const probe = segmentOf(1, { loadA: 36, ambientK });
    const charger = { ...CHARGER, absorptionV: 6, limitA: amps };
    const run = runOne([[half, back], [probe]], sketch, {}, { charger });
    const [[before], [after]] = run.cycleEndCharge;
    return 0.36 / (before - after);
  };

  it('follows Wang by throughput', () => {
    // Wang et al., J. Power Sources 196 (2011) 3942, the fit at C/2: 4.15915 % after 1000 Ah of a 2.2 Ah cell at 25 degC,
    // that is 454.5 times the capacity; here 0.2 times and a rate of 100.
    const percent = 4.15915 * (0.2 / (1000 / 2.2)) ** 0.552 * 100;
    const ageing = { law: 'wang-2011', rate: 100, initialFadeFraction: 0, resistanceGrowth: 0 } as const;
    expect(100 * (1 - leftAfter(2, 20, 25, { ageing }))).toBeCloseTo(percent, 3);
  });

  it('follows Naumann by time and by cycles', () => {
    // Naumann et al., J. Energy Storage 17 (2018) 153: 0.042516 after a year at 25 degC and half full; J. Power Sources 451
    // (2020) 227666: 4.573002 % after 1000 cycles of 80 % at C/2. Here 100 h at 0.5 and no current, a rate of 10.
    const ageing = { law: 'naumann', rate: 10, initialFadeFraction: 0, resistanceGrowth: 0 } as const;
    const resting = leftAfter(100, 0, 25, { ageing });
    expect(1 - resting).toBeCloseTo(10 * 0.042516 * Math.sqrt(100 / 8760), 5);
    // 1.6 h of 50 A down from 0.9 and back up: one cycle of 80 % is 0.8 equivalent ones, 3.2 h between 0.1 and 0.9.
    const cycled = leftAfter(3.2, 50, 25, { ageing, arrivalCharge: [0.9] });
    const ofTime = 0.042516 * Math.sqrt(3.2 / 8760);
    expect(1 - cycled).toBeCloseTo(10 * (ofTime + 0.04573002 * Math.sqrt(0.8 / 1000)), 4);
  });

  it('goes on from the fade it starts with, and resists more', () => {
    // From 4 % by Wang: (0.04^(1/p) + d^(1/p))^p, of what 96 % are; 1 mOhm grows by twice the loss.
    const ageing = { law: 'wang-2011', rate: 100, initialFadeFraction: 0.04, resistanceGrowth: 2 } as const;
    // 40 Ah through 100 / 0.96 Ah when new.
    const alone = 4.15915 * ((0.2 * 0.96) / (1000 / 2.2)) ** 0.552;
    const fade = (0.04 ** (1 / 0.552) + alone ** (1 / 0.552)) ** 0.552;
    const left = (1 - fade) / 0.96;
    expect(leftAfter(2, 20, 25, { ageing })).toBeCloseTo(left, 6);
  });
});

describe('equalisers', () => {
  const settings = { currentA: 5, startV: 0.02, fullV: 0.1, efficiency: 0.9, standbyA: 0.005, enableV: null };

  it('take nothing up to the start, all from the full difference on, and a share between', () => {
    expect([0.01, 0.06, 0.2, -0.04].map((v) => deviceCurrentA(settings, v))).toEqual([
      0,
      expect.closeTo(2.5, 12),
      5,
      expect.closeTo(-1.25, 12),
    ]);
  });

  /** Two cells in series, the upper 0.4 V higher. */
  const pair = (enableV: number | null) =>
    simulateSlowBank(
      bankOf('pair', {
        modules: [[bareModule('low', { arrivalCharge: [0.3] }), bareModule('high', { arrivalCharge: [0.7] })]],
        cycles: [[segmentOf(0.1)]],
        ocvTables: [straightTable(3, 1)],
        leads: noLeads(1),
        equaliser: { ...settings, enableV },
      }),
      { stepS: 5, nodeLeakS: 0 },
    ).cycleEndCharge[0];

  it('move charge from the higher to the lower module and lose what they must', () => {
    // By hand: 0.1 h at 5 A: the upper gives 5.005 A, the lower gets 4.495 A, of 100 Ah.
    const [low, high] = pair(null);
    expect(low).toBeCloseTo(0.3 + 0.004495, 9);
    expect(high).toBeCloseTo(0.7 - 0.005005, 9);
  });

  it('wait on standby below the voltage from which they work', () => {
    const [low, high] = pair(8);
    expect([low, high]).toEqual([expect.closeTo(0.3 - 5e-6, 12), expect.closeTo(0.7 - 5e-6, 12)]);
  });
});

describe('visits', () => {
  it('bring each module to its own full, and come when they are due', () => {
    const modules = [[bareModule('low', { arrivalCharge: [0.4] }), bareModule('high', { arrivalCharge: [0.6] })]];
    const sketch = {
      modules,
      ocvTables: [straightTable(3, 1)],
      leads: noLeads(1),
      cycles: [[segmentOf(1)], [segmentOf(1)]],
    };
    const charger = { ...CHARGER, absorptionV: 7.6, tailA: 2 };
    const chargeAfter = (
      upkeep: { everyCycles: number } | { everyS: number } | { driftFraction: number },
    ): readonly number[] =>
      simulateSlowBank(bankOf('pair', { ...sketch, charger, upkeep }), { stepS: 60, fineStepS: 5 }).cycleEndCharge[0];
    // By hand: charged at 3.8 V over 11 mOhm down to C/50 = 2 A and 120 s more: U = 3.8 - 0.022 and a little, both alike.
    for (const [low, high] of [
      chargeAfter({ everyCycles: 1 }),
      chargeAfter({ everyS: 3600 }),
      chargeAfter({ driftFraction: 0.19 }),
    ]) {
      expect(low).toBeGreaterThan(0.778);
      expect(low).toBeLessThan(0.78);
      expect(high).toBeCloseTo(low, 5);
    }
    for (const none of [
      chargeAfter({ everyCycles: 2 }),
      chargeAfter({ everyS: 7200 }),
      chargeAfter({ driftFraction: 0.21 }),
    ]) {
      expect(none).toEqual([expect.closeTo(0.4, 6), expect.closeTo(0.6, 6)]);
    }
  });
});
