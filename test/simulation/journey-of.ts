import { buildBank } from '../../src/bank/bank.js';
import { createBankState } from '../../src/bank/bank-state.js';
import { compileOcvCurves } from '../../src/bank/ocv-curves.js';
import { createJourney, type Journey, type JourneyListeners } from '../../src/simulation/advance.js';
import { runSegment, startCycle } from '../../src/simulation/run-cycle.js';
import type { ReferenceBank } from '../reference/reference-bank.js';

/** The engine at the beginning of a reference bank's first cycle. */
export function journeyOf(
  bank: ReferenceBank,
  listeners: Partial<JourneyListeners> = {},
  toleranceFactor = 1,
): Journey {
  const named = new Map(bank.modules.flat().map((module) => [module.id, module]));
  const built = buildBank(bank.candidate, named, compileOcvCurves(bank.ocvTables));
  const { charger, load } = bank.candidate;
  return createJourney(built, createBankState(built), charger, load, listeners, toleranceFactor);
}

/** Takes a bank through all its cycles. */
export function runThrough(
  bank: ReferenceBank,
  listeners: Partial<JourneyListeners> = {},
  toleranceFactor = 1,
): Journey {
  const journey = journeyOf(bank, listeners, toleranceFactor);
  for (const cycle of bank.cycles) {
    startCycle(journey);
    for (const segment of cycle) runSegment(journey, segment, bank);
  }
  return journey;
}

/** What happens to a bank: times to a tenth of a second, with the module where there are several. */
export function storyOf(bank: ReferenceBank): string[] {
  const several = bank.modules.flat().length > 1;
  const story: string[] = [];
  runThrough(bank, {
    onEvent: ({ kind, timeS, module }) => {
      story.push(`${timeS.toFixed(1)} ${kind}${several && module >= 0 ? ` ${module + 1}` : ''}`);
    },
  });
  return story;
}
