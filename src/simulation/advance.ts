import type { Bank } from '../bank/bank.js';
import type { BankState } from '../bank/bank-state.js';
import { BUS_OVERLOADED, loadIsServed } from '../bank/bus.js';
import type { BankEvent } from '../bank/events.js';
import { firstCrossing } from '../mathematics/first-crossing.js';
import type { ChargerSettings, LoadSettings } from '../study/study.js';
import { switchBleedWithin } from './bleed-within.js';
import { createKernel, type Kernel, solveKept, updateCellConstants, updateEmf, updateExtremes } from './kernel.js';
import { settle } from './settle.js';
import { commitStep, createStepWork, evaluateWithin, type StepWork, tryStep } from './step.js';
import { createTerminal, type Terminal } from './terminal.js';
import { createWatch, pastChange, turnOver, updateNextDue, updateValues, type Watch } from './watch.js';

/** Least progress of a step, also of one that ends at an event, s. */
export const LEAST_STEP_S = 0.01;
const MOST_STEP_S = 1800;
const FIRST_STEP_S = 30;
/** Change of a cell's voltage over a step above which it is tried again shorter, V: keeps events well bracketed. */
const MOST_VOLTAGE_CHANGE_V = 0.05;
/** Width to which an event is bracketed inside its step, s. */
const EVENT_TOLERANCE_S = 2e-3;

/** A bank on its way through time. */
export interface Journey {
  readonly kernel: Kernel;
  readonly terminal: Terminal;
  readonly watch: Watch;
  readonly work: StepWork;
  /** Length that the next step will try, s. */
  stepS: number;
  readonly startHighestV: Float64Array;
  readonly startLowestV: Float64Array;
  readonly correctionAs: Float64Array;
  readonly onEvent: (event: BankEvent) => void;
  /** Called with every step before it is committed, while it can still be looked into. */
  readonly onStep: (journey: Journey, stepS: number) => void;
  /** The bus cannot carry the load that is connected. */
  busFails: boolean;
  /** The load asks for something and does not get it: the bus fails, or the low-voltage disconnect is open. */
  loadLost: boolean;
  /** Attempts and accepted steps so far, for benchmarks. */
  attempts: number;
  steps: number;
}

export interface JourneyListeners {
  readonly onEvent: (event: BankEvent) => void;
  readonly onStep: (journey: Journey, stepS: number) => void;
}

export function createJourney(
  bank: Bank,
  state: BankState,
  charger: ChargerSettings,
  load: LoadSettings,
  listeners: JourneyListeners,
): Journey {
  const kernel = createKernel(bank, state);
  return {
    kernel,
    terminal: createTerminal(charger, load),
    watch: createWatch(kernel),
    work: createStepWork(kernel),
    stepS: FIRST_STEP_S,
    startHighestV: new Float64Array(bank.modules),
    startLowestV: new Float64Array(bank.modules),
    correctionAs: new Float64Array(bank.cells),
    onEvent: listeners.onEvent,
    onStep: listeners.onStep,
    busFails: false,
    loadLost: false,
    attempts: 0,
    steps: 0,
  };
}

/** Puts the bank in order now: to be called after anything at its terminal has changed. */
export function settleJourney(journey: Journey): void {
  const { kernel, terminal, watch, work, onEvent } = journey;
  settle(kernel, terminal, watch, work, onEvent);
  const asks = terminal.demandW > 0 || terminal.demandA > 0;
  const fails = asks && terminal.loadConnected && !loadIsServed(kernel.bus.regime);
  if (fails !== journey.busFails) {
    onEvent({ kind: fails ? 'load-lost' : 'load-back', timeS: kernel.nowS, module: -1, cell: -1 });
    journey.busFails = fails;
  }
  journey.loadLost = fails || (asks && !terminal.loadConnected);
  journey.stepS = Math.min(journey.stepS, FIRST_STEP_S);
}

/**
 * Advances by adaptive steps until `untilS` or until `stop` says so, which is asked after every settling.
 *
 * No step straddles an event: one that turns a condition over is cut at the instant found inside it and taken anew.
 */
export function advance(journey: Journey, untilS: number, stop: () => boolean): void {
  const { kernel, watch } = journey;
  while (kernel.nowS < untilS) {
    const goalS = Math.min(untilS, watch.nextDueS);
    const restS = goalS - kernel.nowS;
    if (restS <= 1e-9) {
      kernel.nowS = goalS;
      settleJourney(journey);
      if (stop()) return;
      continue;
    }
    const stepS = journey.stepS * 1.1 > restS ? restS : Math.min(journey.stepS, MOST_STEP_S);
    const happened = takeStep(journey, stepS);
    if (restS - journey.work.stepS <= 1e-9 && kernel.nowS > goalS - 1e-6) kernel.nowS = goalS;
    if (happened) {
      settleJourney(journey);
      if (stop()) return;
    }
  }
}

