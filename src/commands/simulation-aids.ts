import { outcomeLayout } from '../outcomes/block.js';
import { outcomeColumns } from '../outcomes/columns.js';
import { prospectiveCurrent } from '../simulation/prospective-current.js';
import { prepareCandidate, simulateInstance, simulateTwin } from '../simulation/simulate-instance.js';
import type { Study } from '../study/study.js';
import type { CheckAids, Trial, TwinFacts } from './trial.js';

const TRIAL_MS = 2000;
/** Banks are tried over a part of a very long horizon only, so that the trial stays near its time. */
const TRIAL_CYCLES = 400;

/** What `check` needs of the simulation. */
export const simulationAids: CheckAids = {
  trial,
  twins,
  prospectiveCurrents: (study) => study.candidates.map((candidate) => prospectiveCurrent(study, candidate)),
};

/** Instance after instance of every candidate in turn until the time is over; the first round always ends. */
function trial(study: Study, now: () => number): Trial {
  const cycles = Math.min(study.cycles, TRIAL_CYCLES);
  const prepared = study.candidates.map(({ key }) => prepareCandidate({ ...study, cycles }, key));
  const start = now();
  let banks = 0;
  for (let instance = 1; banks === 0 || now() - start < TRIAL_MS; instance++) {
    for (const candidate of prepared) simulateInstance(candidate, instance);
    banks += prepared.length;
  }
  const seconds = Math.max(1, now() - start) / 1000;
  return { bankCyclesPerSecond: (banks * cycles) / seconds };
}

function twins(study: Study): readonly TwinFacts[] {
  return study.candidates.map((candidate) => {
    const prepared = prepareCandidate(study, candidate.key);
    const column = outcomeColumns(outcomeLayout(study, candidate)).findIndex(({ name }) => name === 'load_lost');
    return { losesLoad: simulateTwin(prepared).values[column] === 1, elapsedS: prepared.twin.log.elapsedS };
  });
}
