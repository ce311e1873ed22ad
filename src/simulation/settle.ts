import { BLEED_NONE } from '../bank/bank.js';
import { pastBleedSwitch } from '../bank/bleed.js';
import { settleBus } from '../bank/bus.js';
import { fixConduction } from '../bank/conduction.js';
import { settleEqualiser } from '../bank/equaliser.js';
import type { BankEvent, BankEventKind } from '../bank/events.js';
import { updateChainModes } from '../bank/paths.js';
import { NotConverged } from '../mathematics/not-converged.js';
import { updateEmf } from './chain-emf.js';
import { updateBranches } from './hysteresis-branch.js';
import { cellVoltageV, copyInto, type Kernel, updateCellConstants, updateEmfShifts, updateExtremes } from './kernel.js';
import type { StepWork } from './step.js';
import { type Terminal, updateTerms } from './terminal.js';
import { actOnDue, updateMet, updateNextDue, updateValues, type Watch } from './watch.js';

/** Rounds after which a settling bank is given up; each condition acts and each bleed switches at most once. */
const MOST_ROUNDS = 1000;

/**
 * Puts a bank in order at an instant: after a jump of current, an event or a change of duty, everything that follows at
 * once is made to follow (rectifiers, regime, bleed, BMS conditions, actions without delay) before time goes on.
 *
 * @param report takes what happens, in order
 */
export function settle(
  kernel: Kernel,
  terminal: Terminal,
  watch: Watch,
  work: StepWork,
  report: (event: BankEvent) => void,
): void {
  const { bank, state, bus, point } = kernel;
  watch.spent.fill(0);
  work.bleedSpent.fill(0);
  work.passedAs.fill(0);
  updateChainModes(bank, state);
  updateTerms(terminal, kernel.terms);
  const tell = (kind: BankEventKind, module: number): void =>
    report({ kind, timeS: kernel.nowS, module, cell: extremeCell(kernel, kind, module) });
  const wasOn = state.equaliserOn[0];
  let mayStart = true;
  for (let round = 0; round < MOST_ROUNDS; round++) {
    fixConduction(state);
    updateBranches(kernel);
    updateCellConstants(kernel);
    updateEmf(kernel, 0, work.passedAs, state.filterA);
    settleBus(bank, state, kernel.cache, point.emfV, kernel.terms, bus);
    if (bank.equaliser !== null) {
      // Devices start or stop at most once at an instant, as everything else does.
      if (settleEqualiser(bank.equaliser, state, point.emfV, bus.currentA, bus.bankV, mayStart)) {
        mayStart &&= state.equaliserOn[0] === wasOn;
        continue;
      }
    }
    updateEmfShifts(kernel);
    updateExtremes(kernel, bus.currentA, state.filterA);
    if (switchBleed(kernel, work.bleedSpent)) continue;
    updateValues(kernel, terminal, watch, bus.currentA, bus.bankA, bus.bankV);
    updateMet(kernel, terminal, watch);
    if (actOnDue(kernel, terminal, watch, tell)) continue;
    updateCellConstants(kernel);
    copyInto(bus.currentA, work.firstA);
    updateNextDue(kernel, watch);
    return;
  }
  throw new NotConverged(`bank did not settle at ${kernel.nowS} s`);
}

/** Switches the bleed of cells not in `spent` by their voltage now. @returns true if any was switched */
function switchBleed(kernel: Kernel, spent: Uint8Array): boolean {
  const { bank, state, bus, lowestV, chainOfCell } = kernel;
  let switched = false;
  for (let c = 0; c < bank.cells; c++) {
    const m = bank.moduleOfCell[c];
    if (bank.bleedRule[m] === BLEED_NONE || spent[c] === 1) continue;
    const volts = cellVoltageV(kernel, c, bus.currentA, state.filterA);
    const bleeds = state.bleeding[c] === 1;
    if (pastBleedSwitch(bank, m, bleeds, volts, lowestV[m], bus.currentA[chainOfCell[c]]) < 0) continue;
    state.bleeding[c] = bleeds ? 0 : 1;
    spent[c] = 1;
    switched = true;
  }
  return switched;
}

/** The cell whose voltage led to an event, -1 if none did. */
function extremeCell(kernel: Kernel, kind: BankEventKind, m: number): number {
  const sign = kind.startsWith('over-voltage') ? 1 : kind.startsWith('under-voltage') ? -1 : 0;
  if (sign === 0) return -1;
  const { bank, bus, state } = kernel;
  let extreme = bank.cellStart[m];
  for (let c = extreme + 1; c < bank.cellStart[m + 1]; c++) {
    const difference =
      cellVoltageV(kernel, c, bus.currentA, state.filterA) - cellVoltageV(kernel, extreme, bus.currentA, state.filterA);
    if (sign * difference > 0) extreme = c;
  }
  return extreme;
}
