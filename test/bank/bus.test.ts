import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { BOTH_WAYS, CHARGE_ONLY, DISCHARGE_ONLY, NO_WAY } from '../../src/bank/bank-state.js';
import {
  BUS_DEAD,
  BUS_OVERLOADED,
  type BusPoint,
  type BusTerms,
  CHARGER_AT_LIMIT,
  CHARGER_AT_POWER,
  CHARGER_HOLDS,
  CHARGER_IDLE,
  loadIsServed,
  settleBus,
  upperRootV,
} from '../../src/bank/bus.js';
import { createNetworkCache, settleConduction } from '../../src/bank/conduction.js';
import { LEAKING, solveNetwork } from '../../src/bank/network.js';
import { type ChainCase, chainCase, randomSketch, stateOf, type WiringSketch, wired } from './random-wiring.js';

const NOTHING: BusTerms = { loadW: 0, loadA: 0, chargeW: 0, limitA: 50, ceilingV: null };

/** Settles a bus from a regime that it has been in. */
function settle(sketch: WiringSketch, cases: readonly ChainCase[], given: Partial<BusTerms>, before = CHARGER_IDLE) {
  const { bank } = wired(sketch);
  const { state, emfV } = stateOf(bank, cases);
  const terms = { ...NOTHING, ...given };
  const blank = (): BusPoint => ({
    map: solveNetwork(bank.wiring, bank.chainOhm, state.conduction),
    currentA: new Float64Array(emfV.length),
    bankA: 0,
    bankV: 0,
    regime: before,
    netA: 0,
    netW: 0,
    fed: false,
  });
  const bus = blank();
  settleBus(bank, state, createNetworkCache(), emfV, terms, bus);
  const probe = blank();
  /** Current into the bank at a bus voltage. */
  const bankAt = (busV: number): number => {
    settleConduction(bank, state, createNetworkCache(), emfV, busV, true, probe);
    return probe.bankA;
  };
  const conduction = [...state.conduction];
  return { bus, terms, bankAt, conduction };
}

/** Current that load and charger leave for the bank at a voltage other than the ceiling. */
function netA({ loadW, loadA, chargeW, limitA, ceilingV }: BusTerms, busV: number): number {
  const charging = ceilingV !== null && chargeW > 0 && busV < ceilingV;
  return (charging ? Math.min(limitA, chargeW / busV) : 0) - loadA - loadW / busV;
}

/** Highest voltage of a grid down to 1 V at which the bank takes no more than load and charger leave; null if none. */
function highestOnGrid({ terms, bankAt }: ReturnType<typeof settle>, mostV: number): number | null {
  for (let busV = mostV; busV > 1; busV -= 0.1) if (bankAt(busV) <= netA(terms, busV)) return busV;
  return null;
}

/** 12 V behind 10 mOhm, leads of 1 mOhm in all. */
const ONE: WiringSketch = { wiring: 'strings', moduleOhm: [[0.01]], leadOhm: 5e-4 };
const both = { mode: BOTH_WAYS, dropV: 0, start: 1, emfPerModuleV: 12 };
const OHM = 0.011;

