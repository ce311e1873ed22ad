import type { Bank } from '../bank/bank.js';
import { buildBank } from '../bank/bank.js';
import { compileOcvCurves, type OcvCurves } from '../bank/ocv-curves.js';
import { type DutyCycle, dutyCourse } from '../duty/course.js';
import type { AgeingFacts } from '../measures/ageing.js';
import type { BankAccount } from '../measures/bank-account.js';
import { checkpointCycles } from '../measures/checkpoint-cycles.js';
import type { CycleLog } from '../measures/cycle-log.js';
import { cycleValues, instanceMeasures, type TestedCapacity } from '../measures/instance-measures.js';
import type { OutcomeRow } from '../measures/outcome-row.js';
import type { SharingFacts } from '../measures/sharing.js';
import { type BankFactors, meanBankFactors, sampleBankFactors } from '../sampling/bank-factors.js';
import { meanModules } from '../sampling/mean-modules.js';
import { sampleModules } from '../sampling/sample-modules.js';
import { ratingsOfModules } from '../study/ratings.js';
import type { Candidate, ModuleParameters, ModuleRatings, Study } from '../study/study.js';
import {
  type Accountant,
  accountEvent,
  accountFade,
  accountLeap,
  accountStep,
  beginBurstAccount,
  closeAccount,
  createAccountant,
} from './accountant.js';
import { createJourney, type Journey, type JourneyListeners } from './advance.js';
import { type Ageing, createAgeing } from './ageing.js';
import { testCapacity } from './capacity-test.js';
import { createClimate } from './climate.js';
import { commissionBank } from './commission.js';
import { drawnFeatures } from './drawn-features.js';
import { beginBurstRecord, createRecorder, type Recorder, recordEvent, recordLeap, recordStep } from './recorder.js';
import { runCourse } from './run-course.js';
import {
  beginBurstSharing,
  createSharingRecorder,
  recordSharing,
  recordSharingLeap,
  type SharingRecorder,
  sharingFacts,
} from './sharing-recorder.js';
import { planVisits, type VisitPlan } from './upkeep.js';
import { beginBurstUse, recordUse, recordUseLeap } from './use-recorder.js';

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
  readonly sharing: SharingFacts;
  /** Null where no cell ages. */
  readonly ageing: AgeingFacts | null;
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
  readonly sharing: SharingRecorder;
  readonly accountant: Accountant;
  readonly visits: VisitPlan | null;
} {
  const { study, candidate, ocv, toleranceFactor } = prepared;
  const bank = buildBank(candidate, modules, ocv);
  const state = commissionBank(bank, candidate, modules, ocv, toleranceFactor);
  const recorder = createRecorder(study.cycles);
  const sharing = createSharingRecorder(bank, state, bmsRatings(study, candidate));
  const accountant = createAccountant(bank, state.charge);
  const ageing: Ageing | null =
    bank.ageing && createAgeing(bank, bank.ageing, (before, after) => accountFade(accountant, state, before, after));
  const listeners: JourneyListeners = {
    onEvent: (event) => {
      recordEvent(recorder, journey, event);
      accountEvent(accountant, journey, event);
      also.onEvent?.(event);
    },
    onStep: (_, stepS) => {
      recordStep(recorder, journey, stepS);
      recordSharing(sharing, journey, stepS);
      accountStep(accountant, journey, stepS);
      if (ageing !== null) recordUse(ageing.use, journey, stepS);
      also.onStep?.(journey, stepS);
    },
    onBurst: () => {
      beginBurstRecord(recorder);
      beginBurstSharing(sharing);
      beginBurstAccount(accountant);
      if (ageing !== null) beginBurstUse(ageing.use);
    },
    onLeap: (ratio) => {
      recordLeap(recorder, ratio);
      recordSharingLeap(sharing, ratio);
      accountLeap(accountant, ratio);
      if (ageing !== null) recordUseLeap(ageing.use, ratio);
    },
  };
  const journey = createJourney(bank, state, candidate.charger, candidate.load, listeners, toleranceFactor);
  journey.climate = createClimate(bank);
  journey.ageing = ageing;
  return { journey, recorder, sharing, accountant, visits: planVisits(bank, candidate, modules, ocv, toleranceFactor) };
}

/** Ratings of what each BMS of a bank protects: a native pack is rated as the module at its position 1. */
function bmsRatings(study: Study, candidate: Candidate): readonly (ModuleRatings | null)[] {
  const ratings = ratingsOfModules(study, candidate);
  return candidate.wiring === 'native' ? ratings.map((string) => string[0]) : ratings.flat();
}

function simulateBank(
  prepared: Pick<PreparedCandidate, 'study' | 'candidate' | 'ocv' | 'course' | 'toleranceFactor'>,
  modules: ReadonlyMap<string, ModuleParameters>,
  factors: BankFactors,
): SimulatedBank {
  const { study, candidate, course, toleranceFactor } = prepared;
  const { journey, recorder, sharing, accountant, visits } = startBank(prepared, modules);
  // As it is before the course: at 25 degC, where capacity is tested and drawn features are stated.
  const { bank, state } = journey.kernel;
  const start = testCapacity(bank, state, candidate, journey.kernel.nowS, toleranceFactor);
  runCourse(journey, recorder, course, factors, undefined, visits);
  const account = closeAccount(accountant, journey);
  const aged = journey.climate?.reference ?? bank;
  const end = testCapacity(aged, state, candidate, journey.kernel.nowS, toleranceFactor);
  const facts = sharingFacts(sharing, bmsRatings(study, candidate), candidate.ratings ?? null);
  const fade = journey.ageing && { left: journey.ageing.left, cellStart: bank.cellStart };
  return { bank, factors, log: recorder.log, account, start, end, sharing: facts, ageing: fade };
}

function outcomeRow(
  prepared: PreparedCandidate,
  { bank, factors, log, account, start, end, sharing, ageing }: SimulatedBank,
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
      ...instanceMeasures(bank, { log, twin, account, start, end, driftLimitFraction, sharing, ageing }),
      ...prepared.checkpoints.flatMap((cycle) => cycleValues(bank, log, cycle)),
    ],
  };
}
