import { describe, expect, it } from 'vitest';
import { wiringLossOf, wiringLossW } from '../../src/bank/wiring-loss.js';

const chain = (from: number, to: number, module: number, ohm: number) => ({ from, to, modules: [module], ohm });

describe('heat in the wiring', () => {
  it('of strings in parallel is that of their leads', () => {
    const loss = wiringLossOf({ nodes: 2, chains: [chain(0, 1, 0, 0.001), chain(0, 1, 1, 0.002)], links: [] });
    // By hand: 0.001 x 400 + 0.002 x 100.
    expect(wiringLossW(loss, Float64Array.of(20, -10))).toBeCloseTo(0.6, 14);
    expect([...loss.busShare]).toEqual([1, 1]);
  });

  it('of a cross-link is that of the difference of the currents above and below', () => {
    // 2S2P: taps 2 and 3 tied by 2 mOhm.
    const chains = [chain(0, 2, 0, 0.001), chain(2, 1, 1, 0.001), chain(0, 3, 2, 0.001), chain(3, 1, 3, 0.001)];
    const loss = wiringLossOf({ nodes: 4, chains, links: [{ from: 2, to: 3, ohm: 0.002, isLink: true }] });
    // By hand: 14 A come down to tap 2, 10 A go on, 4 A pass the link: 0.001 (100 + 196 + 144 + 64) + 0.002 x 16.
    expect(wiringLossW(loss, Float64Array.of(10, 14, 12, 8))).toBeCloseTo(0.504 + 0.032, 12);
    expect([...loss.busShare]).toEqual([0, 1, 0, 1]);
  });

  it('of bars along the bus is that of the currents that pass them', () => {
    // Two modules on rails of 1 mOhm, taken off at the first: the second's 10 A pass both bars.
    const chains = [chain(0, 1, 0, 0), chain(2, 3, 1, 0)];
    const links = [
      { from: 0, to: 2, ohm: 0.001, isLink: false },
      { from: 1, to: 3, ohm: 0.001, isLink: false },
    ];
    const loss = wiringLossOf({ nodes: 4, chains, links });
    expect(wiringLossW(loss, Float64Array.of(30, 10))).toBeCloseTo(0.2, 12);
    expect([...loss.busShare]).toEqual([1, 1]);
  });
});
