import type { Bank } from '../bank/bank.js';
import type { BankState } from '../bank/bank-state.js';
import type { BankEqualiser } from '../bank/equaliser.js';
import type { BankEvent } from '../bank/events.js';
import { LEAKING } from '../bank/network.js';
import { storedEnergyGainJ } from '../bank/stored-energy.js';
import { type WiringLoss, wiringLossOf, wiringLossW } from '../bank/wiring-loss.js';
import { type BankAccount, DAMAGED_BELOW_V } from '../measures/bank-account.js';
import type { Journey } from './advance.js';
import { createEqualiserStep, type EqualiserStep, lookAtEqualisers } from './equaliser-account.js';
import { cellVoltageV } from './kernel.js';

/** Sums that go on in proportion when endless switching is leapt over. */
const IN_J = 0;
const OUT_J = 1;
const WIRING_J = 2;
const BLEED_J = 3;
const CHARGER_ONLY_S = 4;
/** Charge into the bank at its bus since the start, As. */
const NET_AS = 5;
const TRIPS = 6;
/** Charge that equalisers took, the part of it from the emptier module, and what they lost. */
const MOVED_AS = 7;
const COUNTER_AS = 8;
const EQUALISER_J = 9;
const SUMS = 10;

/** Keeps the account of a bank on its way. */
export interface Accountant {
  readonly wiringLoss: WiringLoss;
  readonly sums: Float64Array;
  /** `sums` when the present burst of trips began. */
  readonly burst: Float64Array;
  /** Charge of the cells at the start, or after the latest visit. */
  readonly sinceCharge: Float64Array;
  storedGainJ: number;
  /** A visit has changed the charge of the cells since the latest step. */
  visited: boolean;
  visits: number;
  readonly damaged: Uint8Array;
  /** Start, or latest full charge or visit. */
  fullS: number;
  /** Emptiest moment since then. */
  leastAs: number;
  tripsAtLeast: number;
  longestS: number;
  tripsToFull: number | null;
  toFullAs: number | null;
  // Shapes of the chain currents over a step: mean, half of the rise, and bow.
  readonly meanA: Float64Array;
  readonly riseA: Float64Array;
  readonly bowA: Float64Array;
  readonly equaliserStep: EqualiserStep;
}

export function createAccountant(bank: Bank, charge: Float64Array): Accountant {
  const chains = bank.wiring.chains.length;
  return {
    wiringLoss: wiringLossOf(bank.wiring),
    sums: new Float64Array(SUMS),
    burst: new Float64Array(SUMS),
    sinceCharge: Float64Array.from(charge),
    storedGainJ: 0,
    visited: false,
    visits: 0,
    damaged: new Uint8Array(bank.cells),
    fullS: 0,
    leastAs: 0,
    tripsAtLeast: 0,
    longestS: 0,
    tripsToFull: null,
    toFullAs: null,
    meanA: new Float64Array(chains),
    riseA: new Float64Array(chains),
    bowA: new Float64Array(chains),
    equaliserStep: createEqualiserStep(chains),
  };
}

/** Takes an event of the journey; a visit is told of before it changes anything. */
export function accountEvent(accountant: Accountant, journey: Journey, event: BankEvent): void {
  const { sums } = accountant;
  if (event.kind.endsWith('-trip')) sums[TRIPS]++;
  else if (event.kind === 'charge-ended') endGap(accountant, event.timeS, true);
  else if (event.kind === 'upkeep-visit') {
    const { bank, state } = journey.kernel;
    accountant.storedGainJ += storedEnergyGainJ(bank, accountant.sinceCharge, state.charge);
    accountant.visited = true;
    accountant.visits++;
    endGap(accountant, event.timeS, false);
  }
}

/**
 * Capacity has gone at kept charge fractions, and with it the energy that it held.
 *
 *   sum over cells of (Q - Q') integral from 0 to z of U(z) dz
 */
