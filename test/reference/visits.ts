import type { ModuleParameters } from '../../src/study/study.js';
import { segmentOf } from './duties.js';
import type { Pack, Packs } from './packs.js';
import type { ReferenceBank } from './reference-bank.js';
import type { SlowRun } from './slow-run.js';
import { clearPack, type PackSwitches } from './switches.js';

/** Charge and hysteresis of each cell. */
export interface CellStates {
  readonly charge: readonly number[];
  readonly hysteresis: readonly number[];
}

/** Simulates a bank from a hysteresis that is not 0. */
export type SimulateAlone = (bank: ReferenceBank, startHysteresis: readonly number[]) => SlowRun;

/**
 * Modules of one string alone on a bench at 25 degC, to the end of charge or for two days: C/5 of the smallest rated
 * capacity, their share of the absorption voltage, a tail of C/50, half a milliohm of lead at either end.
 */
function chargeAlone(
  bank: ReferenceBank,
  modules: readonly ModuleParameters[],
  absorptionV: number,
  start: CellStates,
  simulate: SimulateAlone,
): CellStates {
  const ratedAh = Math.min(...modules.map((module) => module.ratedAh));
  let next = 0;
  const string = modules.map((module) => {
    const { temperatureOffsetK: _, ageing: __, ...rest } = module;
    const arrivalCharge = module.capacityAh.map(() => start.charge[next++]);
    return { ...rest, arrivalCharge };
  });
  const { takeOff: _, slotOffsetK: __, network: ___, equaliser: ____, upkeep: _____, ...candidate } = bank.candidate;
  const run = simulate(
    {
      ...bank,
      modules: [string],
      cycles: [[segmentOf(48, { chargeW: null, endsWhenCharged: true })]],
      loadFactor: 1,
      chargeFactor: 1,
      candidate: {
        ...candidate,
        wiring: candidate.wiring === 'native' ? 'native' : 'strings',
        commissioning: 'as-received',
        leads: [{ negativeOhm: 0.0005, betweenOhm: 0, positiveOhm: 0.0005 }],
        charger: {
          limitA: ratedAh / 5,
          absorptionV,
          tailA: ratedAh / 50,
          tailHoldS: candidate.charger.tailHoldS,
          absorptionS: null,
          floatV: null,
          restart: 'each-cycle',
          restartV: 0,
        },
        load: { disconnectV: null, disconnectDelayS: 0, reconnectV: 0 },
      },
    },
    start.hysteresis,
  );
  return { charge: run.cycleEndCharge[0], hysteresis: run.endHysteresis };
}

/** The cells' charge after each module has been charged alone, before the bank is put together. */
export function commissionedCharge(bank: ReferenceBank, simulate: SimulateAlone): number[] {
  const absorptionV = bank.candidate.charger.absorptionV / bank.modules[0].length;
  // Single modules, whatever they are built into afterwards.
  const loose: ReferenceBank = { ...bank, candidate: { ...bank.candidate, wiring: 'strings' } };
  return bank.modules.flat().flatMap((module) => {
    const start = { charge: module.arrivalCharge, hysteresis: module.arrivalCharge.map(() => 0) };
    return [...chargeAlone(loose, [module], absorptionV, start, simulate).charge];
  });
}

/** When somebody comes to rebalance, and what that does to the states of a bank. */
export class SlowVisits {
  #lastCycle = 0;
  #lastS = 0;

  constructor(
    readonly bank: ReferenceBank,
    readonly simulate: SimulateAlone,
  ) {}

  /** Whether it is time at the end of a cycle. @param layout at the present age */
  isDue(layout: Packs, states: Float64Array, cycle: number, timeS: number): boolean {
    const { upkeep } = this.bank.candidate;
    if (upkeep === undefined) return false;
    const due =
      'everyCycles' in upkeep
        ? cycle >= this.#lastCycle + upkeep.everyCycles
        : 'everyS' in upkeep
          ? timeS >= this.#lastS + upkeep.everyS - 1
          : driftAh(layout, states) > upkeep.driftFraction * Math.max(...layout.packs.map((p) => p.module.ratedAh));
    if (!due) return false;
    this.#lastCycle = cycle;
    this.#lastS = timeS;
    return true;
  }

  /**
   * Clears every BMS, charges every module, or native pack, alone and lets it rest: polarisation is gone afterwards.
   *
   * @param layout at the present age and 25 degC
   */
  visit(layout: Packs, switches: readonly PackSwitches[], states: Float64Array): void {
    const { bank } = this;
    const absorptionV = bank.candidate.charger.absorptionV / layout.positions;
    const apart = bank.candidate.wiring === 'native' ? bank.modules : bank.modules.flat().map((module) => [module]);
    layout.packs.forEach((pack, k) => {
      clearPack(switches[k]);
      const start = {
        charge: pack.cells.map(({ at }) => states[at]),
        hysteresis: pack.cells.map(({ at }) => states[at + 1]),
      };
      const end = chargeAlone(bank, asOfNow(apart[k], pack), absorptionV, start, this.simulate);
      pack.cells.forEach(({ at, pairs }, c) => {
        states[at] = end.charge[c];
        states[at + 1] = end.hysteresis[c];
        states.fill(0, at + 2, at + 2 + pairs.length);
      });
    });
  }
}

/** The modules of a pack with the capacities and resistances of its cells. */
function asOfNow(modules: readonly ModuleParameters[], pack: Pack): ModuleParameters[] {
  let first = 0;
  return modules.map((module) => {
    const cells = pack.cells.slice(first, first + module.capacityAh.length);
    first += module.capacityAh.length;
    return {
      ...module,
      capacityAh: cells.map(({ capacityAs }) => capacityAs / 3600),
      resistanceOhm: cells.map(({ resistanceOhm }) => resistanceOhm),
      polarisation: module.polarisation.map((pair, p) => ({
        ...pair,
        resistanceOhm: cells.map(({ pairs }) => pairs[p].resistanceOhm),
      })),
    };
  });
}

/** Spread of missing charge between the modules of a string, worst string, Ah; a module misses what its worst cell does. */
function driftAh({ packs, positions }: Packs, states: Float64Array): number {
  const missing = packs.map(({ cells }) =>
    Math.max(...cells.map(({ at, capacityAs }) => (capacityAs * (1 - states[at])) / 3600)),
  );
  const strings = packs.length / positions;
  return Math.max(
    ...Array.from({ length: strings }, (_, s) => {
      const string = missing.slice(s * positions, (s + 1) * positions);
      return Math.max(...string) - Math.min(...string);
    }),
  );
}
