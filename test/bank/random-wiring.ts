import fc from 'fast-check';
import { type Bank, buildBank } from '../../src/bank/bank.js';
import {
  type BankState,
  BOTH_WAYS,
  CHARGE_ONLY,
  createBankState,
  DISCHARGE_ONLY,
  NO_WAY,
} from '../../src/bank/bank-state.js';
import { CLOSED, FORWARD, LEAKING } from '../../src/bank/network.js';
import { compileOcvCurves } from '../../src/bank/ocv-curves.js';
import { type WiringGraph, wireCandidate } from '../../src/bank/wiring-graph.js';
import type { Candidate } from '../../src/study/study.js';
import { bankOf } from '../reference/bank-of.js';
import { bareModule, straightTable } from '../reference/bare-module.js';

/** A bank of bare modules as the network sees it. */
export interface Wired {
  readonly candidate: Candidate;
  readonly graph: WiringGraph;
  readonly bank: Bank;
}

/** What a wiring is made of; resistances in Ohm, modules [string][position]. */
export interface WiringSketch {
  readonly wiring: Candidate['wiring'];
  readonly moduleOhm: readonly (readonly number[])[];
  readonly leadOhm?: number;
  readonly linkOhm?: number;
}

/** Puts a sketch together; every lead has the same resistance. */
export function wired({ wiring, moduleOhm, leadOhm = 0.001, linkOhm = 0.001 }: WiringSketch): Wired {
  const modules = moduleOhm.map((string, s) =>
    string.map((pathResistanceOhm, p) => bareModule(`m${s}-${p}`, { pathResistanceOhm })),
  );
  const leads = modules.map(() => ({ negativeOhm: leadOhm, betweenOhm: leadOhm, positiveOhm: leadOhm }));
  const { candidate } = bankOf('wired', { modules, cycles: [], wiring, leads, linkOhm });
  const named = new Map(modules.flat().map((module) => [module.id, module]));
  const bank = buildBank(candidate, named, compileOcvCurves([straightTable(12, 1)]));
  return { candidate, graph: wireCandidate(candidate), bank };
}

/** Every wiring from 1S1P to 4S8P. */
export const wirings: readonly {
  readonly wiring: Candidate['wiring'];
  readonly positions: number;
  readonly strings: number;
}[] = (['strings', 'cross-linked', 'native'] as const).flatMap((wiring) =>
  [1, 2, 3, 4].flatMap((positions) => [1, 2, 3, 4, 5, 6, 7, 8].map((strings) => ({ wiring, positions, strings }))),
);

/** Resistances of random wirings: modules of 3 to 30 mOhm times `scale`, leads and links of 0.1 to 10 mOhm times it. */
export function sketchOf(
  { wiring, positions, strings }: (typeof wirings)[number],
  scale: number,
): fc.Arbitrary<WiringSketch> {
  const between = (low: number, high: number): fc.Arbitrary<number> =>
    fc.double({ min: Math.log(low * scale), max: Math.log(high * scale), noNaN: true }).map(Math.exp);
  const many = <T>(one: fc.Arbitrary<T>, count: number): fc.Arbitrary<T[]> =>
    fc.array(one, { minLength: count, maxLength: count });
  return fc.record({
    wiring: fc.constant(wiring),
    moduleOhm: many(many(between(0.003, 0.03), positions), strings),
    leadOhm: between(0.0001, 0.01),
    linkOhm: between(0.0001, 0.01),
  });
}

/** Sketches of random wirings of at most that many strings and positions. */
export function randomSketch(mostStrings = 8, mostPositions = 4): fc.Arbitrary<WiringSketch> {
  const some = wirings.filter(({ strings, positions }) => strings <= mostStrings && positions <= mostPositions);
  return fc.constantFrom(...some).chain((shape) => sketchOf(shape, 1));
}

/** What chains can be in: way, drop, conduction to start from, EMF. */
export interface ChainCase {
  readonly mode: number;
  readonly dropV: number;
  readonly start: number;
  readonly emfPerModuleV: number;
}

export const chainCase: fc.Arbitrary<ChainCase> = fc.record({
  mode: fc.constantFrom(BOTH_WAYS, DISCHARGE_ONLY, CHARGE_ONLY, NO_WAY),
  dropV: fc.constantFrom(0, 0.35, 0.7, 1.4),
  start: fc.constantFrom(FORWARD, LEAKING),
  emfPerModuleV: fc.double({ min: 11, max: 14.5, noNaN: true }),
});

/** A state of a bank whose chains are in the given cases (chain i in case i, over again if there are too few). */
export function stateOf(
  bank: Bank,
  cases: readonly ChainCase[],
): { readonly state: BankState; readonly emfV: Float64Array } {
  const state = createBankState(bank);
  const emfV = new Float64Array(state.conduction.length);
  bank.wiring.chains.forEach((chain, i) => {
    const { mode, dropV, start, emfPerModuleV } = cases[i % cases.length];
    state.chainMode[i] = mode;
    state.chainDropV[i] = dropV;
    state.conduction[i] = mode === BOTH_WAYS ? CLOSED : mode === NO_WAY ? LEAKING : start;
    emfV[i] = emfPerModuleV * chain.modules.length;
  });
  return { state, emfV };
}
