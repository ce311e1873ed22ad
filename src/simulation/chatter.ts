import type { BankEvent } from '../bank/events.js';
import type { Journey } from './advance.js';

/** Trips of one module within a segment that are simulated one by one. */
const MOST_TRIPS = 100;
/** Trips of a burst from which a rate is taken. */
const BURST_TRIPS = 5;
/** Change of a cell's charge fraction over a leap. */
const MOST_CHANGE = 0.005;

/**
 * Keeps a bank whose BMS switches on and off without end from taking for ever.
 *
 * Beyond a budget of trips, a burst of trips is simulated and the time after it is leapt over at the burst's mean rates:
 * charge moves with the mean (sliding) current, trips and losses count as rate x time. Then another burst is simulated,
 * so the leaping ends by itself when the switching does.
 */
export interface Chatter {
  /** Trips of each module since the segment began. */
  readonly trips: Int32Array;
  /** Module whose trips measure the present burst, -1 if none. */
  module: number;
  tripsAtStart: number;
  startS: number;
  readonly startCharge: Float64Array;
}

export function createChatter(modules: number, cells: number): Chatter {
  return {
    trips: new Int32Array(modules),
    module: -1,
    tripsAtStart: 0,
    startS: 0,
    startCharge: new Float64Array(cells),
  };
}

/** A segment begins with a new budget. */
export function resetChatter(chatter: Chatter): void {
  chatter.trips.fill(0);
  chatter.module = -1;
}

export function countTrip(chatter: Chatter, { kind, module }: BankEvent): void {
  if (kind.endsWith('-trip')) chatter.trips[module]++;
}

/**
 * To be called when the bank has settled: begins a burst, or leaps after one.
 *
 * @param untilS end of the segment
 */
export function leapOverChatter(journey: Journey, untilS: number): void {
  const { chatter, kernel } = journey;
  if (chatter.module < 0) {
    const module = chatter.trips.findIndex((trips) => trips >= MOST_TRIPS);
    if (module >= 0) beginBurst(journey, module);
    return;
  }
  if (chatter.trips[chatter.module] < chatter.tripsAtStart + BURST_TRIPS) return;
  const burstS = kernel.nowS - chatter.startS;
  const leapS = leapLengthS(journey, untilS, burstS);
  if (burstS > 0 && leapS > burstS) {
    const ratio = leapS / burstS;
    const { charge } = kernel.state;
    for (let c = 0; c < charge.length; c++) charge[c] += ratio * (charge[c] - chatter.startCharge[c]);
    shiftClocks(journey, leapS);
    kernel.nowS += leapS;
    journey.onLeap(ratio);
  }
  beginBurst(journey, chatter.module);
}

function beginBurst(journey: Journey, module: number): void {
  const { chatter, kernel } = journey;
  chatter.module = module;
  chatter.tripsAtStart = chatter.trips[module];
  chatter.startS = kernel.nowS;
  chatter.startCharge.set(kernel.state.charge);
  journey.onBurst();
}

/** As far as charges move little, and not past the segment or a clock that has run since before the burst. */
function leapLengthS(journey: Journey, untilS: number, burstS: number): number {
  const { chatter, kernel, watch } = journey;
  const { charge, sleepAtS } = kernel.state;
  let leapS = untilS - kernel.nowS;
  for (let c = 0; c < charge.length; c++) {
    const change = Math.abs(charge[c] - chatter.startCharge[c]);
    if (change > 0) leapS = Math.min(leapS, (MOST_CHANGE * burstS) / change);
  }
  for (let at = 0; at < watch.dueS.length; at++) {
    if (watch.sinceS[at] < chatter.startS) leapS = Math.min(leapS, watch.dueS[at] - kernel.nowS);
  }
  for (const atS of sleepAtS) leapS = Math.min(leapS, atS - kernel.nowS);
  return leapS;
}

/** Clocks that belong to the switching go on from where they stood. */
function shiftClocks(journey: Journey, leapS: number): void {
  const { chatter, kernel, watch } = journey;
  const { retryChargeS, retryDischargeS, recentTripsS } = kernel.state;
  for (let at = 0; at < watch.dueS.length; at++) {
    if (watch.sinceS[at] >= chatter.startS) {
      watch.dueS[at] += leapS;
      watch.sinceS[at] += leapS;
    }
  }
  for (let m = 0; m < retryChargeS.length; m++) {
    retryChargeS[m] += leapS;
    retryDischargeS[m] += leapS;
  }
  for (const trips of recentTripsS)
    trips.forEach((tripS, k) => {
      trips[k] = tripS + leapS;
    });
}
