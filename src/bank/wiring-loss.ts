import { solveConductances } from '../mathematics/conductance-solve.js';
import type { ChainedWiring } from './chains.js';
import { BUS_MINUS, BUS_PLUS } from './wiring-graph.js';

/**
 * Heat in the leads and links of a wiring as a quadratic form of its chain currents, and the bus current as a sum of them:
 *
 *   P = sum_i lead_i I_i^2 + sum_l (t_l . I)^2,   I_bank = sum_i s_i I_i
 *
 * with t_l I the voltage across link l over the root of its resistance. Currents in links follow from those of the chains
 * by Kirchhoff's laws among the links alone.
 */
export interface WiringLoss {
  readonly leadOhm: Float64Array;
  /** t, row by row, root of Ohm. */
  readonly linkRows: Float64Array;
  /** s: 1 where a chain ends at bus plus, or where links join its end to it. */
  readonly busShare: Float64Array;
}

export function wiringLossOf({ nodes, chains, links }: ChainedWiring): WiringLoss {
  const count = chains.length;
  const group = groupsOf(nodes, links);
  // The bus nodes are the ground of their groups, any node that of another.
  const groundOf = new Map<number, number>([...group.entries()].map(([node, of]) => [of, node]));
  groundOf.set(group[BUS_MINUS], BUS_MINUS);
  groundOf.set(group[BUS_PLUS], BUS_PLUS);
  const number = new Map<number, number>();
  group.forEach((of, node) => {
    if (groundOf.get(of) !== node) number.set(node, number.size);
  });
  const n = number.size;
  const between = new Float64Array(n * n);
  const toGround = new Float64Array(n);
  for (const { from, to, ohm } of links) {
    const [a, b] = [number.get(from), number.get(to)];
    if (a !== undefined && b !== undefined) {
      between[a * n + b] += 1 / ohm;
      between[b * n + a] += 1 / ohm;
    } else if (a !== undefined) toGround[a] += 1 / ohm;
    else if (b !== undefined) toGround[b] += 1 / ohm;
  }
  // One case for 1 A through each chain: it leaves the links at its positive end and comes back at its negative end.
  const nodeV = new Float64Array(count * n);
  chains.forEach(({ from, to }, i) => {
    const [a, b] = [number.get(from), number.get(to)];
    if (a !== undefined) nodeV[i * n + a] += 1;
    if (b !== undefined) nodeV[i * n + b] -= 1;
  });
  if (n > 0) solveConductances(between, toGround, nodeV);
  const linkRows = new Float64Array(links.length * count);
  links.forEach(({ from, to, ohm }, l) => {
    for (let i = 0; i < count; i++) {
      const voltage = (node: number): number => {
        const at = number.get(node);
        return at === undefined ? 0 : nodeV[i * n + at];
      };
      linkRows[l * count + i] = (voltage(from) - voltage(to)) / Math.sqrt(ohm);
    }
  });
  const atPlus = (node: number): number => (group[node] === group[BUS_PLUS] ? 1 : 0);
  return {
    leadOhm: Float64Array.from(chains, ({ ohm }) => ohm),
    linkRows,
    busShare: Float64Array.from(chains, ({ from, to }) => atPlus(to) - atPlus(from)),
  };
}

/** Heat of the chain currents `amperes`, W. */
export function wiringLossW({ leadOhm, linkRows }: WiringLoss, amperes: Float64Array): number {
  const count = leadOhm.length;
  let watts = 0;
  for (let i = 0; i < count; i++) watts += leadOhm[i] * amperes[i] * amperes[i];
  for (let row = 0; row < linkRows.length; row += count) {
    let sum = 0;
    for (let i = 0; i < count; i++) sum += linkRows[row + i] * amperes[i];
    watts += sum * sum;
  }
  return watts;
}

/** Number of the group of nodes joined by links that each node belongs to. */
function groupsOf(nodes: number, links: ChainedWiring['links']): number[] {
  const group = Array.from({ length: nodes }, (_, node) => node);
  for (const { from, to } of links) {
    const [kept, merged] = [group[from], group[to]];
    group.forEach((of, node) => {
      if (of === merged) group[node] = kept;
    });
  }
  return group;
}
