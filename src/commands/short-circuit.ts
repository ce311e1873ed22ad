import type { ProspectiveCurrent } from '../simulation/prospective-current.js';
import type { Study } from '../study/study.js';

/** @returns one line for every candidate: its prospective short-circuit current */
export function shortCircuitLines(study: Study, currents: readonly ProspectiveCurrent[]): readonly string[] {
  return study.candidates.flatMap(({ key }, index) => {
    const current = currents[index];
    if (current === undefined) return [];
    const strings = current.stringA.map(amperes).join(', ');
    return [`${key}: ${amperes(current.bankA)} A at the bus, by string ${strings} A`];
  });
}

/** @returns where a string fuse is stated that cannot break what may flow through it */
export function breakingWarnings(study: Study, currents: readonly ProspectiveCurrent[]): readonly string[] {
  return study.candidates.flatMap(({ key, ratings }, index) => {
    const fuseA = currents[index]?.fuseA ?? 0;
    const breakingA = ratings?.fuseBreakingA ?? null;
    if (breakingA === null || fuseA <= breakingA) return [];
    const may = `a string fuse may have to break ${amperes(fuseA)} A`;
    return [`${may}, but its breaking capacity is ${amperes(breakingA)} A: take one that can break more (${key})`];
  });
}

function amperes(value: number): string {
  return String(Math.round(value));
}
