import { describe, expect, it } from 'vitest';
import type { BleedSettings, ModuleParameters } from '../../src/study/study.js';
import { runThrough } from './journey-of.js';
import { BENCH, oneCell, seconds } from './one-cell.js';

const HOUR_S = 3600;
const BLEED: BleedSettings = { rule: 'each', when: 'always', stopBelowStartV: 0.02, deltaV: 0.01 };

/** Charge of two cells, U = 3 + z, without any other ohms, after hours of rest or of 2 A: bleed 1 A from 3.5 V. */
function chargeAfter(
  hours: number,
  arrivalCharge: number[],
  bleed: Partial<BleedSettings>,
  charging = false,
  sketch: Partial<ModuleParameters> = {},
) {
  const pair = { capacityAh: [100, 100], resistanceOhm: [0, 0], leakageA: [0, 0], efficiency: [1, 1], arrivalCharge };
  const bank = oneCell(
    [[seconds(hours * HOUR_S, charging ? { chargeW: null } : {})]],
    { ...pair, bleedA: 1, bleedStartV: 3.5, ...sketch },
    { bleed: { ...BLEED, ...bleed } },
    { charger: { ...BENCH, limitA: 2, absorptionV: 9 } },
  );
  return [...runThrough(bank).kernel.state.charge];
}

describe('bleed', () => {
  it('of each cell draws above the start and goes on down to the stop', () => {
    // 1 A for 1 h from 0.6; from 0.51 down to 3.48 V, where it ends; nothing from 0.49.
    expect(chargeAfter(1, [0.6, 0.49], { rule: 'each' })[0]).toBeCloseTo(0.59, 8);
    const [stopped, untouched] = chargeAfter(10, [0.51, 0.49], { rule: 'each' });
    expect(stopped).toBeCloseTo(0.48, 5);
    expect(untouched).toBeCloseTo(0.49, 8);
  });

  it('begins inside a step when charging lifts a cell over the start', () => {
    // 2 A lift 0.49 to 0.50 in half an hour; from there 1 A is left: 0.5 + 0.5 h x 1 A / 100 Ah.
    // The instant is found to a second or so.
    expect(Math.abs(chargeAfter(1, [0.49, 0.49], { rule: 'each' }, true)[0] - 0.505)).toBeLessThan(1e-5);
  });

  it('above the lowest ends at half of delta', () => {
    // 20 mV apart, above 10: it ends 5 mV apart.
    const [high, low] = chargeAfter(10, [0.6, 0.58], { rule: 'above-lowest' });
    expect(high).toBeCloseTo(0.585, 5);
    expect(low).toBeCloseTo(0.58, 8);
    expect(chargeAfter(10, [0.6, 0.591], { rule: 'above-lowest' })[0]).toBeCloseTo(0.6, 8);
  });

  it('while charging stands still otherwise', () => {
    const when = { rule: 'each', when: 'charging' } as const;
    expect(chargeAfter(1, [0.6, 0.6], when)[0]).toBeCloseTo(0.6, 8);
    expect(chargeAfter(1, [0.6, 0.6], when, true)[0]).toBeCloseTo(0.61, 8);
  });

  it('of rule none draws nothing', () => {
    expect(chargeAfter(5, [0.9, 0.6], { rule: 'none' })[0]).toBeCloseTo(0.9, 8);
  });

  it('goes on with the charge path open', () => {
    // 3.6 V trips at 3.55 V after 2 s of 2 A; the cell bleeds 1 A for an hour.
    const tripped = { overVoltageV: 3.55, overVoltageReleaseV: 3 };
    expect(chargeAfter(1, [0.6, 0.49], { rule: 'each' }, true, tripped)[0]).toBeCloseTo(0.59 + 4 / 360_000, 6);
  });

  it('comes off what charges a cell before efficiency does', () => {
    // Per hour and 100 Ah: 0.98 x (2 - 1) A.
    const lossy = { efficiency: [0.98, 0.98] };
    expect(chargeAfter(1, [0.6, 0.6], { rule: 'each' }, true, lossy)[0]).toBeCloseTo(0.6 + 0.0098, 7);
  });
});
