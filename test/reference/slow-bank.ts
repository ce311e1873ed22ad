import type { DutySegment } from '../../src/study/study.js';
import { bankWatches } from './bank-watches.js';
import { bmsWatches } from './bms-watches.js';
import { Evaluation } from './evaluation.js';
import { packsOf } from './packs.js';
import { DERIVED_TAIL, derivativesInto } from './rates.js';
import type { ReferenceBank } from './reference-bank.js';
import { rungeKuttaStep } from './runge-kutta.js';
import type { EventKind, SlowEvent } from './slow-event.js';
import type { SlowRun, SlowSample } from './slow-run.js';
import { chargeOpen, closedPack, dischargeOpen } from './switches.js';
import { anyChanged, nextExpiryS, type Since, settle, type Watch } from './watch.js';

export interface SlowOptions {
  /** Longest step, s. */
  readonly stepS: number;
  /** Longest step while a cell is outside charge fractions 0.06 to 0.96 and for 300 s after switching; or `stepS`. */
  readonly fineStepS?: number;
  /** Ascending instants to record; one at a switching instant is recorded as it was before it (0 s: after). */
  readonly sampleTimesS?: readonly number[];
  /** Leak of every node and of the bus to bus minus, S; default 1e-6. */
  readonly nodeLeakS?: number;
}

/**
 * Steps to hold others against: on the reference banks charge stays within 1e-6 and event times within 0.1 s of a run
 * at 0.1 s (0.5 s for those of several days).
 */
export const TRUSTED_STEPS = { stepS: 60, fineStepS: 5 } as const;

/** How long the currents of a switching take to settle, s. */
const AFTER_SWITCHING_S = 300;
/** Events are located to this, s. */
const LOCATED_S = 1e-5;

/**
 * Simulates a bank slowly and plainly: every cell has its own charge, hysteresis and polarisation, a classical
 * Runge-Kutta step of fixed length advances them, and each stage solves the network and the bus anew. A step in which
 * any condition of a BMS, the charger or the load changes is cut by bisection at that change.
 *
 * @throws RangeError if the bank is to be commissioned first, which this leaves to its caller
 */
export function simulateSlowBank(bank: ReferenceBank, options: SlowOptions): SlowRun {
  if (bank.candidate.commissioning !== 'as-received') throw new RangeError('only banks as received');
  const layout = packsOf(bank);
  const packSwitches = layout.packs.map((pack) => closedPack(pack.cells.length));
  const bankSwitches = { chargeEnded: false, loadConnected: true, overloaded: false, loadLost: false };
  const evaluation = new Evaluation(bank, layout, packSwitches, bankSwitches, options.nodeLeakS ?? 1e-6);
  const cells = layout.packs.flatMap((pack) => pack.cells);
  const states = new Float64Array(layout.stateLength + DERIVED_TAIL);
  for (const cell of cells) states[cell.at] = cell.arrivalCharge;

  const samples: SlowSample[] = [];
  const events: SlowEvent[] = [];
  const cycleEndCharge: number[][] = [];
  const cycleEndS: number[] = [];
  const segmentStartS: number[] = [];
  const sampleTimesS = options.sampleTimesS ?? [];
  let nextSample = 0;
  let steps = 0;
  let timeS = 0;
  let switchedS = 0;
  let cycle = 1;
  let segment: DutySegment = bank.cycles[0][0];

  const report = (atS: number, kind: EventKind, string: number | null, position: number | null, cell: number | null) =>
    events.push({ timeS: atS, cycle, kind, string, position, cell });
  const watches: Watch[] = [
    ...layout.packs.flatMap((pack, k) =>
      bmsWatches(pack, k, packSwitches[k], (atS, kind, cell) => report(atS, kind, pack.string, pack.position, cell)),
    ),
    ...bankWatches(
      evaluation,
      () => segment,
      (atS, kind) => report(atS, kind, null, null, null),
    ),
  ];
  const since: Since = watches.map(() => null);
  /** Checked before a restart of the charger that the same instant may bring. */
  const segmentOver = () => segment.endsWhenCharged && bankSwitches.chargeEnded;
  const settleNow = (): void => {
    if (settle(watches, since, timeS, () => evaluation.evaluate(states, segment), segmentOver)) switchedS = timeS;
  };
  const rates = (x: Float64Array, out: Float64Array) => derivativesInto(evaluation, segment, x, out);
  const stepper = rungeKuttaStep(states.length, rates);
  const trial = new Float64Array(states.length);

  const record = (): void => {
    const view = evaluation.evaluate(states, segment);
    samples.push({
      timeS,
      busV: view.busV,
      bankA: view.bankA,
      modules: layout.packs.map((pack, k) => ({
        string: pack.string,
        position: pack.position,
        currentA: view.packs[k].currentA,
        terminalV: view.packs[k].terminalV,
        chargeFraction: pack.cells.map((cell) => states[cell.at]),
        cellV: [...view.packs[k].cellV],
        chargeOpen: chargeOpen(packSwitches[k], pack.bms.overCurrent.opens),
        dischargeOpen: dischargeOpen(packSwitches[k], pack.bms.overCurrent.opens),
      })),
    });
    nextSample++;
  };

  /** One step to `endS` or to the first change of a condition before it. */
  const advanceTo = (endS: number): void => {
    const changesBy = (dtS: number): boolean => {
      evaluation.overloadSeen = false;
      stepper(states, dtS, trial);
      return anyChanged(watches, since, evaluation.evaluate(trial, segment)) || evaluation.overloadSeen;
    };
    steps++;
    if (changesBy(endS - timeS)) {
      let before = 0;
      let after = endS - timeS;
      while (after - before > LOCATED_S) {
        const middle = (before + after) / 2;
        if (changesBy(middle)) after = middle;
        else before = middle;
      }
      stepper(states, after, trial);
      timeS = after === endS - timeS ? endS : timeS + after;
    } else timeS = endS;
    states.set(trial);
  };

  for (const segments of bank.cycles) {
    segments.forEach((next, s) => {
      segment = next;
      segmentStartS.push(timeS);
      switchedS = timeS;
      if (s === 0 && bank.candidate.charger.restart === 'each-cycle' && bankSwitches.chargeEnded) {
        bankSwitches.chargeEnded = false;
        report(timeS, 'charge-restart', null, null, null);
      }
      const endS = timeS + segment.durationS;
      settleNow();
      if (timeS === 0 && sampleTimesS[0] === 0) record();
      while (timeS < endS && !segmentOver()) {
        const steep = cells.some((cell) => states[cell.at] < 0.06 || states[cell.at] > 0.96);
        const fine = steep || timeS < switchedS + AFTER_SWITCHING_S;
        const stepS = fine ? (options.fineStepS ?? options.stepS) : options.stepS;
        const sampleS = sampleTimesS[nextSample] ?? Number.POSITIVE_INFINITY;
        advanceTo(Math.min(timeS + stepS, endS, nextExpiryS(watches, since), sampleS));
        if (timeS >= sampleS) record();
        settleNow();
      }
    });
    cycleEndCharge.push(cells.map((cell) => states[cell.at]));
    cycleEndS.push(timeS);
    cycle++;
  }
  const [servedWh, lostWh, lostAh] = states.subarray(layout.stateLength);
  return { samples, events, cycleEndCharge, cycleEndS, segmentStartS, servedWh, lostWh, lostAh, steps };
}