describe('a single module at the bus', () => {
  // By hand: V^2 - (12 + r netA) V - r netW = 0 with r = 11 mOhm, upper root.
  const root = (a: number, w: number): number => {
    const half = (12 + OHM * a) / 2;
    return half + Math.sqrt(half * half + OHM * w);
  };
  it.each([
    ['rests', {}, CHARGER_IDLE, 12],
    ['gives a current', { loadA: 20 }, CHARGER_IDLE, 12 - 0.22],
    ['gives a power', { loadW: 500 }, CHARGER_IDLE, root(0, -500)],
    ['gives both', { loadW: 500, loadA: 20 }, CHARGER_IDLE, root(-20, -500)],
    ['takes the limit', { chargeW: Infinity, ceilingV: 14.4 }, CHARGER_AT_LIMIT, 12 + 0.55],
    ['takes the power', { chargeW: 300, ceilingV: 14.4 }, CHARGER_AT_POWER, root(0, 300)],
    [
      'takes what the load leaves of the limit',
      { chargeW: Infinity, ceilingV: 14.4, loadW: 200 },
      CHARGER_AT_LIMIT,
      root(50, -200),
    ],
    [
      'takes what the load leaves of the power',
      { chargeW: 300, ceilingV: 14.4, loadW: 200, loadA: 3 },
      CHARGER_AT_POWER,
      root(-3, 100),
    ],
    ['is held at the ceiling', { chargeW: Infinity, ceilingV: 12.3 }, CHARGER_HOLDS, 12.3],
    ['is held at the ceiling under load', { chargeW: 800, ceilingV: 12.1, loadW: 300 }, CHARGER_HOLDS, 12.1],
    ['gives what the charger cannot', { chargeW: 100, ceilingV: 14.4, loadW: 700 }, CHARGER_AT_POWER, root(0, -600)],
    ['stands above the ceiling', { chargeW: Infinity, ceilingV: 11.5 }, CHARGER_IDLE, 12],
    ['feeds a load above the ceiling', { chargeW: Infinity, ceilingV: 11.5, loadA: 10 }, CHARGER_IDLE, 11.89],
  ] as const)('%s', (_, terms, regime, busV) => {
    const { bus } = settle(ONE, [both], terms);
    expect(bus.regime).toBe(regime);
    // The leaks of 1 µS move the bus by less than a microvolt.
    expect(bus.bankV).toBeCloseTo(busV, 5);
    expect(loadIsServed(bus.regime)).toBe(true);
  });

  it('is overloaded beyond E^2 / 4 r: the load goes and the bank rests', () => {
    // 144 / 0.044 = 3272.7 W.
    expect(settle(ONE, [both], { loadW: 3272 }).bus.regime).toBe(CHARGER_IDLE);
    const { bus } = settle(ONE, [both], { loadW: 3274 });
    expect(bus.regime).toBe(BUS_OVERLOADED);
    expect(loadIsServed(bus.regime)).toBe(false);
    expect(bus.bankA).toBe(0);
    expect(bus.bankV).toBeCloseTo(12, 5);
  });

  it('takes an overloaded load back only with 2 % to spare', () => {
    // 3272.7 / 1.02 = 3208.5 W.
    expect(settle(ONE, [both], { loadW: 3210 }, BUS_OVERLOADED).bus.regime).toBe(BUS_OVERLOADED);
    expect(settle(ONE, [both], { loadW: 3207 }, BUS_OVERLOADED).bus.regime).toBe(CHARGER_IDLE);
  });

  it('leaves the bus dead where nothing may discharge', () => {
    for (const mode of [CHARGE_ONLY, NO_WAY]) {
      const { bus, conduction } = settle(ONE, [{ ...both, mode, dropV: 0.7 }], { loadW: 10 });
      expect(bus.regime).toBe(BUS_DEAD);
      expect(loadIsServed(bus.regime)).toBe(false);
      expect(bus.bankV).toBe(0);
      // 12 V over 1 µS.
      expect(bus.bankA).toBeCloseTo(-12e-6, 9);
      expect(conduction).toEqual([LEAKING]);
    }
  });

  it('lets a charger alone carry the load where nothing may discharge', () => {
    const { bus } = settle(ONE, [{ ...both, mode: NO_WAY }], { loadW: 100, chargeW: 200, ceilingV: 14.4 });
    expect(bus.regime).toBe(CHARGER_HOLDS);
    expect(bus.bankV).toBe(14.4);
    expect(Math.abs(bus.bankA)).toBeLessThan(1e-4);
  });

  it('is dead where the charger alone cannot carry the load, whatever voltage 1 µS would take', () => {
    // 40 W at 14.4 V are 2.8 A, more than the limit; at two megavolts 2 A would flow through the leak.
    const blocked = [{ ...both, mode: NO_WAY }];
    const { bus } = settle(ONE, blocked, { loadW: 40, chargeW: Infinity, limitA: 2, ceilingV: 14.4 });
    expect([bus.regime, bus.bankV]).toEqual([BUS_DEAD, 0]);
  });

  it('is not fed beyond the limit of the charger by its power', () => {
    // 400 W would carry 6 A at 13.2 V, a limit of 2 A does not, and this module may not discharge.
    const open = [{ ...both, mode: CHARGE_ONLY, dropV: 0 }];
    expect(settle(ONE, open, { loadA: 6, chargeW: 400, limitA: 2, ceilingV: 13.2 }).bus.regime).toBe(BUS_DEAD);
  });

  it('sees its open charge path behind its drop', () => {
    // Discharge only with 0.7 V: 11.3 - 0.22; charger refused: held at its ceiling.
    const open = [{ ...both, mode: DISCHARGE_ONLY, dropV: 0.7 }];
    expect(settle(ONE, open, { loadA: 20 }).bus.bankV).toBeCloseTo(11.08, 5);
    const { bus } = settle(ONE, open, { chargeW: Infinity, ceilingV: 14.4 });
    expect([bus.regime, bus.bankV]).toEqual([CHARGER_HOLDS, 14.4]);
  });
});

