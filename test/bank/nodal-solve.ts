import { BUS_MINUS, BUS_PLUS, type WiringGraph } from '../../src/bank/wiring-graph.js';

/** A module as a branch of the network: an EMF behind a conductance. */
export interface ModuleBranch {
  readonly emfV: number;
  readonly conductanceS: number;
}

/** Currents (charging positive) and voltages of a network. */
export interface NodalSolution {
  readonly nodeV: readonly number[];
  readonly moduleA: readonly number[];
  readonly bankA: number;
  readonly bankV: number;
}

/**
 * Solves a wiring node by node, without reducing it, by Gaussian elimination with pivoting: for checks of the engine's
 * reduced network.
 *
 * @param modules branch of each module
 * @param fixed current into bus plus, A, or voltage of the bus, V
 */
export function solveNodes(
  graph: WiringGraph,
  modules: readonly ModuleBranch[],
  fixed: { readonly bankA: number } | { readonly bankV: number },
): NodalSolution {
  const n = graph.nodes;
  const rows = Array.from({ length: n }, () => new Array<number>(n + 1).fill(0));
  for (const branch of graph.branches) {
    const isModule = branch.kind === 'module';
    const g = isModule ? modules[branch.module].conductanceS : 1 / branch.ohm;
    const sourceA = isModule ? g * modules[branch.module].emfV : 0;
    const { from, to } = branch;
    rows[from][from] += g;
    rows[to][to] += g;
    rows[from][to] -= g;
    rows[to][from] -= g;
    rows[to][n] += sourceA;
    rows[from][n] -= sourceA;
  }
  const busRow = [...rows[BUS_PLUS]];
  const setVoltage = (node: number, volts: number): void => {
    rows[node] = new Array<number>(n + 1).fill(0);
    rows[node][node] = 1;
    rows[node][n] = volts;
  };
  setVoltage(BUS_MINUS, 0);
  if ('bankV' in fixed) setVoltage(BUS_PLUS, fixed.bankV);
  else rows[BUS_PLUS][n] += fixed.bankA;
  const nodeV = eliminate(rows);
  const moduleA = new Array<number>(modules.length).fill(0);
  for (const branch of graph.branches) {
    if (branch.kind !== 'module') continue;
    const { emfV, conductanceS } = modules[branch.module];
    moduleA[branch.module] = conductanceS * (nodeV[branch.to] - nodeV[branch.from] - emfV);
  }
  const intoBus = nodeV.reduce((total, volts, node) => total + busRow[node] * volts, -busRow[n]);
  return { nodeV, moduleA, bankA: 'bankA' in fixed ? fixed.bankA : intoBus, bankV: nodeV[BUS_PLUS] };
}

/** Solution of a linear system given as rows of the extended matrix, which it overwrites. */
function eliminate(rows: number[][]): number[] {
  const n = rows.length;
  for (let k = 0; k < n; k++) {
    let largest = k;
    for (let i = k + 1; i < n; i++) if (Math.abs(rows[i][k]) > Math.abs(rows[largest][k])) largest = i;
    [rows[k], rows[largest]] = [rows[largest], rows[k]];
    for (let i = k + 1; i < n; i++) {
      const share = rows[i][k] / rows[k][k];
      if (share === 0) continue;
      for (let j = k; j <= n; j++) rows[i][j] -= share * rows[k][j];
    }
  }
  const solution = new Array<number>(n).fill(0);
  for (let k = n - 1; k >= 0; k--) {
    let rest = rows[k][n];
    for (let j = k + 1; j < n; j++) rest -= rows[k][j] * solution[j];
    solution[k] = rest / rows[k][k];
  }
  return solution;
}