/** Takes one step of at most `stepS`. @returns true if it ended at an event */
function takeStep(journey: Journey, stepS: number): boolean {
  const { kernel, watch, work } = journey;
  journey.startHighestV.set(kernel.highestV);
  journey.startLowestV.set(kernel.lowestV);
  let tryS = stepS;
  for (;;) {
    journey.attempts++;
    const error = tryStep(kernel, work, tryS);
    if (error === Number.POSITIVE_INFINITY) {
      // The load has no solution somewhere in the step: halve towards that instant; there the load goes off.
      if (tryS <= LEAST_STEP_S) {
        kernel.bus.regime = BUS_OVERLOADED;
        work.stepS = 0;
        return true;
      }
      tryS = Math.max(LEAST_STEP_S, 0.5 * tryS);
      continue;
    }
    updateExtremes(kernel, work.lastA, work.endFilterA);
    const changeV = voltageChangeV(journey) / MOST_VOLTAGE_CHANGE_V;
    // Third order: the error grows with the cube of the step, a voltage with the step itself.
    const grow = Math.min(0.9 * error ** (-1 / 3), changeV > 0 ? 0.8 / changeV : 5, 5);
    if ((error > 1 || changeV > 1) && tryS > LEAST_STEP_S) {
      tryS = Math.max(LEAST_STEP_S, tryS * Math.max(0.1, Math.min(grow, 0.7)));
      continue;
    }
    journey.stepS = Math.max(LEAST_STEP_S, tryS * Math.max(grow, 0.3));
    break;
  }
  updateValues(kernel, journey.terminal, watch, work.lastA, work.endBankA, work.endBankV);
  const turned = turnedConditions(watch);
  if (turned.length > 0 && work.stepS > LEAST_STEP_S) cutAtEvent(journey, turned);
  finishStep(journey);
  for (const at of turned) turnOver(kernel, journey.terminal, watch, at);
  if (turned.length > 0) updateNextDue(kernel, watch);
  return turned.length > 0;
}

function voltageChangeV(journey: Journey): number {
  const { kernel, startHighestV, startLowestV } = journey;
  let change = 0;
  for (let m = 0; m < startHighestV.length; m++) {
    change = Math.max(
      change,
      Math.abs(kernel.highestV[m] - startHighestV[m]),
      Math.abs(kernel.lowestV[m] - startLowestV[m]),
    );
  }
  return change;
}

function turnedConditions(watch: Watch): number[] {
  const turned: number[] = [];
  for (let at = 0; at < watch.value.length; at++) if (pastChange(watch, at) >= 0) turned.push(at);
  return turned;
}

/**
 * Cuts the latest attempt at the first instant at which one of `turned` turns over, takes it anew to there, and leaves
 * in `turned` the conditions that have turned over by then.
 */
function cutAtEvent(journey: Journey, turned: number[]): void {
  const { kernel, terminal, watch, work } = journey;
  const stepS = work.stepS;
  const past = (): number => turned.reduce((most, at) => Math.max(most, pastChange(watch, at)), Number.NEGATIVE_INFINITY);
  const endValue = past();
  const pastAt = (theta: number): number => {
    evaluateWithin(kernel, work, theta);
    updateValues(kernel, terminal, watch, kernel.point.currentA, kernel.point.bankA, kernel.point.bankV);
    return past();
  };
  const least = Math.min(1, LEAST_STEP_S / stepS);
  const startValue = pastAt(1e-9);
  const theta =
    startValue < 0 ? firstCrossing(pastAt, 1e-9, startValue, 1, endValue, EVENT_TOLERANCE_S / stepS) : least;
  pastAt(theta);
  const byThen = new Set(turned.filter((at) => pastChange(watch, at) >= 0));
  tryStep(kernel, work, Math.max(LEAST_STEP_S, theta * stepS));
  updateExtremes(kernel, work.lastA, work.endFilterA);
  updateValues(kernel, terminal, watch, work.lastA, work.endBankA, work.endBankV);
  turned.splice(0, turned.length, ...turned.filter((at) => byThen.has(at) || pastChange(watch, at) >= 0));
}

/** Lets listeners look at the latest attempt, switches bleed that changed inside it, and commits it. */
function finishStep(journey: Journey): void {
  const { kernel, work, correctionAs } = journey;
  const { state, bank, bus } = kernel;
  journey.steps++;
  const bled = switchBleedWithin(kernel, work, correctionAs);
  journey.onStep(journey, work.stepS);
  commitStep(kernel, work);
  if (bled) for (let c = 0; c < bank.cells; c++) state.charge[c] += correctionAs[c] / bank.capacityAs[c];
  updateCellConstants(kernel);
  if (bled) {
    work.passedAs.fill(0);
    updateEmf(kernel, 0, work.passedAs, state.filterA);
    if (solveKept(kernel)) {
      bus.currentA.set(kernel.point.currentA);
      bus.bankA = kernel.point.bankA;
      bus.bankV = kernel.point.bankV;
      work.firstA.set(bus.currentA);
    }
    updateExtremes(kernel, bus.currentA, state.filterA);
  }
}
