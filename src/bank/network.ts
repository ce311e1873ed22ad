import { solveConductances } from '../mathematics/conductance-solve.js';
import type { ChainedWiring } from './chains.js';
import { BUS_MINUS, BUS_PLUS } from './wiring-graph.js';

/** Conductance that a blocked direction keeps, S. */
export const LEAK_S = 1e-6;

/** How a chain takes part in the network: as a resistor, as a conducting rectifier, or blocked but for its leak. */
export const CLOSED = 0;
export const FORWARD = 1;
export const LEAKING = 2;

/**
 * The network for one conducting pattern as a linear map:
 *
 *   I = A E + b I_bank,   V_bank = c . E + r I_bank
 *
 * I are chain currents (charging positive), E chain EMFs, I_bank the current into bus plus.
 */
export interface NetworkMap {
  readonly chains: number;
  /** A, row by row. */
  readonly currentPerEmf: Float64Array;
  readonly currentPerBank: Float64Array;
  readonly voltagePerEmf: Float64Array;
  readonly bankOhm: number;
  /** Constants beside the linear terms, of I and of V_bank: what equalisers drive; null and 0 without. */
  readonly offsetA: Float64Array | null;
  readonly openOffsetV: number;
}

/** Conductance of a chain of resistance `ohm` in state `state`, S. A conducting rectifier keeps its leak beside it. */
export function chainConductanceS(state: number, ohm: number): number {
  if (state === CLOSED) return 1 / ohm;
  return state === FORWARD ? 1 / ohm + LEAK_S : LEAK_S;
}

/**
 * Solves the network by node voltages.
 *
 *   G V = e_bus I_bank + sum_i g_i E_i d_i,   I_i = g_i (d_i . V - E_i)
 *
 * d_i has +1 at the positive and -1 at the negative end of chain i. Every chain keeps at least its leak, so each node has a
 * path to bus minus and G is positive definite. (Shunts at the nodes would do that too, but make like modules drift.)
 *
 * @param chainOhm total resistance of each chain, above 0
 * @param states CLOSED, FORWARD or LEAKING of each chain
 */
export function solveNetwork(wiring: ChainedWiring, chainOhm: Float64Array, states: Uint8Array): NetworkMap {
  const n = wiring.nodes - 1;
  const count = wiring.chains.length;
  const between = new Float64Array(n * n);
  const toGround = new Float64Array(n);
  const stamp = (from: number, to: number, g: number): void => {
    if (from === BUS_MINUS) toGround[to - 1] += g;
    else if (to === BUS_MINUS) toGround[from - 1] += g;
    else {
      between[(from - 1) * n + to - 1] += g;
      between[(to - 1) * n + from - 1] += g;
    }
  };
  for (const link of wiring.links) stamp(link.from, link.to, 1 / link.ohm);
  const g = Float64Array.from(wiring.chains, (_, i) => chainConductanceS(states[i], chainOhm[i]));
  wiring.chains.forEach((chain, i) => {
    stamp(chain.from, chain.to, g[i]);
  });
  // One case for a current of 1 A through each chain, one for 1 A into the bus.
  const nodeV = new Float64Array((count + 1) * n);
  const voltage = (through: number, node: number): number => (node === BUS_MINUS ? 0 : nodeV[through * n + node - 1]);
  wiring.chains.forEach((chain, i) => {
    if (chain.to !== BUS_MINUS) nodeV[i * n + chain.to - 1] += 1;
    if (chain.from !== BUS_MINUS) nodeV[i * n + chain.from - 1] -= 1;
  });
  nodeV[count * n + BUS_PLUS - 1] = 1;
  solveConductances(between, toGround, nodeV);

  const currentPerEmf = new Float64Array(count * count);
  const currentPerBank = new Float64Array(count);
  const voltagePerEmf = new Float64Array(count);
  wiring.chains.forEach(({ from, to }, i) => {
    currentPerBank[i] = g[i] * (voltage(count, to) - voltage(count, from));
    voltagePerEmf[i] = currentPerBank[i];
    for (let j = 0; j < count; j++) {
      const transfer = voltage(j, to) - voltage(j, from);
      currentPerEmf[i * count + j] = g[i] * (transfer * g[j] - (i === j ? 1 : 0));
    }
  });
  const bankOhm = voltage(count, BUS_PLUS);
  return { chains: count, currentPerEmf, currentPerBank, voltagePerEmf, bankOhm, offsetA: null, openOffsetV: 0 };
}
