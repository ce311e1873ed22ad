import { traceInstance } from '../../../src/simulation/trace-instance.js';
import { studyOf } from '../../study/study-under-test.js';
import { contractLimits } from '../contract.js';
import { type Agreement, agreementOf } from './agreement.js';
import { looseDeck } from './loose-deck.js';
import { type SimulatedDeck, type StudyToTrace, simulateDeckOf, type TracedBank, traceBank } from './traced-bank.js';

/** A bank traced by the engine and, from its deck, run in the circuit simulator. */
export interface EngineAndDeck {
  readonly traced: TracedBank;
  /** The deck as it was written, with its tight tolerances. */
  readonly simulated: SimulatedDeck;
  readonly agreement: Agreement;
  readonly speed: Speed;
}

/** Processor time of the engine as it traces, and of the simulator at loose tolerances, which is as far off as it says. */
export interface Speed {
  readonly engineCpuS: number;
  readonly looseCpuS: number;
  readonly loose: Agreement;
}

/** Processor time over which the engine is measured, s: it takes milliseconds for a bank. */
const MEASURED_CPU_S = 0.5;

/** @param phaseStartS when phases of the traced window begin */
export async function runEngineAndDeck(study: StudyToTrace, phaseStartS: readonly number[]): Promise<EngineAndDeck> {
  const traced = await traceBank(study);
  const terms = { limits: contractLimits(traced.largestBankA), phaseStartS };
  const simulated = await simulateDeckOf(traced);
  const loosely = await simulateDeckOf(traced, looseDeck(traced.deck));
  return {
    traced,
    simulated,
    agreement: agreementOf(traced, simulated, terms),
    speed: {
      engineCpuS: engineCpuS(study),
      looseCpuS: loosely.cpuS,
      loose: agreementOf(loosely, simulated, terms),
    },
  };
}

/** Processor time of one trace without samples, from the study as it was read; the mean of many. */
function engineCpuS({ text, files, fromCycle, toCycle }: StudyToTrace): number {
  const study = studyOf(text, files);
  const window = { candidate: 'bank', instance: 1, fromCycle, toCycle, everyS: 1e9, likeForLike: true };
  traceInstance(study, window);
  const started = process.cpuUsage();
  for (let times = 1; ; times++) {
    traceInstance(study, window);
    const { user, system } = process.cpuUsage(started);
    const passedS = (user + system) / 1e6;
    if (passedS > MEASURED_CPU_S) return passedS / times;
  }
}
