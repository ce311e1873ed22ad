import type { Bank } from '../bank/bank.js';
import { buildBank } from '../bank/bank.js';
import type { BankState } from '../bank/bank-state.js';
import type { OcvCurves } from '../bank/ocv-curves.js';
import type { Candidate, ChargerSettings, ModuleParameters } from '../study/study.js';
import { createJourney } from './advance.js';
import { runSegment } from './run-cycle.js';

/** Bench charger: rate and end as fractions of rated capacity per hour, and the longest time on it (own choice). */
const BENCH_RATE = 1 / 5;
const BENCH_TAIL = 1 / 50;
const BENCH_LIMIT_S = 48 * 3600;
const BENCH_LEAD_OHM = 5e-4;

/** One module, or one native pack, out of its bank and by itself on a bench charger. */
export interface Bench {
  readonly bank: Bank;
  readonly charger: ChargerSettings;
  readonly toleranceFactor: number;
}

/**
 * @param ids the module, or all modules of a pack
 * @param absorptionV of the bench charger
 */
export function createBench(
  candidate: Candidate,
  wiring: 'strings' | 'native',
  ids: readonly string[],
  absorptionV: number,
  moduleNamed: ReadonlyMap<string, ModuleParameters>,
  ocv: OcvCurves,
  toleranceFactor: number,
): Bench {
  const alone: Candidate = {
    ...candidate,
    wiring,
    strings: [ids],
    leads: [{ negativeOhm: BENCH_LEAD_OHM, betweenOhm: 0, positiveOhm: BENCH_LEAD_OHM }],
  };
  const bank = buildBank(alone, moduleNamed, ocv);
  const charger: ChargerSettings = {
    limitA: BENCH_RATE * bank.ratedAh,
    absorptionV,
    tailA: BENCH_TAIL * bank.ratedAh,
    tailHoldS: candidate.charger.tailHoldS,
    absorptionS: null,
    floatV: null,
    restart: 'each-cycle',
    restartV: 0,
  };
  return { bank, charger, toleranceFactor };
}

/** Brings what is on the bench to full under its own BMS. Changes `state`. */
export function chargeOnBench({ bank, charger, toleranceFactor }: Bench, state: BankState): void {
  const load = { disconnectV: null, disconnectDelayS: 0, reconnectV: 0 };
  const journey = createJourney(bank, state, charger, load, {}, toleranceFactor);
  const charge = { durationS: BENCH_LIMIT_S, loadW: 0, loadA: 0, chargeW: null, endsWhenCharged: true };
  runSegment(journey, charge, { loadFactor: 1, chargeFactor: 1 });
}
