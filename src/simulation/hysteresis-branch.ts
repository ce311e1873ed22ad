import type { Kernel } from './kernel.js';

/** Distance from a branch of the hysteresis at which a cell is taken to be on it. */
const ON_BRANCH = 1e-6;

/**
 * Whether the cells of chain `i` stay on the branch that they are all on while it passes `passedAs` in `elapsedS`. Most
 * chains do for most of the time, and then there is nothing to calculate.
 */
export function staysOnBranch({ bank, branch }: Kernel, i: number, passedAs: number, elapsedS: number): boolean {
  if (branch[i] === 0) return false;
  return branch[i] > 0 ? passedAs >= bank.chainMostOffsetA[i] * elapsedS : passedAs <= 0;
}

/** Finds the branch of every chain from the state of its cells. */
export function updateBranches(kernel: Kernel): void {
  for (let i = 0; i < kernel.branch.length; i++) kernel.branch[i] = commonBranch(kernel, i);
}

function commonBranch({ bank, state }: Kernel, i: number): number {
  const { chainCellStart } = bank;
  const { hysteresis } = state;
  const first = hysteresis[chainCellStart[i]];
  if (first !== 1 && first !== -1) return 0;
  for (let c = chainCellStart[i] + 1; c < chainCellStart[i + 1]; c++) if (hysteresis[c] !== first) return 0;
  return first;
}

/** Makes the hysteresis at the end of a step the present; `endAs` is what each chain passed in it. */
export function commitHysteresis(kernel: Kernel, endAs: Float64Array, stepS: number): void {
  const { bank, state, point, branch } = kernel;
  const { chainCellStart } = bank;
  const { hysteresis } = state;
  const { cellHysteresis } = point;
  for (let i = 0; i < branch.length; i++) {
    if (staysOnBranch(kernel, i, endAs[i], stepS)) continue;
    for (let c = chainCellStart[i]; c < chainCellStart[i + 1]; c++) {
      const h = cellHysteresis[c];
      // Close to a branch the exponential no longer matters.
      hysteresis[c] = Math.abs(h) > 1 - ON_BRANCH ? Math.sign(h) : h;
    }
    branch[i] = commonBranch(kernel, i);
  }
}
