import type { Bank } from '../bank/bank.js';
import { buildBank } from '../bank/bank.js';
import { type BankState, createBankState } from '../bank/bank-state.js';
import type { OcvCurves } from '../bank/ocv-curves.js';
import type { Candidate, ModuleParameters } from '../study/study.js';
import { createJourney } from './advance.js';
import { runSegment } from './run-cycle.js';

/** Bench charger: rate and end as fractions of rated capacity per hour, and the longest time on it (own choice). */
const BENCH_RATE = 1 / 5;
const BENCH_TAIL = 1 / 50;
const BENCH_LIMIT_S = 48 * 3600;
const BENCH_LEAD_OHM = 5e-4;

/** The bank as it is first switched on: as received, or with each module charged alone to full before. */
export function commissionBank(
  bank: Bank,
  candidate: Candidate,
  moduleNamed: ReadonlyMap<string, ModuleParameters>,
  ocv: OcvCurves,
  toleranceFactor = 1,
): BankState {
  const state = createBankState(bank);
  if (candidate.commissioning === 'as-received') return state;
  const ids = candidate.strings.flat();
  let cell = 0;
  for (const id of ids) {
    const charge = chargeAlone(id, candidate, moduleNamed, ocv, toleranceFactor);
    state.charge.set(charge, cell);
    cell += charge.length;
  }
  return state;
}

/** Charge of a module's cells after a bench charger has brought it to full under its own BMS. */
function chargeAlone(
  id: string,
  candidate: Candidate,
  moduleNamed: ReadonlyMap<string, ModuleParameters>,
  ocv: OcvCurves,
  toleranceFactor: number,
): Float64Array {
  const absorptionV = candidate.charger.absorptionV / candidate.strings[0].length;
  const alone: Candidate = {
    ...candidate,
    wiring: 'strings',
    strings: [[id]],
    leads: [{ negativeOhm: BENCH_LEAD_OHM, betweenOhm: 0, positiveOhm: BENCH_LEAD_OHM }],
  };
  const bank = buildBank(alone, moduleNamed, ocv);
  const state = createBankState(bank);
  const journey = createJourney(
    bank,
    state,
    {
      limitA: BENCH_RATE * bank.ratedAh,
      absorptionV,
      tailA: BENCH_TAIL * bank.ratedAh,
      tailHoldS: candidate.charger.tailHoldS,
      absorptionS: null,
      floatV: null,
      restart: 'each-cycle',
      restartV: 0,
    },
    { disconnectV: null, disconnectDelayS: 0, reconnectV: 0 },
    {},
    toleranceFactor,
  );
  const charge = { durationS: BENCH_LIMIT_S, loadW: 0, loadA: 0, chargeW: null, endsWhenCharged: true };
  runSegment(journey, charge, { loadFactor: 1, chargeFactor: 1 });
  return state.charge;
}
