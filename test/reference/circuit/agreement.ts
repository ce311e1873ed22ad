import { dutyCourse } from '../../../src/duty/course.js';
import type { Study } from '../../../src/study/study.js';
import {
  compareEvents,
  compareWaveforms,
  type EventComparison,
  laterSamples,
  type WaveformComparison,
  type WaveformLimits,
} from '../contract.js';
import type { Simulated } from './traced-bank.js';

/** How far two simulations of one bank are apart, and how far they may be. */
export interface Agreement {
  readonly waveform: WaveformComparison;
  readonly events: EventComparison;
  /** Events of the bank's modules. */
  readonly eventCount: number;
  readonly limits: WaveformLimits;
  /** Largest part used of any limit but that of terminals, which depends on the knees. */
  readonly ofLimits: number;
  /** A sentence for each disagreement. */
  readonly faults: readonly string[];
}

/** What two simulations of one bank are held to. */
export interface AgreementTerms {
  readonly limits: WaveformLimits;
  /** When phases begin: the tolerance of an event's time grows from there. */
  readonly phaseStartS: readonly number[];
  /** In place of the tolerance that grows, s. */
  readonly eventS?: number;
}

/** Holds one simulation of a bank against another that is taken to be right. */
export function agreementOf(actual: Simulated, expected: Simulated, terms: AgreementTerms): Agreement {
  const { limits, phaseStartS, eventS } = terms;
  // At their first instant the small capacitors of a deck have not taken their voltages yet.
  const waveform = compareWaveforms(
    laterSamples(actual.waveform, 1),
    laterSamples(expected.waveform, 1),
    limits,
    expected.events,
    phaseStartS,
  );
  const events = compareEvents(
    actual.events,
    expected.events,
    phaseStartS,
    ...(eventS === undefined ? [] : [() => eventS]),
  );
  const { currentA, charge, plateauCellV, kneeCellV } = limits;
  const ofLimits = Math.max(
    waveform.currentA / currentA,
    waveform.charge / charge,
    waveform.plateauCellV / plateauCellV,
    waveform.kneeCellV / kneeCellV,
    events.ofTolerance,
  );
  return {
    waveform,
    events,
    limits,
    ofLimits,
    eventCount: expected.events.length,
    faults: [...waveform.faults, ...events.faults],
  };
}

/** When phases of some cycles of a study begin, in seconds since the bank was put together; all phases by the clock. */
export function phaseStartsOf(study: Study, fromCycle: number, toCycle: number): number[] {
  const starts: number[] = [];
  let timeS = 0;
  dutyCourse(study.duty, toCycle).forEach(({ segments }, index) => {
    for (const { durationS } of segments) {
      if (index + 1 >= fromCycle) starts.push(timeS);
      timeS += durationS;
    }
  });
  return starts;
}
