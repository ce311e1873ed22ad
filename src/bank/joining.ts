import type { Bank } from './bank.js';
import type { BankState } from './bank-state.js';
import { CLOSED, solveNetwork } from './network.js';
import { ocvV } from './ocv-curves.js';

/** What happens when the strings of a bank are put together. */
export interface Joining {
  /**
   * Largest difference of open-circuit voltage between strings; where strings are tied between their modules, also between
   * modules of equal position, V.
   */
  readonly differenceV: number;
  /** Largest current of a module at once, every path closed and nothing at the bus, A. */
  readonly currentA: number;
}

/** Voltage of every module without any current, standby included: open-circuit and hysteresis voltage of its cells, V. */
function openVoltagesV(bank: Bank, state: BankState): Float64Array {
  const moduleV = new Float64Array(bank.modules);
  for (let c = 0; c < bank.cells; c++) {
    moduleV[bank.moduleOfCell[c]] +=
      ocvV(bank.ocv, bank.curveOfCell[c], state.charge[c]) + bank.hysteresisV[c] * state.hysteresis[c];
  }
  return moduleV;
}

/** @returns what joining the strings of a bank in this state does; null where there is one string only */
export function joiningOf(bank: Bank, state: BankState): Joining | null {
  const { strings, positions, wiring } = bank;
  if (strings < 2) return null;
  const moduleV = openVoltagesV(bank, state);
  const stringV = new Float64Array(strings);
  moduleV.forEach((volts, m) => {
    stringV[Math.floor(m / positions)] += volts;
  });
  let differenceV = Math.max(...stringV) - Math.min(...stringV);
  const tiesPositions = wiring.chains.some(({ modules }) => modules.length < positions);
  if (tiesPositions) {
    for (let position = 0; position < positions; position++) {
      const atPosition = moduleV.filter((_, m) => m % positions === position);
      differenceV = Math.max(differenceV, Math.max(...atPosition) - Math.min(...atPosition));
    }
  }
  const chains = wiring.chains.length;
  const map = solveNetwork(wiring, bank.chainOhm, new Uint8Array(chains).fill(CLOSED));
  const emfV = wiring.chains.map(({ modules }) => modules.reduce((sum, m) => sum + moduleV[m], 0));
  let currentA = 0;
  for (let i = 0; i < chains; i++) {
    const own = emfV.reduce((sum, volts, j) => sum + map.currentPerEmf[i * chains + j] * volts, 0);
    currentA = Math.max(currentA, Math.abs(own));
  }
  return { differenceV, currentA };
}
