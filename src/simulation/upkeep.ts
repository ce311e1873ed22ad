import { agedBank } from '../bank/aged-bank.js';
import type { Bank } from '../bank/bank.js';
import { createBankState } from '../bank/bank-state.js';
import { clearLatches } from '../bank/latches.js';
import type { OcvCurves } from '../bank/ocv-curves.js';
import { driftNow } from '../measures/drift.js';
import type { Candidate, ModuleParameters, Upkeep } from '../study/study.js';
import type { Journey } from './advance.js';
import { type Bench, chargeOnBench, createBench } from './bench.js';
import { stopClocks } from './watch.js';

/** Time by which the end of a cycle may fall short of a whole number of days: sums of hours are not exact, s. */
const SLACK_S = 1;

/** The visits to one bank: what brings them, and when the latest was. */
export interface VisitPlan {
  readonly upkeep: Upkeep;
  /** One per module of the bank, in order. */
  readonly benches: readonly Bench[];
  lastCycle: number;
  lastS: number;
}

/** @returns the visits to a bank of the candidate, null if nobody comes */
export function planVisits(
  bank: Bank,
  candidate: Candidate,
  moduleNamed: ReadonlyMap<string, ModuleParameters>,
  ocv: OcvCurves,
  toleranceFactor: number,
): VisitPlan | null {
  if (candidate.upkeep === undefined) return null;
  const absorptionV = candidate.charger.absorptionV / bank.positions;
  const wiring = candidate.wiring === 'native' ? 'native' : 'strings';
  const apart = wiring === 'native' ? candidate.strings : candidate.strings.flat().map((id) => [id]);
  const benches = apart.map((ids) =>
    createBench(candidate, wiring, ids, absorptionV, moduleNamed, ocv, toleranceFactor),
  );
  return { upkeep: candidate.upkeep, benches, lastCycle: 0, lastS: 0 };
}

/**
 * Visits the bank if it is time, at the end of `cycle` (from 1): latches and locks are cleared, every module is charged
 * alone to full and left to rest. To the duty the visit takes no time (own choice): the next cycle follows at once.
 */
export function visitIfDue(plan: VisitPlan, journey: Journey, cycle: number): void {
  if (!isDue(plan, journey, cycle)) return;
  const { nowS } = journey.kernel;
  journey.onEvent({ kind: 'upkeep-visit', timeS: nowS, module: -1, cell: -1 });
  plan.lastCycle = cycle;
  plan.lastS = nowS;
  rebalance(plan.benches, journey);
}

function isDue({ upkeep, lastCycle, lastS }: VisitPlan, { kernel }: Journey, cycle: number): boolean {
  if ('everyCycles' in upkeep) return cycle - lastCycle >= upkeep.everyCycles;
  if ('everyS' in upkeep) return kernel.nowS - lastS >= upkeep.everyS - SLACK_S;
  const { bank, state } = kernel;
  return (driftNow(bank, state).moduleAh ?? 0) > upkeep.driftFraction * bank.driftRatedAh;
}

function rebalance(benches: readonly Bench[], { kernel, watch, ageing }: Journey): void {
  const { bank, state } = kernel;
  clearLatches(bank, state);
  benches.forEach((asWritten, m) => {
    const [first, end] = [bank.cellStart[m], bank.cellStart[m + 1]];
    const bench =
      ageing === null ? asWritten : { ...asWritten, bank: agedBank(asWritten.bank, ageing.left.subarray(first, end)) };
    const alone = createBankState(bench.bank);
    alone.charge.set(state.charge.subarray(first, end));
    alone.hysteresis.set(state.hysteresis.subarray(first, end));
    chargeOnBench(bench, alone);
    state.charge.set(alone.charge, first);
    state.hysteresis.set(alone.hysteresis, first);
  });
  state.bleeding.fill(0);
  state.filterA.fill(0);
  state.offsetFilterA.fill(0);
  stopClocks(watch);
}