export function accountFade(accountant: Accountant, { charge }: BankState, before: Bank, after: Bank): void {
  const capacityAs = before.capacityAs.map((capacity, c) => capacity - after.capacityAs[c]);
  const empty = new Float64Array(charge.length);
  if (!accountant.visited) accountant.storedGainJ += storedEnergyGainJ(before, accountant.sinceCharge, charge);
  accountant.storedGainJ -= storedEnergyGainJ({ ...before, capacityAs }, empty, charge);
  accountant.sinceCharge.set(charge);
}

/** The time without a full charge ends, by a charge in the bank if `inBank`, else by a visit or with the course. */
function endGap(accountant: Accountant, nowS: number, inBank: boolean): void {
  const { sums } = accountant;
  const gapS = nowS - accountant.fullS;
  if (gapS > accountant.longestS) {
    accountant.longestS = gapS;
    accountant.tripsToFull = inBank ? sums[TRIPS] - accountant.tripsAtLeast : null;
    accountant.toFullAs = inBank ? sums[NET_AS] - accountant.leastAs : null;
  }
  accountant.fullS = nowS;
  accountant.leastAs = sums[NET_AS];
  accountant.tripsAtLeast = sums[TRIPS];
}

/**
 * Takes a step before it is committed. Currents run as parabolas through both ends with the mean that the step has passed,
 * the bus voltage as a straight line:
 *
 *   I = m + p x + q (3 x^2 - 1) / 2,   x from -1 to 1:   mean of I^2 = m^2 + p^2 / 3 + q^2 / 5,   of V I = V_m m + V_p p / 3
 */
export function accountStep(accountant: Accountant, journey: Journey, stepS: number): void {
  const { kernel, work, terminal } = journey;
  const { bank, bus, state } = kernel;
  const { sums, wiringLoss, meanA, riseA, bowA } = accountant;
  if (accountant.visited) {
    accountant.visited = false;
    accountant.sinceCharge.set(state.charge);
  }
  const { firstA, lastA, endAs } = work;
  const { busShare } = wiringLoss;
  let bankA = 0;
  for (let i = 0; i < meanA.length; i++) {
    const mean = endAs[i] / stepS;
    meanA[i] = mean;
    riseA[i] = 0.5 * (lastA[i] - firstA[i]);
    bowA[i] = 0.5 * (lastA[i] + firstA[i]) - mean;
  }
  if (bank.equaliser !== null) accountEqualisers(accountant, journey, bank.equaliser);
  for (let i = 0; i < meanA.length; i++) bankA += busShare[i] * meanA[i];
  const busJ =
    stepS *
    (0.5 * (bus.bankV + work.endBankV) * bankA + ((work.endBankV - bus.bankV) * (work.endBankA - bus.bankA)) / 12);
  if (busJ > 0) sums[IN_J] += busJ;
  else sums[OUT_J] -= busJ;
  const wiringW =
    wiringLossW(wiringLoss, meanA) + wiringLossW(wiringLoss, riseA) / 3 + wiringLossW(wiringLoss, bowA) / 5;
  sums[WIRING_J] += stepS * wiringW;
  sums[NET_AS] += stepS * bankA;
  if (sums[NET_AS] < accountant.leastAs) {
    accountant.leastAs = sums[NET_AS];
    accountant.tripsAtLeast = sums[TRIPS];
  }
  accountBleed(sums, journey, stepS);
  if ((terminal.demandW > 0 || terminal.demandA > 0) && !journey.loadLost && nothingConducts(state.conduction)) {
    sums[CHARGER_ONLY_S] += stepS;
  }
  for (let m = 0; m < bank.modules; m++) {
    if (kernel.lowestV[m] < DAMAGED_BELOW_V) markDamaged(accountant.damaged, journey, m);
  }
}

