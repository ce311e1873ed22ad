import type { Bank } from '../bank/bank.js';
import type { BankState } from '../bank/bank-state.js';
import { BUS_OVERLOADED, loadIsServed } from '../bank/bus.js';
import type { BankEvent } from '../bank/events.js';
import type { ChargerSettings, LoadSettings } from '../study/study.js';
import type { Ageing } from './ageing.js';
import { type BleedPlan, carryOut, createBleedPlan, planBleed } from './bleed-within.js';
import { updateEmf } from './chain-emf.js';
import { type Chatter, countTrip, createChatter, leapOverChatter } from './chatter.js';
import type { Climate } from './climate.js';
import { cutAtEvent, turnedConditions } from './cut-at-event.js';
import { copyInto, createKernel, type Kernel, solveKept, updateCellConstants, updateExtremes } from './kernel.js';
import { settle } from './settle.js';
import { commitStep, createStepWork, LEAST_STEP_S, type StepWork, shortenStep, tryStep } from './step.js';
import { createTerminal, type Terminal } from './terminal.js';
import { createWatch, turnOver, updateValues, type Watch } from './watch.js';

const MOST_STEP_S = 3600;
/** Factor by which a step may be longer than the one before. */
const MOST_GROWTH = 5;
/** Step tried first after a jump of current, and what counts as one. */
const FIRST_STEP_S = 60;
const JUMP_A = 2;
/** Charge that a step may pass over a curve with kinks, fraction of capacity. */
const MOST_CHARGE_OVER_KINKS = 0.001;
/** Change of a cell's voltage over a step above which it is tried again shorter, V: keeps events well bracketed. */
const MOST_VOLTAGE_CHANGE_V = 0.1;
/** Time for which a step may go on after a bleed has switched within it, s. */
const MOST_BLEED_LATE_S = 100;

/** A bank on its way through time. */
export interface Journey {
  readonly kernel: Kernel;
  readonly terminal: Terminal;
  readonly watch: Watch;
  readonly work: StepWork;
  /** Factor on every tolerance of the stepper; 1 but for studies of convergence. */
  readonly toleranceFactor: number;
  /** Length that the next step will try, s. */
  stepS: number;
  readonly startHighestV: Float64Array;
  readonly startLowestV: Float64Array;
  readonly bleedPlan: BleedPlan;
  readonly chatter: Chatter;
  /** Null: the bank stays at 25 degC, whatever its duty says. */
  climate: Climate | null;
  /** Null: cells keep capacity and resistance. */
  ageing: Ageing | null;
  readonly onEvent: (event: BankEvent) => void;
  /** Called with every step before it is committed, while it can still be looked into. */
  readonly onStep: (journey: Journey, stepS: number) => void;
  /** Called when a burst begins from which a rate is taken, and when its rates have been applied `ratio` times more. */
  readonly onBurst: () => void;
  readonly onLeap: (ratio: number) => void;
  /** The bus could not carry the load, which has not been served since. */
  busFails: boolean;
  /** The load asks for something and does not get it: the bus fails, or the low-voltage disconnect is open. */
  loadLost: boolean;
  /** Attempts and accepted steps so far, for benchmarks. */
  attempts: number;
  steps: number;
}

export type JourneyListeners = Partial<Pick<Journey, 'onEvent' | 'onStep' | 'onBurst' | 'onLeap'>>;

export function createJourney(
  bank: Bank,
  state: BankState,
  charger: ChargerSettings,
  load: LoadSettings,
  listeners: JourneyListeners,
  toleranceFactor = 1,
): Journey {
  const kernel = createKernel(bank, state);
  const chatter = createChatter(bank.modules, bank.cells);
  return {
    kernel,
    terminal: createTerminal(charger, load),
    watch: createWatch(kernel),
    work: createStepWork(kernel),
    toleranceFactor,
    stepS: FIRST_STEP_S,
    startHighestV: new Float64Array(bank.modules),
    startLowestV: new Float64Array(bank.modules),
    bleedPlan: createBleedPlan(bank.cells),
    chatter,
    climate: null,
    ageing: null,
    onEvent: (event) => {
      countTrip(chatter, event);
      listeners.onEvent?.(event);
    },
    onStep: listeners.onStep ?? (() => undefined),
    onBurst: listeners.onBurst ?? (() => undefined),
    onLeap: listeners.onLeap ?? (() => undefined),
    busFails: false,
    loadLost: false,
    attempts: 0,
    steps: 0,
  };
}

/** Puts the bank in order now: to be called after anything at its terminal has changed. */
export function settleJourney(journey: Journey): void {
  const { kernel, terminal, watch, work, onEvent } = journey;
  copyInto(kernel.bus.currentA, work.lastA);
  settle(kernel, terminal, watch, work, onEvent);
  const asks = terminal.demandW > 0 || terminal.demandA > 0;
  const fails = asks && terminal.loadConnected && !loadIsServed(kernel.bus.regime);
  const isBack = !asks || (terminal.loadConnected && !fails);
  if (journey.busFails ? isBack : fails) {
    onEvent({ kind: fails ? 'load-lost' : 'load-back', timeS: kernel.nowS, module: -1, cell: -1 });
    journey.busFails = fails;
  }
  journey.loadLost = fails || (asks && !terminal.loadConnected);
  if (currentsJumped(work.lastA, kernel.bus.currentA)) journey.stepS = Math.min(journey.stepS, FIRST_STEP_S);
}

