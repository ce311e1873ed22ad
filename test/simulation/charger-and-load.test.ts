import { describe, expect, it } from 'vitest';
import { CHARGER_AT_POWER, CHARGER_HOLDS } from '../../src/bank/bus.js';
import type { ChargerSettings } from '../../src/study/study.js';
import { runThrough, storyOf } from './journey-of.js';
import { BENCH, CHARGE, DISCHARGE, oneCell, seconds } from './one-cell.js';

/** A bench that holds 4.0 V less 0.2: terminal 3.68 V + 5e-5 t reaches 3.8 V at 2400 s. */
const HOLDING: ChargerSettings = { ...BENCH, absorptionV: 3.8 };
/** Then the current falls as exp(-t / tau), tau = 10 mOhm x 360000 As / 1 V. */
const TAU_S = 3600;

describe('the end of charge', () => {
  it('comes by tail, at absorption and after its hold', () => {
    // 18 A exp(-t / 3600 s) = 6 A after 3600 ln 3 = 3955.0 s; 60 s of hold.
    const charger = { ...HOLDING, tailA: 6 };
    const bank = oneCell([[seconds(36_000, { ...CHARGE, endsWhenCharged: true })]], {}, {}, { charger });
    const endS = 2400 + TAU_S * Math.log(3) + 60;
    const [end, ...more] = storyOf(bank);
    expect(more).toEqual([]);
    // The tail current moves by 1.7 mA/s: charge to 1e-5 is worth a second or two.
    expect(Math.abs(Number.parseFloat(end) - endS)).toBeLessThan(2);
    expect(end).toMatch(/ charge-ended$/);
    const journey = runThrough(bank);
    expect(Math.abs(journey.kernel.nowS - endS)).toBeLessThan(2);
    // Missing to 3.8 V of OCV: the current times 10 mOhm.
    expect(journey.kernel.state.charge[0]).toBeCloseTo(0.8 - 0.01 * 6 * Math.exp(-60 / TAU_S), 4);
  });

  it('does not come by a small current below absorption', () => {
    // 0.5 A never reaches 0.995 of absorption.
    const charger = { ...HOLDING, limitA: 0.5, tailA: 6 };
    expect(storyOf(oneCell([[seconds(3600, CHARGE)]], {}, {}, { charger }))).toEqual([]);
  });

  it('comes by time at absorption', () => {
    // 0.995 x 3.8 = 3.781 V at 2020 s; 600 s.
    const charger = { ...HOLDING, absorptionS: 600 };
    expect(storyOf(oneCell([[seconds(9000, CHARGE)]], {}, {}, { charger }))).toEqual(['2620.0 charge-ended']);
  });

  it('comes by tail at zero current when every charge path is open', () => {
    // Trip at 640 s (3.518 + 5e-5 t = 3.55 V), no delay: the charger holds 3.8 V at no current; 60 s.
    const sketch = { overVoltageV: 3.55, overVoltageReleaseV: 3 };
    const charger = { ...HOLDING, tailA: 6 };
    const story = storyOf(oneCell([[seconds(9000, CHARGE)]], sketch, { overVoltageDelayS: 0 }, { charger }));
    expect(story).toEqual(['640.0 over-voltage-trip', '700.0 charge-ended']);
  });

  it('is followed by float', () => {
    // At 2620 s U = 3.6 + ... below 3.7 V: float goes on charging towards 3.7 V with tau 3600 s.
    const charger = { ...HOLDING, absorptionS: 600, floatV: 3.7 };
    const { kernel } = runThrough(oneCell([[seconds(2620 + 20 * TAU_S, CHARGE)]], {}, {}, { charger }));
    expect(kernel.bus.bankV).toBeCloseTo(3.7, 9);
    expect(kernel.bus.regime).toBe(CHARGER_HOLDS);
    expect(kernel.state.charge[0]).toBeCloseTo(0.7, 4);
  });

  it('is followed by nothing without float', () => {
    const charger = { ...HOLDING, absorptionS: 600 };
    const { kernel } = runThrough(oneCell([[seconds(9000, CHARGE)]], {}, {}, { charger }));
    expect(Math.abs(kernel.bus.bankA)).toBeLessThan(1e-5);
  });
});

