import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { createNetworkCache, currentsInto, effectiveEmfV, networkMap } from '../../src/bank/conduction.js';
import { chainConductanceS, solveNetwork } from '../../src/bank/network.js';
import { moduleBranches } from './module-branches.js';
import { solveNodes } from './nodal-solve.js';
import { chainCase, randomSketch, sketchOf, stateOf, type Wired, wired, wirings } from './random-wiring.js';

/** Chain currents and bus voltage for chain EMFs and a bank current by the map of an all-closed bank. */
function solve({ bank }: Wired, emfV: readonly number[], bankA: number) {
  const { state } = stateOf(bank, [{ mode: 0, dropV: 0, start: 0, emfPerModuleV: 0 }]);
  const point = { map: networkMap(bank, state.conduction, createNetworkCache()), bankA: 0, bankV: 0 };
  const currentA = new Float64Array(emfV.length);
  const settled = { ...point, currentA };
  currentsInto(bank, state, createNetworkCache(), Float64Array.from(emfV), bankA, false, settled);
  return settled;
}

describe('two strings of two, 10 and 12 mOhm above each other and mirrored, 100 A drawn', () => {
  // By hand, with nothing but Ohm and Kirchhoff: the 10 mOhm modules carry x, the others 100 - x, and around the
  // midpoints 12 (100 - x) - 10 x = r (2 x - 100) with the link r in mOhm: x = (1200 + 100 r) / (22 + 2 r).
  // Brand et al., J. Power Sources 334 (2016) 202, treat the same sharing.
  const moduleOhm = [
    [0.01, 0.012],
    [0.012, 0.01],
  ];
  // Leads of a nano-ohm stand for none; they and the 1 µS leaks stay below the digits compared.
  const leadOhm = 1e-9;

  it('share evenly as strings, 11 mOhm together', () => {
    const { currentA, map, bankV } = solve(wired({ wiring: 'strings', moduleOhm, leadOhm }), [24, 24], -100);
    expect([...currentA].map((amps) => Number(amps.toFixed(3)))).toEqual([-50, -50]);
    expect(map.bankOhm).toBeCloseTo(0.011, 7);
    expect(bankV).toBeCloseTo(24 - 1.1, 5);
  });

  it.each([
    [0, 54.545455, 9.090909],
    [0.001, 54.166667, 8.333333],
    [0.01, 52.380952, 4.761905],
    [0.1, 50.45045, 0.900901],
  ])('share by a link of %d Ohm', (ohm, largerA, linkA) => {
    const bank = wired({ wiring: 'cross-linked', moduleOhm, leadOhm, linkOhm: Math.max(ohm, 1e-9) });
    const { currentA, map } = solve(bank, [12, 12, 12, 12], -100);
    const [lower1, upper1, lower2, upper2] = [...currentA].map((amps) => -amps);
    for (const larger of [lower1, upper2]) expect(larger).toBeCloseTo(largerA, 4);
    for (const smaller of [upper1, lower2]) expect(smaller).toBeCloseTo(100 - largerA, 4);
    expect(lower1 - upper1).toBeCloseTo(linkA, 4);
    if (ohm === 0) expect(map.bankOhm).toBeCloseTo(0.010909091, 7);
  });
});

/**
 * Kirchhoff's laws for chain currents: sums at every node, and each link's voltage from the currents that it must carry.
 *
 * @returns largest residual of the sums, in parts of the largest short-circuit current, and of the voltages, V
 */
function kirchhoffResiduals(
  { bank, candidate }: Wired,
  emfV: Float64Array,
  currentA: Float64Array,
  bankA: number,
  bankV: number,
  conductanceS: readonly number[],
) {
  const linked = candidate.wiring === 'cross-linked' && bank.strings > 1 && bank.positions > 1;
  const levels = linked ? bank.positions : 1;
  // Chains are in the order of their first modules: string by string, level by level.
  const at = (string: number, level: number): number => string * levels + level;
  const largestA = Math.max(...emfV.map((volts, i) => volts * conductanceS[i]));
  let worstSum = 0;
  let worstV = 0;
  const tapV = Array.from({ length: bank.strings }, () => 0);
  for (let level = 0; level < levels; level++) {
    for (let string = 0; string < bank.strings; string++) {
      const i = at(string, level);
      tapV[string] += emfV[i] + currentA[i] / conductanceS[i];
    }
    const above = (string: number): number => (level + 1 < levels ? currentA[at(string, level + 1)] : 0);
    if (level + 1 === levels) {
      const out = tapV.reduce((sum, _, string) => sum + currentA[at(string, level)], 0);
      worstSum = Math.max(worstSum, Math.abs(bankA - out));
      for (const volts of tapV) worstV = Math.max(worstV, Math.abs(volts - bankV));
      continue;
    }
    // What reaches a tap from above leaves it below or by the link to the next string.
    let linkA = 0;
    for (let string = 0; string < bank.strings; string++) {
      linkA += above(string) - currentA[at(string, level)];
      if (string + 1 === bank.strings) worstSum = Math.max(worstSum, Math.abs(linkA));
      else worstV = Math.max(worstV, Math.abs(tapV[string] - tapV[string + 1] - candidate.linkOhm * linkA));
    }
  }
  return { sumShare: worstSum / largestA, voltageV: worstV };
}

