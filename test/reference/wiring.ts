import type { Tie } from './network.js';
import type { ReferenceBank } from './reference-bank.js';

/** Between which nodes each module or pack stands, with the leads in series with it, and what ties nodes. */
export interface Wiring {
  readonly nodes: number;
  /** Bank-wide, string by string from the negative end. */
  readonly places: readonly { readonly from: number; readonly to: number; readonly leadOhm: number }[];
  readonly ties: readonly Tie[];
}

const MINUS = 0;
const PLUS = 1;

/** The wiring of a bank; bus minus is node 0, bus plus node 1. */
export function wiringOf({ candidate, modules }: ReferenceBank): Wiring {
  const { network } = candidate;
  if (network !== undefined) return customWiring(network);
  const positions = candidate.wiring === 'native' ? 1 : modules[0].length;
  let nodes = 2;
  const ties: Tie[] = [];

  // Where each string meets minus and plus: the bus itself, or rails with segments from string to string.
  const { takeOff } = candidate;
  const railTo = (bus: number, ofBus: number): number[] => {
    if (takeOff === undefined) return modules.map(() => bus);
    const taps = modules.map((_, s) => (s === ofBus ? bus : nodes++));
    takeOff.segmentOhm.forEach((ohm, s) => {
      ties.push({ from: taps[s], to: taps[s + 1], ohm });
    });
    return taps;
  };
  const minus = railTo(MINUS, 0);
  const plus = railTo(PLUS, takeOff?.kind === 'diagonal' ? modules.length - 1 : 0);

  const places = modules.flatMap((_, s) => {
    const leads = candidate.leads[s];
    let below = minus[s];
    return Array.from({ length: positions }, (__, p) => {
      const from = below;
      const top = p === positions - 1;
      below = top ? plus[s] : nodes++;
      const leadOhm = (p === 0 ? leads.negativeOhm : leads.betweenOhm) + (top ? leads.positiveOhm : 0);
      return { from, to: below, leadOhm };
    });
  });
  if (candidate.wiring === 'cross-linked') {
    for (let k = 0; k + positions < places.length; k++) {
      if (k % positions === positions - 1) continue;
      ties.push({ from: places[k].to, to: places[k + positions].to, ohm: candidate.linkOhm });
    }
  }
  return { nodes, places, ties };
}

function customWiring({ nodes, branches }: NonNullable<ReferenceBank['candidate']['network']>): Wiring {
  const places: { from: number; to: number; leadOhm: number }[] = [];
  const ties: Tie[] = [];
  for (const branch of branches) {
    const { from, to } = branch;
    if (branch.kind === 'module') places[branch.module] = { from, to, leadOhm: 0 };
    else ties.push({ from, to, ohm: branch.ohm });
  }
  return { nodes, places, ties };
}
