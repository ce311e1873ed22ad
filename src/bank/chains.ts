import { BUS_MINUS, BUS_PLUS, type WiringGraph } from './wiring-graph.js';

/**
 * A wiring reduced to what Kirchhoff's laws need: chains of modules that always carry one current, and bare resistors,
 * between the nodes where more than two branches meet.
 */
export interface ChainedWiring {
  /** Junctions, bus minus (0) and bus plus (1) first. */
  readonly nodes: number;
  readonly chains: readonly Chain[];
  readonly links: readonly {
    readonly from: number;
    readonly to: number;
    readonly ohm: number;
    /** A link ties strings to one another between their modules; other resistors belong to rails and leads. */
    readonly isLink: boolean;
  }[];
}

export interface Chain {
  readonly from: number;
  readonly to: number;
  /** In the direction from negative to positive. */
  readonly modules: readonly number[];
  /** Leads in series with the modules. */
  readonly ohm: number;
}

/**
 * Reduces a graph by walking from junction to junction through nodes of two branches.
 *
 * @throws RangeError if a path holds modules of opposite direction or an end hangs in the air
 */
export function chainWiring(graph: WiringGraph): ChainedWiring {
  const at: number[][] = Array.from({ length: graph.nodes }, () => []);
  graph.branches.forEach((branch, index) => {
    at[branch.from].push(index);
    at[branch.to].push(index);
  });
  const isJunction = at.map(
    (ends, node) => node === BUS_MINUS || node === BUS_PLUS || ends.length > 2 || graph.taps?.has(node) === true,
  );
  const nodeOf = new Map<number, number>();
  isJunction.forEach((junction, node) => {
    if (junction) nodeOf.set(node, nodeOf.size);
  });
  const nodeAt = (junction: number): number => nodeOf.get(junction) ?? BUS_MINUS;

  const chains: Chain[] = [];
  const links: { from: number; to: number; ohm: number; isLink: boolean }[] = [];
  const walked = new Set<number>();
  for (const start of nodeOf.keys()) {
    for (const first of at[start]) {
      if (walked.has(first)) continue;
      let node = start;
      let index = first;
      let ohm = 0;
      let isLink = false;
      const forward: number[] = [];
      const backward: number[] = [];
      for (;;) {
        walked.add(index);
        const branch = graph.branches[index];
        const onward = branch.from === node;
        if (branch.kind === 'module') (onward ? forward : backward).push(branch.module);
        else {
          ohm += branch.ohm;
          if (branch.kind === 'link') isLink = true;
        }
        node = onward ? branch.to : branch.from;
        if (isJunction[node]) break;
        const next = at[node].find((other) => other !== index);
        if (next === undefined) throw new RangeError(`wiring node ${node} must be connected on both sides`);
        index = next;
      }
      const from = nodeAt(start);
      const to = nodeAt(node);
      if (forward.length > 0 && backward.length > 0) {
        throw new RangeError(`modules ${forward[0]} and ${backward[0]} must point the same way along their path`);
      }
      if (forward.length > 0) chains.push({ from, to, modules: forward, ohm });
      else if (backward.length > 0) chains.push({ from: to, to: from, modules: backward.reverse(), ohm });
      else links.push({ from, to, ohm, isLink });
    }
  }
  chains.sort((a, b) => a.modules[0] - b.modules[0]);
  return { nodes: nodeOf.size, chains, links };
}
