import type { Bank } from '../bank/bank.js';
import { CHARGE_ONLY, NO_WAY } from '../bank/bank-state.js';
import type { BankEvent } from '../bank/events.js';
import { chargePathOpen } from '../bank/paths.js';
import { type CycleLog, createCycleLog, logCutoff, MAIN_MARGIN } from '../measures/cycle-log.js';
import { driftNow } from '../measures/drift.js';
import type { Journey } from './advance.js';
import { NOMINAL_CELL_V } from './capacity-test.js';
import { TAIL } from './terminal.js';

/** Losses shorter than this do not count as loss of load, s. */
const NOTICED_S = 1;

/** Watches a journey through its duty and writes the log of its cycles. */
export interface Recorder {
  readonly log: CycleLog;
  /** Current cycle, from 1. */
  cycle: number;
  /** The present segment or a later one of the cycle has load to serve. */
  loadAhead: boolean;
  lostRunS: number;
  stringLostRunS: number;
  trips: number;
  startS: number;
  // End of charge of the present cycle.
  endOfCharge: EndOfCharge | null;
  greatestChargeAs: number;
  criterionMet: boolean;
  chargingBefore: boolean;
  /** Counts when the present burst of trips began. */
  burst: Tally;
}

/** What a leap over endless switching adds to in proportion. */
interface Tally {
  readonly overVoltageTrips: number;
  readonly underVoltageTrips: number;
  readonly overCurrentTrips: number;
  readonly trips: number;
  readonly lostWh: number;
}

interface EndOfCharge {
  readonly spread: number;
  readonly missingAh: number;
  readonly endedByBms: boolean;
}

export function createRecorder(cycles: number): Recorder {
  return {
    log: createCycleLog(cycles),
    cycle: 0,
    loadAhead: false,
    lostRunS: 0,
    stringLostRunS: 0,
    trips: 0,
    startS: 0,
    endOfCharge: null,
    greatestChargeAs: Number.NEGATIVE_INFINITY,
    criterionMet: false,
    chargingBefore: false,
    burst: { overVoltageTrips: 0, underVoltageTrips: 0, overCurrentTrips: 0, trips: 0, lostWh: 0 },
  };
}

export function beginCycle(recorder: Recorder): void {
  recorder.cycle++;
  recorder.endOfCharge = null;
  recorder.greatestChargeAs = Number.NEGATIVE_INFINITY;
  recorder.criterionMet = false;
}

/** Takes an event of the journey. */
export function recordEvent(recorder: Recorder, journey: Journey, event: BankEvent): void {
  const { log } = recorder;
  switch (event.kind) {
    case 'over-voltage-trip':
      log.overVoltageTrips++;
      recorder.trips++;
      recordChargeCutoff(recorder, journey, event, 'voltage');
      break;
    case 'over-current-charge-trip':
      log.overCurrentTrips++;
      recorder.trips++;
      recordChargeCutoff(recorder, journey, event, 'current');
      break;
    case 'under-voltage-trip':
      log.underVoltageTrips++;
      recorder.trips++;
      recordDischargeCutoff(recorder, journey, event, 'voltage');
      break;
    case 'over-current-discharge-trip':
      log.overCurrentTrips++;
      recorder.trips++;
      recordDischargeCutoff(recorder, journey, event, 'current');
      break;
    case 'charge-ended':
      recorder.endOfCharge = endOfChargeNow(journey);
      recorder.criterionMet = true;
      break;
    default:
      break;
  }
}

/** Takes a step before it is committed: what was lost, and whether the bank is at its fullest. */
export function recordStep(recorder: Recorder, journey: Journey, stepS: number): void {
  const { log, cycle } = recorder;
  const { terminal, kernel } = journey;
  const at = cycle - 1;
  const asks = terminal.demandW > 0 || terminal.demandA > 0;
  if (asks && journey.loadLost) {
    recorder.lostRunS += stepS;
    if (recorder.lostRunS > NOTICED_S) log.loadLost[at] = 1;
    const { bank } = kernel;
    const nominalV = NOMINAL_CELL_V * bank.cellStart[bank.positions];
    log.lostWh[at] += ((terminal.demandW + terminal.demandA * nominalV) * stepS) / 3600;
  } else {
    recorder.lostRunS = 0;
  }
  const { chainMode } = kernel.state;
  let stringOpen = false;
  for (let i = 0; i < chainMode.length; i++)
    if (chainMode[i] === CHARGE_ONLY || chainMode[i] === NO_WAY) stringOpen = true;
  if (asks && !journey.loadLost && stringOpen) {
    recorder.stringLostRunS += stepS;
    if (recorder.stringLostRunS > NOTICED_S) log.stringLost[at] = 1;
  } else {
    recorder.stringLostRunS = 0;
  }
  const charging = journey.work.endBankA > 0;
  if (recorder.chargingBefore && !charging) recordGreatestCharge(recorder, journey);
  recorder.chargingBefore = charging;
}

/** A burst begins: remembers the counts, so that a leap can add to them in proportion. */
export function beginBurstRecord(recorder: Recorder): void {
  recorder.burst = tallyOf(recorder);
}

/** Adds `ratio` times what the burst has counted. */
export function recordLeap(recorder: Recorder, ratio: number): void {
  const { log, burst, cycle } = recorder;
  const now = tallyOf(recorder);
  log.averagedChatter = true;
  log.overVoltageTrips += ratio * (now.overVoltageTrips - burst.overVoltageTrips);
  log.underVoltageTrips += ratio * (now.underVoltageTrips - burst.underVoltageTrips);
  log.overCurrentTrips += ratio * (now.overCurrentTrips - burst.overCurrentTrips);
  recorder.trips += ratio * (now.trips - burst.trips);
  log.lostWh[cycle - 1] += ratio * (now.lostWh - burst.lostWh);
}

