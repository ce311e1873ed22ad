import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { capacityLeft, fadeAfterCycle, initialFade } from '../../src/bank/cell-ageing.js';
import { fadeAfter } from '../../src/bank/fade-after.js';
import { CALENDAR_EXPONENT, calendarFactor } from '../../src/bank/naumann-2018.js';
import { CYCLE_EXPONENT, cycleFactor } from '../../src/bank/naumann-2020.js';
import { WANG_EXPONENT, wangFactor, wangThroughputAh } from '../../src/bank/wang-2011.js';

const DAY_S = 86_400;
const kelvin = (celsius: number): number => celsius + 273.15;

// Constants of the laws and of the reference values from memory of the papers; the values computed from them apart.

describe('the law of Wang et al. 2011', () => {
  it.each([
    [15, 2.67594],
    [25, 4.15915],
    [45, 9.24568],
    [60, 15.80535],
  ])('takes after 1000 Ah of a 2.2 Ah cell at %d degC %f %%', (celsius, percent) => {
    expect(100 * wangFactor(kelvin(celsius)) * 1000 ** WANG_EXPONENT).toBeCloseTo(percent, 5);
    expect(100 * fadeAfter(0, wangFactor(kelvin(celsius)), WANG_EXPONENT, 1000)).toBeCloseTo(percent, 5);
  });

  it('counts throughput of any cell in capacities of the cell measured', () => {
    // By hand: 10 full cycles of a cell of 2.2 Ah pass 22 Ah one way.
    expect(wangThroughputAh(10)).toBeCloseTo(22, 12);
  });
});

describe('the calendar law of Naumann et al. 2018', () => {
  it.each([
    [25, 0.5, 365, 0.042516],
    [25, 1, 365, 0.067731],
    [40, 0.5, 885, 0.092172],
    [25, 0.5, 3652.5, 0.134493],
  ])('takes at %d degC, charge %f, after %d days %f', (celsius, charge, days, fade) => {
    const factor = calendarFactor(kelvin(celsius), charge);
    expect(fadeAfter(0, factor, CALENDAR_EXPONENT, days * DAY_S)).toBeCloseTo(fade, 6);
  });

  it('lies within a tenth of what Schimpe et al. found for the same cell', () => {
    // Schimpe et al. 2018, J. Electrochem. Soc. 165, A181: 0.039327 at 25 degC, half charge, 365 days (from memory). A
    // time in hours or days in place of seconds would be off by a factor of 60 or 294.
    const fade = fadeAfter(0, calendarFactor(298.15, 0.5), CALENDAR_EXPONENT, 365 * DAY_S);
    expect(Math.abs(fade / 0.039327 - 1)).toBeLessThan(0.1);
  });

  it('takes charge beyond full or empty as that end', () => {
    expect(calendarFactor(298.15, 1.01)).toBe(calendarFactor(298.15, 1));
    expect(calendarFactor(298.15, -0.01)).toBe(calendarFactor(298.15, 0));
  });
});

describe('the cycle law of Naumann et al. 2020', () => {
  it.each([
    [1, 1, 1000, 6.83438],
    [0.5, 0.8, 1000, 4.573002],
    [0.5, 0.8, 5000, 10.225542],
    [0.2, 0.5, 3000, 6.538916],
  ])('takes at %f C, depth %f, after %d full cycles %f %%', (ratePerH, depth, cycles, percent) => {
    expect(100 * fadeAfter(0, cycleFactor(ratePerH, depth), CYCLE_EXPONENT, cycles)).toBeCloseTo(percent, 6);
  });
});