describe('a cross-linked bank', () => {
  it('is dead if it is cut through at one position, though the others conduct', () => {
    const sketch: WiringSketch = {
      wiring: 'cross-linked',
      moduleOhm: [
        [0.01, 0.01, 0.01],
        [0.01, 0.01, 0.01],
      ],
    };
    const cut = [both, { ...both, mode: CHARGE_ONLY }, both, both, { ...both, mode: NO_WAY }, both];
    const { bus } = settle(sketch, cut, { loadA: 10 });
    expect(bus.regime).toBe(BUS_DEAD);
    expect(Math.abs(bus.bankV)).toBeLessThan(1e-9);
  });
});

describe('settleBus', () => {
  const random = fc.record({
    sketch: randomSketch(4, 3),
    cases: fc.array(chainCase, { minLength: 12, maxLength: 12 }),
    loadW: fc.constantFrom(0, 1, 0.2, 0.05),
    loadA: fc.constantFrom(0, 0, 1, 0.2),
    amount: fc.double({ min: 0.01, max: 1, noNaN: true }),
    chargeW: fc.constantFrom(0, 20, 400, 3000, Number.POSITIVE_INFINITY),
    limitA: fc.constantFrom(2, 40, 300),
    ceiling: fc.constantFrom(null, 11, 13.2, 14.4),
    overloaded: fc.boolean(),
  });

  it('finds the highest bus voltage at which bank, load and charger agree', () => {
    fc.assert(
      fc.property(random, ({ sketch, cases, loadW, loadA, amount, chargeW, limitA, ceiling, overloaded }) => {
        const positions = sketch.wiring === 'native' ? 1 : sketch.moduleOhm[0].length;
        const given = {
          loadW: 20000 * amount * loadW,
          loadA: 600 * amount * loadA,
          chargeW,
          limitA,
          ceilingV: ceiling === null ? null : ceiling * positions,
        };
        const settled = settle(sketch, cases, given, overloaded ? BUS_OVERLOADED : CHARGER_IDLE);
        const { bus, terms, bankAt } = settled;
        const found = highestOnGrid(settled, 16 * positions);
        const served = loadIsServed(bus.regime);
        if (served) {
          // The bank's own law holds ...
          expect(Math.abs(bankAt(bus.bankV) - bus.bankA)).toBeLessThan(1e-5);
          // ... and that of the other side.
          if (bus.regime === CHARGER_HOLDS) {
            expect(bus.bankV).toBe(terms.ceilingV);
            const chargerA = bus.bankA + terms.loadA + terms.loadW / bus.bankV;
            expect(chargerA).toBeGreaterThanOrEqual(0);
            expect(chargerA).toBeLessThanOrEqual(Math.min(limitA, chargeW / bus.bankV));
          } else {
            expect(Math.abs(netA(terms, bus.bankV) - bus.bankA)).toBeLessThan(1e-5);
          }
          // Nothing above it would do.
          if (found !== null) expect(found).toBeLessThanOrEqual(bus.bankV + 1e-6);
        } else {
          const spare = highestOnGrid({ ...settled, terms: { ...terms, loadW: 1.03 * terms.loadW } }, 16 * positions);
          expect(bus.regime === BUS_OVERLOADED && overloaded ? spare : found).toBeNull();
          // Dead if not even a bus at 0 V draws current, else too heavy a load.
          const dead = bankAt(0) > -1e-3;
          expect(bus.regime).toBe(dead ? BUS_DEAD : BUS_OVERLOADED);
          if (dead) expect(bus.bankV).toBeCloseTo(0, 9);
          else expect(bus.bankA).toBe(0);
        }
      }),
      { seed: 81, numRuns: 300 },
    );
  });
});

describe('upperRootV', () => {
  it('satisfies V = e + r (a + p / V) and is the larger root', () => {
    const positive = fc.double({ min: 0.001, max: 60, noNaN: true });
    fc.assert(
      fc.property(positive, positive, fc.double({ min: -50, max: 50, noNaN: true }), (openV, ohm, amps) => {
        const powerW = amps * openV;
        const volts = upperRootV(openV, ohm, amps, powerW);
        if (Number.isNaN(volts)) {
          expect((openV + ohm * amps) ** 2 + 4 * ohm * powerW).toBeLessThan(1e-9);
        } else if (volts > 0) {
          expect(Math.abs(volts - openV - ohm * (amps + powerW / volts))).toBeLessThan(
            1e-9 * (1 + volts + ohm * Math.abs(amps)),
          );
          expect(volts).toBeGreaterThanOrEqual(0.5 * (openV + ohm * amps));
        }
      }),
      { seed: 82, numRuns: 500 },
    );
  });
});
