import { firstCrossing } from '../mathematics/first-crossing.js';
import type { Journey } from './advance.js';
import { updateExtremes } from './kernel.js';
import { evaluateWithin, LEAST_STEP_S, tryStep } from './step.js';
import { nextTurned, pastChange, updateValues, type Watch } from './watch.js';

/** Width to which an event is bracketed by interpolation, share of the step. */
const EVENT_TOLERANCE = 0.01;
/** Time by which a step may end after its event, s; judged by the rate of the condition. */
const MOST_LATE_S = 0.02;
const MOST_CORRECTIONS = 3;
/** Change of length that a correction may make, share of the step. */
const MOST_CORRECTION = 0.2;

/** Conditions that the latest attempt has turned over; null, without a new array, in the many steps that turn none. */
export function turnedConditions(watch: Watch): number[] | null {
  const first = nextTurned(watch, 0);
  if (first < 0) return null;
  const turned = [first];
  for (let at = nextTurned(watch, first + 1); at >= 0; at = nextTurned(watch, at + 1)) turned.push(at);
  return turned;
}

/**
 * Cuts the latest attempt just after the first instant at which one of `turned` turns over, takes it anew to there, and
 * leaves in `turned` the conditions that have turned over by then.
 *
 * The instant is sought by interpolation inside the attempt, then put right with steps of the length found: what is
 * interpolated misses a slow crossing by seconds.
 */
export function cutAtEvent(journey: Journey, turned: number[]): void {
  const { kernel, terminal, watch, work, toleranceFactor } = journey;
  const stepS = work.stepS;
  const furthest = (values: Float64Array): number => {
    let most = Number.NEGATIVE_INFINITY;
    for (const at of turned) most = Math.max(most, pastChange(watch, at, values[at]));
    return most;
  };
  const startValue = furthest(watch.startValue);
  if (startValue >= 0) {
    takeAnew(journey, LEAST_STEP_S);
  } else {
    const pastAt = (theta: number): number => {
      evaluateWithin(kernel, work, theta);
      updateValues(kernel, terminal, watch, kernel.point.currentA, kernel.point.bankA, kernel.point.bankV);
      return furthest(watch.value);
    };
    const whole = { low: 0, lowValue: startValue, high: 1, highValue: furthest(watch.value) };
    const crossing = firstCrossing(pastAt, whole, toleranceFactor * EVENT_TOLERANCE);
    const perS = (crossing.highValue - crossing.lowValue) / ((crossing.high - crossing.low) * stepS);
    takeAnew(journey, Math.max(LEAST_STEP_S, crossing.high * stepS));
    const lateS = toleranceFactor * MOST_LATE_S;
    for (let correction = 0; correction < MOST_CORRECTIONS && work.stepS > LEAST_STEP_S; correction++) {
      const late = furthest(watch.value) / perS;
      if ((late >= 0 && late <= lateS) || Math.abs(late) > MOST_CORRECTION * stepS) break;
      takeAnew(journey, Math.min(stepS, Math.max(LEAST_STEP_S, work.stepS - late + 0.25 * lateS)));
    }
  }
  // The first one counts as turned over even if the last correction left it a little short.
  const first = Math.min(0, furthest(watch.value));
  turned.splice(0, turned.length, ...turned.filter((at) => pastChange(watch, at, watch.value[at]) >= first));
}

/** Takes the step again with another length and brings all values to its end. */
function takeAnew({ kernel, terminal, watch, work }: Journey, stepS: number): void {
  tryStep(kernel, work, stepS);
  updateExtremes(kernel, work.lastA, work.endFilterA);
  updateValues(kernel, terminal, watch, work.lastA, work.endBankA, work.endBankV);
}