describe('the restart of charge', () => {
  const ended = [seconds(3000, CHARGE)];

  it('comes with every cycle', () => {
    const charger = { ...HOLDING, absorptionS: 600 };
    const story = storyOf(oneCell([ended, ended], {}, {}, { charger }));
    expect(story.slice(0, 2)).toEqual(['2620.0 charge-ended', '3000.0 charge-restart']);
  });

  it('waits for a voltage, and for power to charge with', () => {
    // U = 3.631 V at the end of charge and 3.481 V after 3000 s of 18 A; the terminal then stands at 3.301 V under load.
    const second = [seconds(3000, DISCHARGE), seconds(60), seconds(60, { ...CHARGE, ...DISCHARGE })];
    const story = (restartV: number): string[] => {
      const charger: ChargerSettings = { ...HOLDING, absorptionS: 600, restart: 'below-voltage', restartV };
      return storyOf(oneCell([ended, second], {}, {}, { charger }));
    };
    expect(story(3.29)).toEqual(['2620.0 charge-ended']);
    expect(story(3.31)).toEqual(['2620.0 charge-ended', '6060.0 charge-restart']);
  });
});

describe('charger and load together', () => {
  /** (E + sqrt(E^2 + 4 R P)) / 2 with E 3.5 V, R 10 mOhm. */
  const atPowerV = (powerW: number): number => (3.5 + Math.sqrt(3.5 ** 2 + 0.04 * powerW)) / 2;

  it('share a power: the load first, the bank what is left or missing', () => {
    for (const [loadW, chargeW] of [
      [20, 50],
      [60, 25],
    ]) {
      const { bus } = runThrough(oneCell([[seconds(0, { loadW, chargeW })]])).kernel;
      expect(bus.regime).toBe(CHARGER_AT_POWER);
      expect(bus.bankV).toBeCloseTo(atPowerV(chargeW - loadW), 7);
    }
  });

  it('are scaled by the factors of the bank', () => {
    const bank = oneCell([[seconds(0, { loadW: 20, chargeW: 50 })]], {}, {}, { loadFactor: 1.1, chargeFactor: 0.8 });
    expect(runThrough(bank).kernel.bus.bankV).toBeCloseTo(atPowerV(40 - 22), 7);
  });
});

describe('a load', () => {
  it('is lost beyond what the bank can carry, and comes back with 2 % to spare', () => {
    // 3.5^2 / 40 mOhm = 306.25 W; 303 W are within 2 % of it (300.2 W), 299 W are not.
    const segments = [seconds(60, { loadW: 310 }), seconds(60, { loadW: 303 }), seconds(60, { loadW: 299 })];
    expect(storyOf(oneCell([segments]))).toEqual(['0.0 load-lost', '120.0 load-back']);
  });

  it('disconnects after its delay below a voltage and comes back after the same above another', () => {
    // Terminal 3.32 - 5e-5 t reaches 3.3 V at 400 s, 10 s more; at rest U = 3.4795 V is above 3.479 V, 10 s; the load then
    // brings 3.2995 V, 10 s more; U = 3.479 V - 10 x 5e-5 V stays below.
    const load = { disconnectV: 3.3, disconnectDelayS: 10, reconnectV: 3.4792 };
    const story = storyOf(oneCell([[seconds(1200, DISCHARGE)]], {}, {}, { load }));
    expect(story).toEqual(['410.0 load-disconnect', '420.0 load-reconnect', '430.0 load-disconnect']);
  });

  it('needs the delay without a break to disconnect', () => {
    const load = { disconnectV: 3.3, disconnectDelayS: 10, reconnectV: 3.4 };
    const segments = [seconds(408, DISCHARGE), seconds(5), seconds(8, DISCHARGE), seconds(5), seconds(20, DISCHARGE)];
    expect(storyOf(oneCell([segments], {}, {}, { load }))).toEqual(['436.0 load-disconnect']);
  });
});
