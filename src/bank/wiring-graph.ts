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
  | { readonly kind: 'lead' | 'link'; readonly ohm: number; readonly from: number; readonly to: number };

export const BUS_MINUS = 0;
export const BUS_PLUS = 1;

/**
 * The named wirings for any number of strings and positions: strings in parallel at the bus; cross-linked, where the
 * positive posts of equal positions are tied from each string to the next; native, one pack for each string.
 */
export function wireCandidate(candidate: Candidate): WiringGraph {
  const positions = candidate.wiring === 'native' ? 1 : candidate.strings[0].length;
  const branches: WiringBranch[] = [];
  let nodes = 2;
  const taps: number[][] = [];
  candidate.strings.forEach((_, string) => {
    const leads = candidate.leads[string];
    const stringTaps: number[] = [];
    let below = nodes++;
    branches.push({ kind: 'lead', ohm: leads.negativeOhm, from: BUS_MINUS, to: below });
    for (let position = 0; position < positions; position++) {
      const post = nodes++;
      branches.push({ kind: 'module', module: string * positions + position, from: below, to: post });
      if (position === positions - 1) {
        branches.push({ kind: 'lead', ohm: leads.positiveOhm, from: post, to: BUS_PLUS });
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
  return candidate.equaliser === undefined ? { nodes, branches } : { nodes, branches, taps: new Set(taps.flat()) };
}
