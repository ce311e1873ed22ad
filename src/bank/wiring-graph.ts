import type { Candidate } from '../study/study.js';

/**
 * A wiring as a graph. Node 0 is bus minus, node 1 bus plus; a module branch runs from its negative to its positive
 * post. Modules are numbered string by string from the negative end.
 */
export interface WiringGraph {
  readonly nodes: number;
  readonly branches: readonly WiringBranch[];
  /** Nodes at which something is connected beside the branches, so that what meets there need not carry one current. */
  readonly taps?: ReadonlySet<number>;
}

export type WiringBranch =
  | { readonly kind: 'module'; readonly module: number; readonly from: number; readonly to: number }
  | { readonly kind: 'lead' | 'link' | 'rail'; readonly ohm: number; readonly from: number; readonly to: number };

export const BUS_MINUS = 0;
export const BUS_PLUS = 1;

/**
 * The named wirings for any number of strings and positions: strings in parallel at the bus; cross-linked, where the
 * positive posts of equal positions are tied from each string to the next; native, one pack for each string.
 *
 * Strings meet at the bus in a star of equal leads, or each at a tap of its own on two rails with segments between
 * neighbouring taps (`TakeOff`). A custom wiring is its own graph.
 */
export function wireCandidate(candidate: Candidate): WiringGraph {
  if (candidate.wiring === 'custom') {
    if (candidate.network === undefined) throw new RangeError('a custom wiring must have a network');
    return candidate.network;
  }
  const positions = candidate.wiring === 'native' ? 1 : candidate.strings[0].length;
  const branches: WiringBranch[] = [];
  let nodes = 2;
  const taps: number[][] = [];
  const rails = railsOf(candidate);
  nodes += rails.added;
  candidate.strings.forEach((_, string) => {
    const leads = candidate.leads[string];
    const stringTaps: number[] = [];
    let below = nodes++;
    branches.push({ kind: 'lead', ohm: leads.negativeOhm, from: rails.minus[string], to: below });
    for (let position = 0; position < positions; position++) {
      const post = nodes++;
      branches.push({ kind: 'module', module: string * positions + position, from: below, to: post });
      if (position === positions - 1) {
        branches.push({ kind: 'lead', ohm: leads.positiveOhm, from: post, to: rails.plus[string] });
      } else {
        stringTaps.push(post);
        below = nodes++;
        branches.push({ kind: 'lead', ohm: leads.betweenOhm, from: post, to: below });
      }
    }
    taps.push(stringTaps);
  });
  if (candidate.wiring === 'cross-linked') {
    for (let string = 1; string < taps.length; string++) {
      taps[string].forEach((tap, position) => {
        branches.push({ kind: 'link', ohm: candidate.linkOhm, from: taps[string - 1][position], to: tap });
      });
    }
  }
  rails.segmentOhm.forEach((ohm, segment) => {
    for (const rail of [rails.minus, rails.plus]) {
      branches.push({ kind: 'rail', ohm, from: rail[segment], to: rail[segment + 1] });
    }
  });
  return candidate.equaliser === undefined ? { nodes, branches } : { nodes, branches, taps: new Set(taps.flat()) };
}

/** Nodes at which each string meets the two rails; in a star all are the bus. `added` counts those beside the bus. */
function railsOf({ strings, takeOff }: Candidate) {
  const count = strings.length;
  if (takeOff === undefined || count === 1) {
    const star = (node: number): number[] => new Array<number>(count).fill(node);
    return { minus: star(BUS_MINUS), plus: star(BUS_PLUS), segmentOhm: [], added: 0 };
  }
  let node = 2;
  const rail = (bus: number, tapOfBus: number): number[] =>
    strings.map((_, string) => (string === tapOfBus ? bus : node++));
  const minus = rail(BUS_MINUS, 0);
  const plus = rail(BUS_PLUS, takeOff.kind === 'same-end' ? 0 : count - 1);
  return { minus, plus, segmentOhm: takeOff.segmentOhm, added: 2 * (count - 1) };
}
