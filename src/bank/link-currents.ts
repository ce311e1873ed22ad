import { solveConductances } from '../mathematics/conductance-solve.js';
import type { ChainedWiring } from './chains.js';

/**
 * Currents of the links for given currents of the chains, as a linear map.
 *
 *   G V = sum_i I_i (e_from - e_to),   I_link = (V_from - V_to) / r_link
 *
 * G holds the bare resistors alone: what the chains put into their nodes and take out of them fixes what flows between,
 * whatever the state of the chains. Nodes between modules meet neither bus, so the bank current has no part in it. Each
 * part that resistors join is grounded at one node, which carries nothing since the chains' currents balance there.
 *
 * @returns link by link (link * chains + chain), for links that tie strings between their modules; empty without any
 */
export function linkCurrentPerChain({ nodes, chains, links }: ChainedWiring): Float64Array {
  const tied = links.filter(({ isLink }) => isLink);
  if (tied.length === 0) return new Float64Array(0);
  const between = new Float64Array(nodes * nodes);
  const part = Int32Array.from({ length: nodes }, (_, node) => node);
  for (const { from, to, ohm } of links) {
    between[from * nodes + to] += 1 / ohm;
    between[to * nodes + from] += 1 / ohm;
    const [keep, drop] = [Math.min(part[from], part[to]), Math.max(part[from], part[to])];
    part.forEach((own, node) => {
      if (own === drop) part[node] = keep;
    });
  }
  const toGround = Float64Array.from(part, (own, node) => (own === node ? 1 : 0));
  const nodeV = new Float64Array(chains.length * nodes);
  chains.forEach(({ from, to }, i) => {
    nodeV[i * nodes + from] += 1;
    nodeV[i * nodes + to] -= 1;
  });
  solveConductances(between, toGround, nodeV);
  const perChain = new Float64Array(tied.length * chains.length);
  tied.forEach(({ from, to, ohm }, link) => {
    for (let i = 0; i < chains.length; i++) {
      perChain[link * chains.length + i] = (nodeV[i * nodes + from] - nodeV[i * nodes + to]) / ohm;
    }
  });
  return perChain;
}
