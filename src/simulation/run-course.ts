import type { DutyCycle } from '../duty/course.js';
import { lastLoadSegment } from '../duty/course.js';
import { NotConverged } from '../mathematics/not-converged.js';
import type { BankFactors } from '../sampling/bank-factors.js';
import type { Journey } from './advance.js';
import { ageAfterCycle } from './ageing.js';
import { beginCycle, endCycle, type Recorder } from './recorder.js';
import { runSegment, startCycle } from './run-cycle.js';
import { type VisitPlan, visitIfDue } from './upkeep.js';

/**
 * Takes a bank through a course, or through a part of one, and records every cycle.
 *
 * @param visits who comes to rebalance between cycles, null for nobody; after the last cycle nobody comes any more
 * @throws Error if a charge is no longer finite
 */
export function runCourse(
  journey: Journey,
  recorder: Recorder,
  course: readonly DutyCycle[],
  factors: BankFactors,
  onCycle: (cycle: number) => void = () => undefined,
  visits: VisitPlan | null = null,
): void {
  for (const [index, cycle] of course.entries()) {
    beginCycle(recorder);
    onCycle(recorder.cycle);
    startCycle(journey);
    const lastLoad = lastLoadSegment(cycle);
    cycle.segments.forEach((segment, place) => {
      recorder.loadAhead = place <= lastLoad;
      runSegment(journey, segment, factors);
    });
    endCycle(recorder, journey);
    if (!journey.kernel.state.charge.every(Number.isFinite)) {
      throw new NotConverged(`charge is not finite after cycle ${recorder.cycle}`);
    }
    if (journey.ageing !== null) ageAfterCycle(journey, journey.ageing);
    if (visits !== null && index + 1 < course.length) visitIfDue(visits, journey, recorder.cycle);
  }
}