describe('currents of a bank', () => {
  // Resistances of a real bank times 1e-9 to 1e9. Sums must hold to the rounding of the currents that EMF and
  // resistance alone would drive, voltages to that of the voltages.
  for (const scale of [1e-9, 1e-6, 1e-3, 1, 1e3, 1e6, 1e9]) {
    it(`obey Kirchhoff's laws in every wiring from 1S1P to 4S8P at ${scale} times real resistances`, () => {
      for (const shape of wirings) {
        const random = fc.record({
          sketch: sketchOf(shape, scale),
          emfPerModuleV: fc.array(fc.double({ min: 11, max: 14.5, noNaN: true }), { minLength: 32, maxLength: 32 }),
          perOhmV: fc.double({ min: -0.5, max: 0.5, noNaN: true }),
        });
        fc.assert(
          fc.property(random, ({ sketch, emfPerModuleV, perOhmV }) => {
            const bank = wired(sketch);
            const chains = bank.bank.wiring.chains;
            const emfV = Float64Array.from(chains, ({ modules }, i) => emfPerModuleV[i] * modules.length);
            const bankA = perOhmV / (0.01 * scale);
            const { currentA, bankV } = solve(bank, [...emfV], bankA);
            const conductanceS = chains.map((_, i) => chainConductanceS(0, bank.bank.chainOhm[i]));
            const { sumShare, voltageV } = kirchhoffResiduals(bank, emfV, currentA, bankA, bankV, conductanceS);
            expect(sumShare).toBeLessThan(1e-13);
            expect(voltageV).toBeLessThan(1e-10 * Math.max(1, Math.abs(bankV)));
          }),
          { seed: 51, numRuns: 2 },
        );
      }
    });
  }

  it('are those of the whole graph solved node by node, whatever conducts', () => {
    const random = fc.record({
      sketch: randomSketch(),
      cases: fc.array(chainCase, { minLength: 32, maxLength: 32 }),
      bankA: fc.double({ min: -200, max: 200, noNaN: true }),
    });
    fc.assert(
      fc.property(random, ({ sketch, cases, bankA }) => {
        const { bank, graph } = wired(sketch);
        const { state, emfV } = stateOf(bank, cases);
        const { chains } = bank.wiring;
        const moduleEmfV = new Float64Array(bank.modules);
        for (const [i, { modules }] of chains.entries())
          for (const m of modules) moduleEmfV[m] = emfV[i] / modules.length;
        // Held at a voltage the bus is never far off, even with every chain blocked.
        const bankV = 12.5 * bank.positions + 0.01 * bankA;
        const point = {
          map: networkMap(bank, state.conduction, createNetworkCache()),
          currentA: new Float64Array(emfV.length),
          bankA: 0,
          bankV: 0,
        };
        currentsInto(bank, state, createNetworkCache(), emfV, bankV, true, point);
        const direct = solveNodes(graph, moduleBranches(bank, state, moduleEmfV, bank.pathOhm), { bankV });
        // The reduced network has the leak beside a whole chain, the graph here beside one of its modules.
        const slackA = 1e-4;
        expect(Math.abs(point.bankA - direct.bankA)).toBeLessThan(slackA);
        chains.forEach(({ modules }, i) => {
          for (const m of modules) expect(Math.abs(point.currentA[i] - direct.moduleA[m])).toBeLessThan(slackA);
        });
      }),
      { seed: 52, numRuns: 300 },
    );
  });
});

describe('a network map', () => {
  it('is reciprocal: one chain moves another as that one moves it', () => {
    // Reciprocity of resistor networks: A is symmetric.
    fc.assert(
      fc.property(randomSketch(), fc.array(chainCase, { minLength: 32, maxLength: 32 }), (sketch, cases) => {
        const { bank } = wired(sketch);
        const { state } = stateOf(bank, cases);
        const map = solveNetwork(bank.wiring, bank.chainOhm, state.conduction);
        const { chains, currentPerEmf } = map;
        const largest = 1 / Math.min(...bank.chainOhm);
        for (let i = 0; i < chains; i++) {
          for (let j = 0; j < i; j++) {
            const skew = currentPerEmf[i * chains + j] - currentPerEmf[j * chains + i];
            expect(Math.abs(skew)).toBeLessThan(1e-12 * largest);
          }
        }
      }),
      { seed: 53, numRuns: 100 },
    );
  });

  it('comes out of the cache as it went in, also after the cache has overflowed', () => {
    const { bank } = wired({ wiring: 'strings', moduleOhm: Array.from({ length: 7 }, (_, s) => [0.01 + 0.001 * s]) });
    const cache = createNetworkCache();
    const patterns = Array.from({ length: 128 }, (_, bits) =>
      Uint8Array.from({ length: 7 }, (_, i) => 2 * ((bits >> i) & 1)),
    );
    for (const _ of [1, 2]) {
      for (const pattern of patterns) {
        expect(networkMap(bank, pattern, cache)).toEqual(solveNetwork(bank.wiring, bank.chainOhm, pattern));
      }
    }
    expect(cache.maps.size).toBeLessThanOrEqual(64);
  });

  it('shifts the EMF of a conducting rectifier by its drop, against the current', () => {
    // By hand: 12 V, 0.7 V, 12 mOhm with 1 µS beside: 0.7 / (1 + 1.2e-8).
    const { bank } = wired({ wiring: 'strings', moduleOhm: [[0.01]], leadOhm: 0.001 });
    const shifted = (mode: number): number =>
      effectiveEmfV(bank, stateOf(bank, [{ mode, dropV: 0.7, start: 1, emfPerModuleV: 12 }]).state, 0, 12);
    expect(shifted(1)).toBeCloseTo(11.3, 7);
    expect(shifted(2)).toBeCloseTo(12.7, 7);
    expect(shifted(0)).toBe(12);
  });
});
