import type { Bank } from '../bank/bank.js';
import { buildBank } from '../bank/bank.js';
import { compileOcvCurves, type OcvCurves } from '../bank/ocv-curves.js';
import { type DutyCycle, dutyCourse } from '../duty/course.js';
import type { BankAccount } from '../measures/bank-account.js';
import { checkpointCycles } from '../measures/checkpoint-cycles.js';
import type { CycleLog } from '../measures/cycle-log.js';
import { cycleValues, instanceMeasures, type TestedCapacity } from '../measures/instance-measures.js';
import type { OutcomeRow } from '../measures/outcome-row.js';
import { type BankFactors, meanBankFactors, sampleBankFactors } from '../sampling/bank-factors.js';
import { meanModules } from '../sampling/mean-modules.js';
import { sampleModules } from '../sampling/sample-modules.js';
import type { Candidate, ModuleParameters, Study } from '../study/study.js';
import {
  type Accountant,
  accountEvent,
  accountLeap,
  accountStep,
  beginBurstAccount,
  closeAccount,
  createAccountant,
} from './accountant.js';
import { createJourney, type Journey, type JourneyListeners } from './advance.js';
import { testCapacity } from './capacity-test.js';
import { commissionBank } from './commission.js';
import { drawnFeatures } from './drawn-features.js';
import { beginBurstRecord, createRecorder, type Recorder, recordEvent, recordLeap, recordStep } from './recorder.js';
import { runCourse } from './run-course.js';
import { planVisits, type VisitPlan } from './upkeep.js';

/** What all instances of a candidate share; made once per candidate and thread. */
export interface PreparedCandidate {
  readonly study: Study;
  readonly candidate: Candidate;
  readonly ocv: OcvCurves;
  readonly course: readonly DutyCycle[];
  readonly checkpoints: readonly number[];
  readonly toleranceFactor: number;
  readonly twin: SimulatedBank;
}

/** A bank that has gone through its course. */
export interface SimulatedBank {
  readonly bank: Bank;
  readonly factors: BankFactors;
  readonly log: CycleLog;
  readonly account: BankAccount;
  readonly start: TestedCapacity;
  readonly end: TestedCapacity;
}

/**
 * Gets a candidate ready: compiles its curves and course and takes its twin (every value at its mean) through the course.
 *
 * @param toleranceFactor factor on every tolerance of the stepper; runs use 1, studies of convergence less
 * @throws RangeError if the study has no candidate of that key
 */
export function prepareCandidate(study: Study, candidateKey: string, toleranceFactor = 1): PreparedCandidate {
  const candidate = study.candidates.find(({ key }) => key === candidateKey);
  if (candidate === undefined) throw new RangeError(`study must have a candidate ${candidateKey}`);
  const parts = {
    study,
    candidate,
    ocv: compileOcvCurves(study.ocvTables),
    course: dutyCourse(study.duty, study.cycles),
    checkpoints: checkpointCycles(study.cycles),
    toleranceFactor,
  };
  return { ...parts, twin: simulateBank(parts, meanModules(study), meanBankFactors(study)) };
}

/**
 * One sampled bank of one candidate through its whole course: a pure function of study, candidate and instance number.
 *
 * @param instance from 1; its modules are the same in every candidate
 * @returns drawn features, measures and by-cycle values in the order of `outcomeColumns`
 */
export function simulateInstance(prepared: PreparedCandidate, instance: number): OutcomeRow {
  const { study, twin } = prepared;
  const simulated = simulateBank(prepared, sampleModules(study, instance), sampleBankFactors(study, instance));
  return outcomeRow(prepared, simulated, { log: twin.log, capacity: twin.end }, instance);
}

/** The twin's row; its instance number is 0. */
export function simulateTwin(prepared: PreparedCandidate): OutcomeRow {
  return outcomeRow(prepared, prepared.twin, null, 0);
}

/** A bank at the beginning of its course, with those who listen to it and who come to visit it. */
export function startBank(
  prepared: Pick<PreparedCandidate, 'study' | 'candidate' | 'ocv' | 'toleranceFactor'>,
  modules: ReadonlyMap<string, ModuleParameters>,
  also: JourneyListeners = {},
): {
  readonly journey: Journey;
  readonly recorder: Recorder;
  readonly accountant: Accountant;
  readonly visits: VisitPlan | null;
} {
  const { study, candidate, ocv, toleranceFactor } = prepared;
  const bank = buildBank(candidate, modules, ocv);
  const state = commissionBank(bank, candidate, modules, ocv, toleranceFactor);
  const recorder = createRecorder(study.cycles);
  const accountant = createAccountant(bank, state.charge);
  const listeners: JourneyListeners = {
    onEvent: (event) => {
      recordEvent(recorder, journey, event);
      accountEvent(accountant, journey, event);
      also.onEvent?.(event);
    },
    onStep: (_, stepS) => {
      recordStep(recorder, journey, stepS);
      accountStep(accountant, journey, stepS);
      also.onStep?.(journey, stepS);
    },
    onBurst: () => {
      beginBurstRecord(recorder);
      beginBurstAccount(accountant);
    },
    onLeap: (ratio) => {
      recordLeap(recorder, ratio);
      accountLeap(accountant, ratio);
    },
  };
  const journey = createJourney(bank, state, candidate.charger, candidate.load, listeners, toleranceFactor);
  return { journey, recorder, accountant, visits: planVisits(bank, candidate, modules, ocv, toleranceFactor) };
}

function simulateBank(
  prepared: Pick<PreparedCandidate, 'study' | 'candidate' | 'ocv' | 'course' | 'toleranceFactor'>,
  modules: ReadonlyMap<string, ModuleParameters>,
  factors: BankFactors,
): SimulatedBank {
  const { candidate, course, toleranceFactor } = prepared;
  const { journey, recorder, accountant, visits } = startBank(prepared, modules);
  const { bank, state } = journey.kernel;
  const start = testCapacity(bank, state, candidate, journey.kernel.nowS, toleranceFactor);
  runCourse(journey, recorder, course, factors, undefined, visits);
  const account = closeAccount(accountant, journey);
  const end = testCapacity(bank, state, candidate, journey.kernel.nowS, toleranceFactor);
  return { bank, factors, log: recorder.log, account, start, end };
}

function outcomeRow(
  prepared: PreparedCandidate,
  { bank, factors, log, account, start, end }: SimulatedBank,
  twin: { readonly log: CycleLog; readonly capacity: TestedCapacity } | null,
  instance: number,
): OutcomeRow {
  const { driftLimitFraction } = prepared.study;
  return {
    instance,
    values: [
      factors.loadFactor,
      factors.chargeFactor,
      ...drawnFeatures(bank),
      ...instanceMeasures(bank, { log, twin, account, start, end, driftLimitFraction }),
      ...prepared.checkpoints.flatMap((cycle) => cycleValues(bank, log, cycle)),
    ],
  };
}
