import { type Bank, buildBank } from '../bank/bank.js';
import { CLOSED, solveNetwork } from '../bank/network.js';
import { compileOcvCurves, ocvV } from '../bank/ocv-curves.js';
import { meanModules } from '../sampling/mean-modules.js';
import type { Candidate, Study } from '../study/study.js';

/** Prospective short-circuit current of a bank: what would flow if nothing cut it off. Magnitudes, A. */
export interface ProspectiveCurrent {
  /** With the bus shorted. */
  readonly bankA: number;
  /** Of each string with the bus shorted, its most loaded module. */
  readonly stringA: readonly number[];
  /**
   * Largest current that the fuse of a string may have to break: its own with the bus shorted, or, with a fault between
   * fuse and string, what the other strings feed into it.
   */
  readonly fuseA: number;
}

/**
 * Prospective short-circuit current of a candidate: every module at its mean and full, every path closed and every BMS
 * looking on, cells behind their series resistance alone, a bolted fault at the bus.
 *
 *   V_bank = c . E + r I_bank = 0   =>   I_bank = -c . E / r;   I = A E + b I_bank
 */
export function prospectiveCurrent(study: Study, candidate: Candidate): ProspectiveCurrent {
  return prospectiveOf(buildBank(candidate, meanModules(study), compileOcvCurves(study.ocvTables)));
}

/** As `prospectiveCurrent`, of a bank. */
export function prospectiveOf(bank: Bank): ProspectiveCurrent {
  const { chains } = bank.wiring;
  const count = chains.length;
  const map = solveNetwork(bank.wiring, bank.chainOhm, new Uint8Array(count).fill(CLOSED));
  const emfV = new Float64Array(count);
  for (let c = 0; c < bank.cells; c++) {
    emfV[bank.chainOfModule[bank.moduleOfCell[c]]] += ocvV(bank.ocv, bank.curveOfCell[c], 1);
  }
  const openV = emfV.reduce((sum, volts, i) => sum + map.voltagePerEmf[i] * volts, 0);
  const intoBankA = -openV / map.bankOhm;
  const stringA = new Array<number>(bank.strings).fill(0);
  chains.forEach(({ modules }, i) => {
    const ownA = emfV.reduce(
      (sum, volts, j) => sum + map.currentPerEmf[i * count + j] * volts,
      map.currentPerBank[i] * intoBankA,
    );
    const string = Math.floor(modules[0] / bank.positions);
    stringA[string] = Math.max(stringA[string], Math.abs(ownA));
  });
  const bankA = Math.abs(intoBankA);
  const fuseA = Math.max(...stringA.map((own) => Math.max(own, bank.strings > 1 ? bankA - own : 0)));
  return { bankA, stringA, fuseA };
}