/** After a jump the polarisation moves fast again, after an event without one it does not. */
function currentsJumped(beforeA: Float64Array, afterA: Float64Array): boolean {
  for (let i = 0; i < afterA.length; i++) if (Math.abs(afterA[i] - beforeA[i]) > JUMP_A) return true;
  return false;
}

/**
 * Advances by adaptive steps until `untilS` or until `stop` says so, which is asked after every settling.
 *
 * No step straddles an event: one that turns a condition over is cut at the instant found inside it and taken anew.
 */
export function advance(journey: Journey, untilS: number, stop: () => boolean): void {
  const { kernel, watch } = journey;
  // What is due at an instant already settled (a BMS without delays) waits for the least step, or time would stand still.
  let settledS = kernel.nowS;
  while (kernel.nowS < untilS) {
    const soonestS = kernel.nowS > settledS ? kernel.nowS : settledS + LEAST_STEP_S;
    const goalS = Math.min(untilS, Math.max(watch.nextDueS, soonestS));
    const restS = goalS - kernel.nowS;
    if (restS <= 1e-9) {
      kernel.nowS = goalS;
      settleJourney(journey);
      settledS = kernel.nowS;
      if (stop()) return;
      leapOverChatter(journey, untilS);
      continue;
    }
    const mostS = kernel.bank.ocv.hasKinks ? Math.min(MOST_STEP_S, kinkStepS(kernel)) : MOST_STEP_S;
    const tryS = Math.min(journey.stepS, journey.toleranceFactor * mostS);
    const stepS = tryS * 1.1 > restS ? restS : tryS;
    const happened = takeStep(journey, stepS);
    if (restS - journey.work.stepS <= 1e-9 && kernel.nowS > goalS - 1e-6) kernel.nowS = goalS;
    if (happened) {
      settleJourney(journey);
      settledS = kernel.nowS;
      if (stop()) return;
      leapOverChatter(journey, untilS);
    }
  }
}

/** Longest step that passes little enough charge to notice the kinks of a curve of straight lines. */
function kinkStepS({ bank, bus }: Kernel): number {
  let stepS = Number.POSITIVE_INFINITY;
  for (let i = 0; i < bus.currentA.length; i++) {
    stepS = Math.min(stepS, (MOST_CHARGE_OVER_KINKS * bank.chainCapacityAs[i]) / Math.abs(bus.currentA[i]));
  }
  return Math.max(LEAST_STEP_S, stepS);
}

/** Takes one step of at most `stepS`. @returns true if it ended at an event */
function takeStep(journey: Journey, stepS: number): boolean {
  const { kernel, watch, work, bleedPlan } = journey;
  copyInto(kernel.highestV, journey.startHighestV);
  copyInto(kernel.lowestV, journey.startLowestV);
  let tryS = stepS;
  for (;;) {
    journey.attempts++;
    const error = tryStep(kernel, work, tryS) / journey.toleranceFactor;
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
    const changeV = voltageChangeV(journey) / (journey.toleranceFactor * MOST_VOLTAGE_CHANGE_V);
    // Third order: the error grows with the cube of the step, a voltage with the step itself.
    const grow = Math.min(0.9 / Math.cbrt(error), changeV > 0 ? 0.8 / changeV : MOST_GROWTH, MOST_GROWTH);
    if ((error > 1 || changeV > 1) && tryS > LEAST_STEP_S) {
      tryS = Math.max(LEAST_STEP_S, tryS * Math.max(0.1, Math.min(grow, 0.7)));
      continue;
    }
    const nextS = Math.max(LEAST_STEP_S, tryS * Math.max(grow, 0.3));
    // A step cut short by something due says nothing against a longer one.
    journey.stepS = tryS === stepS ? Math.max(nextS, grow >= 1 ? journey.stepS : 0) : nextS;
    planBleed(kernel, work, bleedPlan);
    const lateS = journey.toleranceFactor * MOST_BLEED_LATE_S;
    if (bleedPlan.lateS > lateS) {
      tryS = tryS - bleedPlan.lateS + 0.3 * lateS;
      if (!shortenStep(kernel, work, tryS)) continue;
      planBleed(kernel, work, bleedPlan);
    }
    break;
  }
  copyInto(watch.value, watch.startValue);
  updateValues(kernel, journey.terminal, watch, work.lastA, work.endBankA, work.endBankV);
  const turned = turnedConditions(watch);
  if (turned === null) {
    finishStep(journey);
    return false;
  }
  if (work.stepS > LEAST_STEP_S) {
    cutAtEvent(journey, turned);
    planBleed(kernel, work, bleedPlan);
  }
  finishStep(journey);
  for (const at of turned) turnOver(kernel, journey.terminal, watch, at);
  return true;
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

/** Lets listeners look at the latest attempt, commits it and switches the bleed that changed inside it. */
function finishStep(journey: Journey): void {
  const { kernel, work, bleedPlan } = journey;
  const { state, bus, point } = kernel;
  journey.steps++;
  journey.onStep(journey, work.stepS);
  commitStep(kernel, work);
  if (bleedPlan.any) carryOut(kernel, bleedPlan);
  updateCellConstants(kernel);
  if (bleedPlan.any) {
    work.passedAs.fill(0);
    updateEmf(kernel, 0, work.passedAs, state.filterA);
    if (solveKept(kernel)) {
      copyInto(point.currentA, bus.currentA);
      bus.bankA = point.bankA;
      bus.bankV = point.bankV;
      copyInto(bus.currentA, work.firstA);
    }
    updateExtremes(kernel, bus.currentA, state.filterA);
  }
}
