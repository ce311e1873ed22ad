import type { DutySegment } from '../../src/study/study.js';
import { SlowAgeing } from './ageing.js';
import { bankWatches } from './bank-watches.js';
import { bmsWatches } from './bms-watches.js';
import { Evaluation } from './evaluation.js';
import { packsOf } from './packs.js';
import { presentPacks, STATED_K } from './present-packs.js';
import { DERIVED_TAIL, derivativesInto } from './rates.js';
import type { ReferenceBank } from './reference-bank.js';
import { rungeKuttaStep } from './runge-kutta.js';
import type { EventKind, SlowEvent } from './slow-event.js';
import type { SlowRun, SlowSample } from './slow-run.js';
import { chargeOpen, closedPack, dischargeOpen } from './switches.js';
import { commissionedCharge, type SimulateAlone, SlowVisits } from './visits.js';
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
  /** Of every cell; 0 by default. */
  readonly startHysteresis?: readonly number[];
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
 */
export function simulateSlowBank(bank: ReferenceBank, options: SlowOptions): SlowRun {
  const base = packsOf(bank);
  const packSwitches = base.packs.map((pack) => closedPack(pack.cells.length));
  const bankSwitches = {
    chargeEnded: false,
    loadConnected: true,
    overloaded: false,
    equalising: bank.candidate.equaliser?.enableV === null,
    loadLost: false,
  };
  const evaluation = new Evaluation(bank, base, packSwitches, bankSwitches, options.nodeLeakS ?? 1e-6);
  const ageing = new SlowAgeing(base, base.stateLength + DERIVED_TAIL);
  const ages = ageing.states > 0;
  const simulateAlone: SimulateAlone = (alone, startHysteresis) =>
    simulateSlowBank(alone, { ...options, sampleTimesS: [], startHysteresis });
  const visits = new SlowVisits(bank, simulateAlone);
  const cells = base.packs.flatMap((pack) => pack.cells);
  const states = new Float64Array(base.stateLength + DERIVED_TAIL + ageing.states);
  const arrival =
    bank.candidate.commissioning === 'as-received'
      ? cells.map((cell) => cell.arrivalCharge)
      : commissionedCharge(bank, simulateAlone);
  cells.forEach((cell, c) => {
    states[cell.at] = arrival[c];
    states[cell.at + 1] = options.startHysteresis?.[c] ?? 0;
  });

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
    ...base.packs.flatMap((pack, k) =>
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
  const rates = (x: Float64Array, out: Float64Array) =>
    derivativesInto(evaluation, segment, x, out, ages ? ageing : null);
  const stepper = rungeKuttaStep(states.length, rates);
  const trial = new Float64Array(states.length);

  const record = (): void => {
    const view = evaluation.evaluate(states, segment);
    samples.push({
      timeS,
      busV: view.busV,
      bankA: view.bankA,
      modules: base.packs.map((pack, k) => ({
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

  /**
   * Takes the packs at a temperature and their present age. The current through each polarisation pair stays as it was,
   * the state of Plett's model (Battery Management Systems vol. 1 (2015), ch. 2): its voltage goes with its resistance.
   */
  const takeLayout = (ambientK: number): void => {
    const before = evaluation.layout.packs.flatMap((pack) => pack.cells);
    evaluation.takeLayout(presentPacks(base, ambientK, ageing.leftOf));
    evaluation.layout.packs
      .flatMap((pack) => pack.cells)
      .forEach(({ at, pairs }, c) => {
        pairs.forEach((pair, p) => {
          if (pair.resistanceOhm > 0) states[at + 2 + p] *= pair.resistanceOhm / before[c].pairs[p].resistanceOhm;
        });
      });
  };

  /** Each BMS refuses charge below its one temperature and allows it again from its other on. */
  const judgeCold = (ambientK: number): void => {
    base.packs.forEach(({ bms: { chargeRefusal }, offsetK, string, position }, k) => {
      if (chargeRefusal === undefined) return;
      const kelvin = ambientK + offsetK;
      const refuses = kelvin < (packSwitches[k].tooCold ? chargeRefusal.releaseK : chargeRefusal.belowK);
      if (refuses === packSwitches[k].tooCold) return;
      packSwitches[k].tooCold = refuses;
      report(timeS, refuses ? 'cold-charge-refusal' : 'cold-charge-release', string, position, null);
    });
  };

  /** Ages the cells by the cycle that has ended, then lets somebody come if it is time. */
  const endCycle = (): void => {
    const ambientK = segment.ambientK ?? STATED_K;
    if (ages) {
      ageing.afterCycle(states);
      takeLayout(ambientK);
    }
    if (cycle < bank.cycles.length && visits.isDue(evaluation.layout, states, cycle, timeS)) {
      visits.visit(presentPacks(base, STATED_K, ageing.leftOf), packSwitches, states);
      since.fill(null);
    }
  };

  /** One step to `endS` or to the first change of a condition before it. */
  const advanceTo = (endS: number): void => {
    const changesBy = (dtS: number): boolean => {
      evaluation.overloadSeen = false;
      stepper(states, dtS, trial);
      return anyChanged(watches, since, evaluation.evaluate(trial, segment)) || evaluation.overloadSeen;
    };
    steps++;
    const startS = timeS;
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
    if (ages) ageing.afterStep(states, timeS - startS, segment.ambientK ?? STATED_K);
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
      const ambientK = segment.ambientK ?? STATED_K;
      takeLayout(ambientK);
      judgeCold(ambientK);
      settleNow();
      if (timeS === 0 && sampleTimesS[0] === 0) record();
      while (timeS < endS && !segmentOver()) {
        const steep = evaluation.layout.packs.some(({ cells: present }) =>
          present.some(({ at, floor }) => states[at] < floor + 0.06 || states[at] > 0.96),
        );
        const fine = steep || timeS < switchedS + AFTER_SWITCHING_S;
        const stepS = fine ? (options.fineStepS ?? options.stepS) : options.stepS;
        const sampleS = sampleTimesS[nextSample] ?? Number.POSITIVE_INFINITY;
        advanceTo(Math.min(timeS + stepS, endS, nextExpiryS(watches, since), sampleS));
        if (timeS >= sampleS) record();
        settleNow();
      }
    });
    endCycle();
    cycleEndCharge.push(cells.map((cell) => states[cell.at]));
    cycleEndS.push(timeS);
    cycle++;
  }
  const [servedWh, lostWh, lostAh] = states.subarray(base.stateLength);
  const endHysteresis = cells.map((cell) => states[cell.at + 1]);
  return { samples, events, cycleEndCharge, endHysteresis, cycleEndS, segmentStartS, servedWh, lostWh, lostAh, steps };
}
