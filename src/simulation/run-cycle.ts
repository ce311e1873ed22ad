import type { BankFactors } from '../sampling/bank-factors.js';
import type { DutySegment } from '../study/study.js';
import { advance, type Journey, settleJourney } from './advance.js';
import { resetChatter } from './chatter.js';
import { takeAmbient } from './climate.js';

/** Starts a cycle: a charger that restarts at each cycle works towards absorption again. */
export function startCycle(journey: Journey): void {
  const { terminal, kernel } = journey;
  if (terminal.charger.restart !== 'each-cycle' || terminal.charging) return;
  terminal.charging = true;
  journey.onEvent({ kind: 'charge-restart', timeS: kernel.nowS, module: -1, cell: -1 });
}

/**
 * Lets the bank go through one segment of its duty: to its end, until it is charged if the segment says so, or until
 * `stop`, which is asked after every event.
 */
export function runSegment(
  journey: Journey,
  segment: DutySegment,
  factors: BankFactors,
  stop: () => boolean = () => false,
): void {
  const { terminal, kernel } = journey;
  terminal.demandW = segment.loadW * factors.loadFactor;
  terminal.demandA = segment.loadA * factors.loadFactor;
  terminal.chargeW = segment.chargeW === null ? Number.POSITIVE_INFINITY : segment.chargeW * factors.chargeFactor;
  const isDone = (): boolean => (segment.endsWhenCharged && !terminal.charging) || stop();
  resetChatter(journey.chatter);
  if (journey.climate !== null) takeAmbient(journey, journey.climate, segment.ambientK);
  settleJourney(journey);
  if (!isDone()) advance(journey, kernel.nowS + segment.durationS, isDone);
}
