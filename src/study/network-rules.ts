import type { CustomNetwork } from './study.js';

const BUS_MINUS = 0;
const BUS_PLUS = 1;

/** Where a network breaks a rule: a node, a branch or a module by its number. */
export interface NetworkFault {
  readonly place:
    | { readonly kind: 'node' | 'branch' | 'module'; readonly index: number }
    | { readonly kind: 'bus-plus'; readonly index: 1 };
  readonly message: string;
}

/**
 * Modules between bus minus and each node.
 *
 * A module raises the level by one from its minus to its plus, a conductor keeps it. Two ways to one node that disagree
 * would drive the difference, a module's whole voltage, through conductors: a short.
 *
 * @returns level of each node, undefined where it is not connected; branches that contradict the levels found before them
 */
export function levelsOf({ nodes, branches }: CustomNetwork): {
  readonly level: readonly (number | undefined)[];
  readonly contradictions: readonly number[];
} {
  const level: (number | undefined)[] = new Array<number | undefined>(nodes).fill(undefined);
  level[BUS_MINUS] = 0;
  for (let grown = true; grown; ) {
    grown = false;
    for (const branch of branches) {
      const rise = branch.kind === 'module' ? 1 : 0;
      const [from, to] = [level[branch.from], level[branch.to]];
      if (from !== undefined && to === undefined) level[branch.to] = from + rise;
      else if (to !== undefined && from === undefined) level[branch.from] = to - rise;
      else continue;
      grown = true;
    }
  }
  const contradictions = branches.flatMap((branch, index) => {
    const [from, to] = [level[branch.from], level[branch.to]];
    if (from === undefined || to === undefined) return [];
    return to - from === (branch.kind === 'module' ? 1 : 0) ? [] : [index];
  });
  return { level, contradictions };
}

/** @returns everything that keeps a network of known names from being a bank of so many positions */
export function faultyPlaces(network: CustomNetwork, positions: number): readonly NetworkFault[] {
  const { nodes, branches } = network;
  const { level, contradictions } = levelsOf(network);
  const meets = new Array<number>(nodes).fill(0);
  for (const { from, to } of branches) {
    meets[from] = (meets[from] ?? 0) + 1;
    meets[to] = (meets[to] ?? 0) + 1;
  }
  const faults: NetworkFault[] = [];
  meets.forEach((count, index) => {
    const least = index === BUS_MINUS || index === BUS_PLUS ? 1 : 2;
    const rule = least === 1 ? 'a node that a branch meets' : 'a node that two branches or more meet';
    if (count < least) faults.push({ place: { kind: 'node', index }, message: `must be ${rule}, got ${count}` });
    else if (level[index] === undefined) {
      faults.push({ place: { kind: 'node', index }, message: 'must be a node connected with bus_minus, got none' });
    }
  });
  for (const index of contradictions) {
    const message =
      branches[index]?.kind === 'module'
        ? 'must be a module that no conductor shorts and no other way runs against, got another count of modules between its posts'
        : 'must be a conductor between nodes with equally many modules below them, got a short of modules';
    faults.push({ place: { kind: 'branch', index }, message });
  }
  if (faults.length > 0) return faults;
  if (level[BUS_PLUS] !== positions) {
    const message = `must be a node with ${positions} modules between it and bus_minus, got ${level[BUS_PLUS]}`;
    return [{ place: { kind: 'bus-plus', index: BUS_PLUS }, message }];
  }
  return [...misplaced(network, positions, level), ...dividedChains(network, positions, meets)];
}

function misplaced(
  { branches }: CustomNetwork,
  positions: number,
  level: readonly (number | undefined)[],
): readonly NetworkFault[] {
  return branches.flatMap((branch): readonly NetworkFault[] => {
    if (branch.kind !== 'module') return [];
    const below = level[branch.from] ?? 0;
    if (below === branch.module % positions) return [];
    const message = `must be a module with ${branch.module % positions} modules below it in the network, got ${below}`;
    return [{ place: { kind: 'module', index: branch.module }, message }];
  });
}

/** Modules that meet nothing but each other and conductors in series carry one current: they make up a string. */
function dividedChains(
  { nodes, branches }: CustomNetwork,
  positions: number,
  meets: readonly number[],
): readonly NetworkFault[] {
  const chain = branches.map((_, index) => index);
  for (let node = 0; node < nodes; node++) {
    if (node === BUS_MINUS || node === BUS_PLUS || meets[node] !== 2) continue;
    const [first, second] = branches.flatMap(({ from, to }, index) => (from === node || to === node ? [index] : []));
    if (first === undefined || second === undefined) continue;
    const [keep, drop] = [chain[first], chain[second]];
    chain.forEach((own, index) => {
      if (own === drop && keep !== undefined) chain[index] = keep;
    });
  }
  const stringOf = new Map<number, number>();
  const faults: NetworkFault[] = [];
  branches.forEach((branch, index) => {
    if (branch.kind !== 'module') return;
    const own = chain[index] ?? index;
    const string = Math.floor(branch.module / positions);
    const known = stringOf.get(own) ?? string;
    stringOf.set(own, known);
    if (known === string) return;
    const message = `must be a module in string ${known + 1}, with those that always carry its current, got string ${string + 1}`;
    faults.push({ place: { kind: 'module', index: branch.module }, message });
  });
  return faults;
}
