import type { ChainedWiring } from './chains.js';

/** What a chain has in all of a resistance that its cells have. */
export interface ChainSums {
  /** Sum over the modules of a chain of all resistances, leads included. */
  readonly chainOhm: Float64Array;
  /** Sum over the cells of a chain, pair by pair (pair * chains + chain). */
  readonly chainPolarisationOhm: Float64Array;
}

/** The parts of a bank that are summed along its chains. */
interface Summands {
  readonly wiring: ChainedWiring;
  readonly moduleOfCell: Int32Array;
  readonly chainOfModule: Int32Array;
  readonly pathOhm: Float64Array;
  readonly resistanceOhm: Float64Array;
  readonly polarisationOhm: Float64Array;
}

/** Sums the resistances along every chain. */
export function sumChains(summands: Summands): ChainSums {
  const { wiring, moduleOfCell, chainOfModule, pathOhm, resistanceOhm, polarisationOhm } = summands;
  const count = wiring.chains.length;
  const cells = resistanceOhm.length;
  const pairs = polarisationOhm.length / cells;
  const chainOhm = Float64Array.from(wiring.chains, (chain) => chain.ohm);
  const chainPolarisationOhm = new Float64Array(pairs * count);
  for (let m = 0; m < pathOhm.length; m++) chainOhm[chainOfModule[m]] += pathOhm[m];
  for (let c = 0; c < cells; c++) {
    const i = chainOfModule[moduleOfCell[c]];
    chainOhm[i] += resistanceOhm[c];
    for (let pair = 0; pair < pairs; pair++)
      chainPolarisationOhm[pair * count + i] += polarisationOhm[pair * cells + c];
  }
  return { chainOhm, chainPolarisationOhm };
}
