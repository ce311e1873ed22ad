import type { Bank } from '../../src/bank/bank.js';
import type { BankState } from '../../src/bank/bank-state.js';
import { DISCHARGE_ONLY } from '../../src/bank/bank-state.js';
import { FORWARD, LEAKING } from '../../src/bank/network.js';
import type { ModuleBranch } from './nodal-solve.js';

const LEAK_S = 1e-6;

/**
 * Branches of the modules of a bank for the pattern in `state`: a chain that leaks or conducts through a rectifier does
 * so at its first module.
 *
 * A rectifier is its resistor behind EMF -+ drop, with the leak from the plain EMF beside it.
 *
 * @param emfV EMF of each module, V; @param ohm resistance of each module without leads
 */
export function moduleBranches(
  bank: Bank,
  state: BankState,
  emfV: ArrayLike<number>,
  ohm: ArrayLike<number>,
): ModuleBranch[] {
  const branches = Array.from({ length: bank.modules }, (_, m) => ({ emfV: emfV[m], conductanceS: 1 / ohm[m] }));
  bank.wiring.chains.forEach(({ modules: [first] }, i) => {
    const own = branches[first];
    if (state.conduction[i] === LEAKING) branches[first] = { ...own, conductanceS: LEAK_S };
    if (state.conduction[i] !== FORWARD) return;
    const dropV = state.chainMode[i] === DISCHARGE_ONLY ? -state.chainDropV[i] : state.chainDropV[i];
    const conductanceS = own.conductanceS + LEAK_S;
    const branchEmfV = (own.conductanceS * (own.emfV + dropV) + LEAK_S * own.emfV) / conductanceS;
    branches[first] = { emfV: branchEmfV, conductanceS };
  });
  return branches;
}