/** Books what equalisers did, and takes it off the currents of the modules: what is left passes the leads. */
function accountEqualisers(accountant: Accountant, journey: Journey, equaliser: BankEqualiser): void {
  const { sums, meanA, riseA, bowA, equaliserStep } = accountant;
  lookAtEqualisers(equaliserStep, equaliser, journey);
  sums[MOVED_AS] += equaliserStep.movedAs;
  sums[COUNTER_AS] += equaliserStep.counterAs;
  sums[EQUALISER_J] += equaliserStep.lostJ;
  for (let i = 0; i < meanA.length; i++) {
    const firstA = meanA[i] + bowA[i] - riseA[i];
    const lastA = meanA[i] + bowA[i] + riseA[i];
    const endA = equaliserStep.meanA[i] + equaliserStep.riseA[i];
    const startA = equaliserStep.meanA[i] - equaliserStep.riseA[i];
    meanA[i] -= equaliserStep.meanA[i];
    riseA[i] = 0.5 * (lastA - endA - firstA + startA);
    bowA[i] = 0.5 * (lastA - endA + firstA - startA) - meanA[i];
  }
}

/** Bleed current times cell voltage at the end of the step, for as long as a cell bled. */
function accountBleed(sums: Float64Array, { kernel, work, bleedPlan }: Journey, stepS: number): void {
  const { bank, state } = kernel;
  const { bleeding } = state;
  for (let c = 0; c < bleeding.length; c++) {
    if (bleeding[c] === 0 && !(bleedPlan.any && bleedPlan.switched[c] === 1)) continue;
    let bledAs = bleeding[c] === 1 ? bank.bleedA[bank.moduleOfCell[c]] * stepS : 0;
    if (bleedPlan.any) bledAs -= bleedPlan.correctionAs[c] / (kernel.chargePerAs[c] * bank.capacityAs[c]);
    sums[BLEED_J] += bledAs * cellVoltageV(kernel, c, work.lastA, work.endFilterA);
  }
}

function nothingConducts(conduction: Uint8Array): boolean {
  for (let i = 0; i < conduction.length; i++) if (conduction[i] !== LEAKING) return false;
  return true;
}

function markDamaged(damaged: Uint8Array, { kernel, work }: Journey, m: number): void {
  const { cellStart } = kernel.bank;
  for (let c = cellStart[m]; c < cellStart[m + 1]; c++) {
    if (cellVoltageV(kernel, c, work.lastA, work.endFilterA) < DAMAGED_BELOW_V) damaged[c] = 1;
  }
}

/** A burst begins: remembers the sums, so that a leap can add to them in proportion. */
export function beginBurstAccount({ sums, burst }: Accountant): void {
  burst.set(sums);
}

/** Adds `ratio` times what the burst has summed. */
export function accountLeap({ sums, burst }: Accountant, ratio: number): void {
  for (let k = 0; k < SUMS; k++) sums[k] += ratio * (sums[k] - burst[k]);
}

/** Closes the account at the end of the course. */
export function closeAccount(accountant: Accountant, { kernel }: Journey): BankAccount {
  const { sums, sinceCharge, damaged } = accountant;
  endGap(accountant, kernel.nowS, false);
  const gainJ = accountant.storedGainJ + storedEnergyGainJ(kernel.bank, sinceCharge, kernel.state.charge);
  return {
    visits: accountant.visits,
    inWh: sums[IN_J] / 3600,
    outWh: sums[OUT_J] / 3600,
    storedGainWh: gainJ / 3600,
    wiringWh: sums[WIRING_J] / 3600,
    bleedWh: sums[BLEED_J] / 3600,
    equaliserAh: sums[MOVED_AS] / 3600,
    equaliserCounterAh: sums[COUNTER_AS] / 3600,
    equaliserWh: sums[EQUALISER_J] / 3600,
    chargerOnlyS: sums[CHARGER_ONLY_S],
    damagedCells: damaged.reduce((count, flag) => count + flag, 0),
    longestUnfilledS: accountant.longestS,
    tripsToFull: accountant.tripsToFull,
    toFullAh: accountant.toFullAs === null ? null : accountant.toFullAs / 3600,
  };
}