describe('virtual time', () => {
  const amounts = fc.double({ min: 1e-6, max: 1, noNaN: true });

  it('makes one of many increments at constant conditions', () => {
    fc.assert(
      fc.property(amounts, amounts, fc.constantFrom(0.5, 0.552), fc.integer({ min: 2, max: 400 }), (k, x, p, parts) => {
        let fade = 0;
        for (let part = 0; part < parts; part++) fade = fadeAfter(fade, k, p, x / parts);
        // Each part rounds its fade by a few units in the last place.
        expect(Math.abs(fade / (k * x ** p) - 1)).toBeLessThan(1e-15 * 10 * parts);
      }),
      { seed: 1 },
    );
  });

  it('goes on from the equivalent time', () => {
    // By hand: 0.02 at k = 0.01 and p = 0.5 is x' = 4; 5 more: 0.01 x 3 = 0.03.
    expect(fadeAfter(0.02, 0.01, 0.5, 5)).toBeCloseTo(0.03, 14);
  });

  it('never gives capacity back, and takes nothing in no time', () => {
    fc.assert(
      fc.property(
        amounts,
        amounts,
        fc.constantFrom(0.5, 0.552),
        fc.constantFrom(0, 1e-30, 1e-9, 1),
        (fade, k, p, dx) => {
          expect(fadeAfter(fade, k, p, dx)).toBeGreaterThanOrEqual(fade);
          expect(fadeAfter(fade, k, p, 0)).toBe(fade);
        },
      ),
      { seed: 2 },
    );
  });
});

describe('the fade of a cell', () => {
  const USE = {
    durationS: DAY_S,
    equivalentCycles: 0.5,
    meanCharge: 0.5,
    depth: 0.5,
    ratePerH: 0.2,
    temperatureK: 298.15,
  };
  const settings = { initialFadeFraction: 0, resistanceGrowth: 5, rate: 1 };

  it('falls by no cooling', () => {
    for (const law of ['wang-2011', 'naumann'] as const) {
      const ageing = { ...settings, law };
      const warm = fadeAfterCycle(initialFade(ageing), ageing, { ...USE, temperatureK: kelvin(60), durationS: 1e7 });
      const cold = fadeAfterCycle(warm, ageing, { ...USE, temperatureK: kelvin(0) });
      expect(cold.calendar + cold.cycle).toBeGreaterThan(warm.calendar + warm.cycle);
    }
  });

  it('has under naumann two parts that go on by themselves', () => {
    // By the values above: 365 days of half charge 0.042516, and 3000 full cycles of depth 0.5 at 0.2 C 6.538916 %.
    const ageing = { ...settings, law: 'naumann' as const };
    let fade = initialFade(ageing);
    for (let day = 0; day < 365; day++) fade = fadeAfterCycle(fade, ageing, { ...USE, equivalentCycles: 3000 / 365 });
    expect(fade.calendar).toBeCloseTo(0.042516, 6);
    expect(fade.cycle).toBeCloseTo(0.06538916, 8);
    expect(capacityLeft(fade, ageing)).toBeCloseTo(1 - 0.042516 - 0.06538916, 6);
  });

  it('is the faster by its rate, and the slower the further it has come', () => {
    const aged = (rate: number, initialFadeFraction: number): number => {
      const ageing = { law: 'naumann' as const, resistanceGrowth: 5, rate, initialFadeFraction };
      return 1 - capacityLeft(fadeAfterCycle(initialFade(ageing), ageing, USE), ageing);
    };
    expect(aged(2, 0)).toBeCloseTo(2 * aged(1, 0), 14);
    expect(aged(0, 0)).toBe(0);
    // By hand, calendar 1.2571e-5 x 0.60225 x sqrt(86400) = 2.2254e-3; cycle 0.01 x 0.1097 x (4.0253 x -0.001 + 1.0923) x
    // sqrt(0.5) = 8.4414e-4. From 0.1 in equal parts: 2 (0.05) + (2.2254e-3^2 + 8.4414e-4^2) / (2 x 0.05) = 0.1 +
    // 5.665e-5, of 0.9 that are left 6.294e-5, less 2e-8 by the curve.
    expect(aged(1, 0)).toBeCloseTo(2.2254e-3 + 8.4414e-4, 7);
    expect(aged(1, 0.1)).toBeCloseTo(6.29e-5, 7);
  });

  it('ends where nothing would be left', () => {
    const ageing = { ...settings, law: 'wang-2011' as const };
    expect(capacityLeft({ calendar: 0, cycle: 1.5 }, ageing)).toBeCloseTo(0.2, 12);
  });
});
