import type { Bank } from '../bank/bank.js';
import type { BankCircuit } from '../bank/circuit.js';
import type { BankEvent } from '../bank/events.js';
import { compileOcvCurves } from '../bank/ocv-curves.js';
import { dutyCourse } from '../duty/course.js';
import { type BankFactors, sampleBankFactors } from '../sampling/bank-factors.js';
import { sampleModules } from '../sampling/sample-modules.js';
import type { Study } from '../study/study.js';
import { type BankSample, type Sampler, sampleStep } from './bank-sample.js';
import { runCourse } from './run-course.js';
import { startBank } from './simulate-instance.js';
import { type CircuitTracer, createCircuitTracer, leaveOut, withoutAmbientCourse } from './trace-circuit.js';
import { visitIfDue } from './upkeep.js';

/** Which bank, and which of its cycles (from 1, inclusive), to look at every so many seconds. */
export interface TraceWindow {
  readonly candidate: string;
  readonly instance: number;
  readonly fromCycle: number;
  readonly toCycle: number;
  readonly everyS: number;
  /** From the start of the window on the bank goes without what its circuit leaves out. */
  readonly likeForLike?: boolean | undefined;
  /** Factor on every tolerance of the stepper; runs use 1, comparisons of its laws alone less. */
  readonly toleranceFactor?: number | undefined;
}

/** A sampled bank looked at in motion. */
export interface Trace {
  /** As it is before its course. */
  readonly bank: Bank;
  readonly factors: BankFactors;
  readonly samples: readonly CycleSample[];
  readonly events: readonly CycleEvent[];
  /** The window as a circuit. */
  readonly circuit: BankCircuit;
}

export type CycleSample = BankSample & { readonly cycle: number };
export type CycleEvent = BankEvent & { readonly cycle: number };

/**
 * Replays one instance up to the end of a window of cycles, exactly as a run simulates it up to the window and, unless
 * like for like with a circuit, in it; keeps what happens in the window. Looking does not change the steps.
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
  let tracer: CircuitTracer | null = null;
  const { journey, recorder, visits } = startBank(
    { study, candidate, ocv: compileOcvCurves(study.ocvTables), toleranceFactor: window.toleranceFactor ?? 1 },
    sampleModules(study, window.instance),
    {
      onEvent: (event) => {
        tracer?.onEvent(event);
        if (recorder.cycle >= window.fromCycle) events.push({ ...event, cycle: recorder.cycle });
      },
      onStep: (moving, stepS) => {
        sampleStep(sampler, moving, stepS);
        tracer?.onStep();
      },
    },
  );
  const { bank } = journey.kernel;
  const course = dutyCourse(study.duty, window.toCycle);
  const before = window.fromCycle - 1;
  runCourse(journey, recorder, course.slice(0, before), factors, undefined, visits);
  if (visits !== null && before > 0) visitIfDue(visits, journey, before);

  const cycles = course.slice(before);
  const circuit = createCircuitTracer(journey, candidate, cycles);
  tracer = circuit;
  sampler.nextS = journey.kernel.nowS;
  if (window.likeForLike === true) {
    leaveOut(journey);
    runCourse(journey, recorder, withoutAmbientCourse(cycles), factors, circuit.onCycle);
  } else {
    runCourse(journey, recorder, cycles, factors, circuit.onCycle, visits);
  }
  return { bank, factors, samples, events, circuit: circuit.finish() };
}
