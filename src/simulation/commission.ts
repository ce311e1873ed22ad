import type { Bank } from '../bank/bank.js';
import { type BankState, createBankState } from '../bank/bank-state.js';
import type { OcvCurves } from '../bank/ocv-curves.js';
import type { Candidate, ModuleParameters } from '../study/study.js';
import { chargeOnBench, createBench } from './bench.js';

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
  const absorptionV = candidate.charger.absorptionV / candidate.strings[0].length;
  let cell = 0;
  for (const id of candidate.strings.flat()) {
    const bench = createBench(candidate, 'strings', [id], absorptionV, moduleNamed, ocv, toleranceFactor);
    const alone = createBankState(bench.bank);
    chargeOnBench(bench, alone);
    state.charge.set(alone.charge, cell);
    cell += alone.charge.length;
  }
  return state;
}
