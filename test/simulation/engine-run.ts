import { compileOcvCurves } from '../../src/bank/ocv-curves.js';
import { dutyCourse } from '../../src/duty/course.js';
import type { Journey } from '../../src/simulation/advance.js';
import { type BankSample, type Sampler, sampleStep } from '../../src/simulation/bank-sample.js';
import { runCourse } from '../../src/simulation/run-course.js';
import { startBank } from '../../src/simulation/simulate-instance.js';
import type { ComparedEvent, Waveform } from '../reference/contract.js';
import type { ReferenceBank } from '../reference/reference-bank.js';
import { studyOf } from '../reference/study-of.js';

/** What the engine made of a reference bank, in the words of the slow rewrite. */
export interface EngineRun {
  readonly journey: Journey;
  readonly events: readonly ComparedEvent[];
  readonly cycleEndCharge: readonly (readonly number[])[];
  readonly waveform: Waveform;
}

/**
 * Takes a reference bank through its cycles as a run does, visits and ageing included, sampled every `everyS` seconds
 * (never by default).
 */
export function runEngine(bank: ReferenceBank, everyS = Number.POSITIVE_INFINITY, toleranceFactor = 1): EngineRun {
  const modules = new Map(bank.modules.flat().map((module) => [module.id, module]));
  const study = studyOf(bank);
  const events: ComparedEvent[] = [];
  const samples: BankSample[] = [];
  const sampler: Sampler = { everyS, nextS: everyS, onSample: (sample) => samples.push(sample) };
  const prepared = { study, candidate: bank.candidate, ocv: compileOcvCurves(bank.ocvTables), toleranceFactor };
  const { journey, recorder, visits } = startBank(prepared, modules, {
    onEvent: ({ kind, timeS, module }) => {
      // The slow rewrite has visits, but no event of them.
      if (kind === 'upkeep-visit') return;
      const { positions } = journey.kernel.bank;
      events.push({
        timeS,
        // The slow rewrite calls the release of a lock a retry.
        kind: kind === 'over-current-unlock' ? 'over-current-retry' : kind,
        string: module < 0 ? null : Math.floor(module / positions) + 1,
        position: module < 0 ? null : (module % positions) + 1,
      });
    },
    onStep: (_, stepS) => sampleStep(sampler, journey, stepS),
  });
  const cycleEndCharge: number[][] = [];
  const keep = (): number => cycleEndCharge.push([...journey.kernel.state.charge]);
  const course = dutyCourse(study.duty, study.cycles);
  runCourse(journey, recorder, course, bank, (cycle) => cycle > 1 && keep(), visits);
  keep();
  return { journey, events, cycleEndCharge, waveform: waveformOfSamples(samples) };
}

function waveformOfSamples(samples: readonly BankSample[]): Waveform {
  const slots = samples[0]?.modules ?? [];
  return {
    timeS: samples.map(({ timeS }) => timeS),
    busV: samples.map(({ busV }) => busV),
    modules: slots.map(({ string, position }, m) => {
      const over = <T>(of: (module: BankSample['modules'][number]) => T): T[] => samples.map((s) => of(s.modules[m]));
      return {
        string,
        position,
        currentA: over(({ currentA }) => currentA),
        terminalV: over(({ terminalV }) => terminalV),
        cells: over(({ cellV }) => cellV.length)[0],
        lowestCharge: over(({ charge }) => Math.min(...charge)),
        highestCharge: over(({ charge }) => Math.max(...charge)),
        lowestCellV: over(({ cellV }) => Math.min(...cellV)),
        highestCellV: over(({ cellV }) => Math.max(...cellV)),
        chargeOpen: over(({ chargeOpen }) => chargeOpen),
        dischargeOpen: over(({ dischargeOpen }) => dischargeOpen),
      };
    }),
  };
}