function tallyOf({ log, trips, cycle }: Recorder): Tally {
  const { overVoltageTrips, underVoltageTrips, overCurrentTrips } = log;
  return { overVoltageTrips, underVoltageTrips, overCurrentTrips, trips, lostWh: log.lostWh[cycle - 1] };
}

/** Closes a cycle: drift, and the end of charge if the criterion was not met. */
export function endCycle(recorder: Recorder, journey: Journey): void {
  const { log, cycle } = recorder;
  const { bank, state, nowS } = journey.kernel;
  const at = cycle - 1;
  recordGreatestCharge(recorder, journey);
  const drift = driftNow(bank, state);
  log.moduleDriftAh[at] = drift.moduleAh ?? 0;
  log.cellDriftAh[at] = drift.cellAh;
  log.trips[at] = recorder.trips;
  recorder.trips = 0;
  if (recorder.endOfCharge !== null) {
    log.chargeSpread[at] = recorder.endOfCharge.spread;
    if ((log.chargeCutoff[at] & MAIN_MARGIN) !== 0) log.chargeMissedAh[at] = recorder.endOfCharge.missingAh;
    if (recorder.criterionMet && recorder.endOfCharge.endedByBms) log.endedByBms[at] = 1;
  }
  log.elapsedS = nowS - recorder.startS;
}

function recordGreatestCharge(recorder: Recorder, journey: Journey): void {
  if (recorder.criterionMet) return;
  const { charge } = journey.kernel.state;
  const { capacityAs } = journey.kernel.bank;
  let sum = 0;
  for (let c = 0; c < charge.length; c++) sum += charge[c] * capacityAs[c];
  if (sum <= recorder.greatestChargeAs) return;
  recorder.greatestChargeAs = sum;
  recorder.endOfCharge = endOfChargeNow(journey);
}

function recordChargeCutoff(
  recorder: Recorder,
  journey: Journey,
  event: BankEvent,
  cause: 'voltage' | 'current',
): void {
  const { watch, terminal } = journey;
  if (!terminal.charging || watch.met[watch.firstTerminal + TAIL] === 1) return;
  const { bank } = journey.kernel;
  let shortfall = Number.NEGATIVE_INFINITY;
  for (let m = 0; m < bank.modules; m++) shortfall = Math.max(shortfall, 1 - moduleCharge(journey, m));
  logCutoff(recorder.log, recorder.cycle, {
    direction: 'charge',
    cause,
    ...slotOf(bank, event),
    shortfall,
    chargeLeftAh: 0,
  });
}

function recordDischargeCutoff(
  recorder: Recorder,
  journey: Journey,
  event: BankEvent,
  cause: 'voltage' | 'current',
): void {
  if (!recorder.loadAhead) return;
  const { bank, state } = journey.kernel;
  const slot = slotOf(bank, event);
  const first = (slot.string - 1) * bank.positions;
  let chargeAs = 0;
  for (let c = bank.cellStart[first]; c < bank.cellStart[first + bank.positions]; c++) {
    chargeAs += bank.capacityAs[c] * state.charge[c];
  }
  const chargeLeftAh = chargeAs / 3600 / bank.cellStart[bank.positions];
  logCutoff(recorder.log, recorder.cycle, { direction: 'discharge', cause, ...slot, shortfall: 0, chargeLeftAh });
}

function slotOf(bank: Bank, { module, cell }: BankEvent): { string: number; position: number; cell: number } {
  return {
    string: Math.floor(module / bank.positions) + 1,
    position: (module % bank.positions) + 1,
    cell: cell < 0 ? 0 : cell - bank.cellStart[module] + 1,
  };
}

/** Capacity-weighted mean charge of the cells of a module. */
function moduleCharge(journey: Journey, m: number): number {
  const { bank, state } = journey.kernel;
  let [charge, capacity] = [0, 0];
  for (let c = bank.cellStart[m]; c < bank.cellStart[m + 1]; c++) {
    charge += bank.capacityAs[c] * state.charge[c];
    capacity += bank.capacityAs[c];
  }
  return charge / capacity;
}

function endOfChargeNow(journey: Journey): EndOfCharge {
  const { bank, state } = journey.kernel;
  let spread = 0;
  for (let string = 0; string < bank.strings; string++) {
    let [most, least] = [Number.NEGATIVE_INFINITY, Number.POSITIVE_INFINITY];
    for (let m = string * bank.positions; m < (string + 1) * bank.positions; m++) {
      const charge = moduleCharge(journey, m);
      most = Math.max(most, charge);
      least = Math.min(least, charge);
    }
    spread = Math.max(spread, most - least);
  }
  let missingAs = 0;
  for (let c = 0; c < bank.cells; c++) missingAs += bank.capacityAs[c] * (1 - state.charge[c]);
  let endedByBms = true;
  for (let string = 0; string < bank.strings && endedByBms; string++) {
    let open = false;
    for (let m = string * bank.positions; m < (string + 1) * bank.positions; m++) {
      if (chargePathOpen(bank, state, m)) open = true;
    }
    endedByBms = open;
  }
  return { spread, missingAh: missingAs / 3600 / bank.cellStart[bank.positions], endedByBms };
}
