import { describe, expect, it } from 'vitest';
import type { ChargerSettings } from '../../src/study/study.js';
import { CHARGER, minutes, runOne, story } from './one-cell.js';

describe('charger and load', () => {
  it('taper at the ceiling and end by tail', () => {
    // Terminal 3.896 + 1e-4 t reaches 4.0 at 1040 s; then I = 36 exp(-(t - 1040)/tau), tau = 11 mOhm x 3.6e5 As / 1 V
    // = 3960 s; 10 A after 3960 ln 3.6 s, held for 120 s.
    const charger = { ...CHARGER, absorptionV: 4, tailA: 10 };
    const cycles = [[minutes(300, { chargeW: null, endsWhenCharged: true })]];
    const run = runOne(cycles, {}, {}, { charger }, [3000]);
    expect(run.cycleEndS[0]).toBeCloseTo(1160 + 3960 * Math.log(3.6), 2);
    expect(run.samples[0].bankA).toBeCloseTo(36 * Math.exp(-1960 / 3960), 4);
    expect(run.samples[0].busV).toBe(4);
  });

  it('end a segment at the end of charge even where the rest voltage asks for charge again', () => {
    const charger = { ...CHARGER, absorptionV: 4, tailA: 10, restartV: 3.99 };
    const run = runOne([[minutes(300, { chargeW: null, endsWhenCharged: true })]], {}, {}, { charger });
    expect(run.events.map((event) => event.kind)).toEqual(['charge-ended']);
    expect(run.cycleEndS[0]).toBeCloseTo(1160 + 3960 * Math.log(3.6), 2);
  });

  it('end by time at absorption, float, and restart below a voltage', () => {
    // From 3.98 V (0.995 of 4.0) at 840 s on, 600 s; U is 3.644 V then, and current flows on at 3.7 V. Without float
    // 36 A out from 2400 s leave U at 3.584 V, and charging restarts as soon as charge is at hand, at 3000 s.
    const charger: ChargerSettings = {
      ...CHARGER,
      absorptionV: 4,
      absorptionS: 600,
      floatV: 3.7,
      restart: 'below-voltage',
      restartV: 3.6,
    };
    const cycles = [[minutes(40, { chargeW: null })], [minutes(10, { loadA: 36 }), minutes(5, { chargeW: null })]];
    const run = runOne(cycles, {}, {}, { charger }, [2000]);
    expect(story(run)).toEqual(['1440.00 charge-ended']);
    expect(run.samples[0].busV).toBe(3.7);
    const low = runOne(cycles, {}, {}, { charger: { ...charger, floatV: null } });
    expect(story(low)).toEqual(['1440.00 charge-ended', '3000.00 charge-restart']);
  });

  it('feed the load first and share a power between it and the bank', () => {
    // V = (E + sqrt(E^2 + 4 R P)) / 2 with E 3.5 V, R 11 mOhm: P = 60 - 20 in, P = -100 out.
    const voltage = (powerW: number): number => (3.5 + Math.sqrt(3.5 ** 2 + 4 * 0.011 * powerW)) / 2;
    const both = runOne([[minutes(1, { loadW: 20, chargeW: 60 })]], {}, {}, {}, [0]);
    expect(both.samples[0].busV).toBeCloseTo(voltage(40), 10);
    const out = runOne([[minutes(1, { loadW: 100 })]], {}, {}, { loadFactor: 1 }, [0]);
    expect(out.samples[0].busV).toBeCloseTo(voltage(-100), 10);
    const factors = runOne(
      [[minutes(1, { loadW: 10, chargeW: 100 })]],
      {},
      {},
      { loadFactor: 2, chargeFactor: 0.6 },
      [0],
    );
    expect(factors.samples[0].busV).toBeCloseTo(voltage(40), 10);
  });

  it('lose an impossible load and take it back with 2 % to spare', () => {
    // E^2 / 4R = 278.4 W at most; 275 W is within 2 % of it, 270 W is not.
    const cycles = [[minutes(1, { loadW: 285 }), minutes(1, { loadW: 275 }), minutes(1, { loadW: 270 })]];
    const run = runOne(cycles, {}, {}, {}, [30]);
    expect(story(run)).toEqual(['0.00 load-lost', '120.00 load-back']);
    expect(run.samples[0].bankA).toBeCloseTo(0, 9);
    expect(run.samples[0].busV).toBeCloseTo(3.5, 9);
    expect(run.lostWh).toBeCloseTo(560 / 60, 4);
  });

  it('lose a load at the charge at which it becomes impossible', () => {
    // 270 W can be had down to E = 2 sqrt(R P), R 11 mOhm; there z = E - 3 and the bank rests. From 2 R I = E - s with
    // s = sqrt(E^2 - 4 R P) and dE/dt = -I / Q: t = Q / (4 P) (E^2 + E s - 4 R P ln(E + s)), first minus last E.
    const product = 4 * 0.011 * 270;
    const integral = (e: number): number => {
      const s = Math.sqrt(Math.max(0, e * e - product));
      return (360_000 / (4 * 270)) * (e * e + e * s - product * Math.log(e + s));
    };
    const run = runOne([[minutes(60, { loadW: 270 })]], {});
    expect(run.events.map((event) => event.kind)).toEqual(['load-lost']);
    expect(run.cycleEndCharge[0][0]).toBeCloseTo(Math.sqrt(product) - 3, 5);
    expect(Math.abs(run.events[0].timeS - integral(3.5) + integral(Math.sqrt(product)))).toBeLessThan(0.01);
  });

  it('disconnect below a voltage and reconnect above another, each after the delay', () => {
    // Bus 3.104 - 1e-4 t reaches 3.0 at 1040 s; at rest it stands at U = 3.395, with the load again at 2.999.
    const load = { disconnectV: 3, disconnectDelayS: 10, reconnectV: 3.39 };
    const run = runOne([[minutes(17.9, { loadA: 36 })]], {}, {}, { load });
    expect(story(run)).toEqual(['1050.00 load-disconnect', '1060.00 load-reconnect', '1070.00 load-disconnect']);
    expect(run.lostAh).toBeCloseTo((36 * 14) / 3600, 5);
  });
});
