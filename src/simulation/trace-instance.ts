import type { Bank } from '../bank/bank.js';
import type { BankEvent } from '../bank/events.js';
import { compileOcvCurves } from '../bank/ocv-curves.js';
import { dutyCourse } from '../duty/course.js';
import { type BankFactors, sampleBankFactors } from '../sampling/bank-factors.js';
import { sampleModules } from '../sampling/sample-modules.js';
import type { Study } from '../study/study.js';
import { type BankSample, type Sampler, sampleStep } from './bank-sample.js';
import { runCourse } from './run-course.js';
import { startBank } from './simulate-instance.js';

/** Which bank, and which of its cycles (from 1, inclusive), to look at every so many seconds. */
export interface TraceWindow {
  readonly candidate: string;
  readonly instance: number;
  readonly fromCycle: number;
  readonly toCycle: number;
  readonly everyS: number;
}

/** A sampled bank looked at in motion. */
export interface Trace {
  readonly bank: Bank;
  readonly factors: BankFactors;
  readonly samples: readonly CycleSample[];
  readonly events: readonly CycleEvent[];
}

export type CycleSample = BankSample & { readonly cycle: number };
export type CycleEvent = BankEvent & { readonly cycle: number };

/**
 * Replays one instance up to the end of a window of cycles, exactly as a run simulates it, and keeps what happens in the
 * window. Looking does not change the steps.
 *
 * @throws RangeError if the study has no such candidate
 */
export function traceInstance(study: Study, window: TraceWindow): Trace {
  const candidate = study.candidates.find(({ key }) => key === window.candidate);
  if (candidate === undefined) throw new RangeError(`study must have a candidate ${window.candidate}`);
  const factors = sampleBankFactors(study, window.instance);
  const samples: CycleSample[] = [];
  const events: CycleEvent[] = [];
  const sampler: Sampler = {
    everyS: window.everyS,
    nextS: Number.POSITIVE_INFINITY,
    onSample: (sample) => samples.push({ ...sample, cycle: recorder.cycle }),
  };
  const { journey, recorder, visits } = startBank(
    { study, candidate, ocv: compileOcvCurves(study.ocvTables), toleranceFactor: 1 },
    sampleModules(study, window.instance),
    {
      onEvent: (event) => {
        if (recorder.cycle >= window.fromCycle) events.push({ ...event, cycle: recorder.cycle });
      },
      onStep: (moving, stepS) => sampleStep(sampler, moving, stepS),
    },
  );
  const { bank } = journey.kernel;
  const onCycle = (cycle: number): void => {
    if (cycle === window.fromCycle) sampler.nextS = journey.kernel.nowS;
  };
  runCourse(journey, recorder, dutyCourse(study.duty, window.toCycle), factors, onCycle, visits);
  return { bank, factors, samples, events };
}
