import type { Bank } from '../bank/bank.js';
import { createNetworkCache, type NetworkCache } from '../bank/conduction.js';
import type { BankEventKind } from '../bank/events.js';
import { findPiece } from '../bank/ocv-curves.js';
import { clearIdleBridges } from '../bank/protection.js';
import { REFERENCE_K } from '../bank/temperature.js';
import { warmedBank } from '../bank/warmed-bank.js';
import type { Journey } from './advance.js';

/** Ambient temperatures kept ready: more than the rows of most days. */
const MOST_AMBIENTS = 64;

/** The temperature around a bank, and the bank as it is at those met lately. A module follows ambient at once. */
export interface Climate {
  /** The bank at 25 degC, as its cells have aged. */
  reference: Bank;
  readonly known: Map<number, { readonly bank: Bank; readonly cache: NetworkCache }>;
  /** NaN until the first segment has set it. */
  ambientK: number;
}

/**
 * Puts another bank, at 25 degC, in the place of one whose cells have aged; ambient, once set, stays as it is. To be
 * settled afterwards.
 */
export function takeAged(journey: Journey, climate: Climate, reference: Bank): void {
  climate.reference = reference;
  climate.known.clear();
  replaceBank(journey, climate, moduleTemperatures(climate));
}

/** @param reference the bank at 25 degC */
export function createClimate(reference: Bank): Climate {
  return { reference, known: new Map(), ambientK: Number.NaN };
}

/**
 * Gives a bank its ambient temperature from now on: what follows temperature changes with it, and each BMS refuses or
 * allows charging. To be settled afterwards.
 *
 * @param ambientK K; absent = 25 degC
 */
export function takeAmbient(journey: Journey, climate: Climate, ambientK = REFERENCE_K): void {
  if (ambientK === climate.ambientK) return;
  climate.ambientK = ambientK;
  const temperatureK = moduleTemperatures(climate);
  replaceBank(journey, climate, temperatureK);
  judgeCharging(journey, temperatureK);
}

function moduleTemperatures({ reference, ambientK }: Climate): Float64Array {
  return reference.temperature.offsetK.map((offsetK) => ambientK + offsetK);
}

function replaceBank({ kernel }: Journey, climate: Climate, temperatureK: Float64Array): void {
  const { reference, known, ambientK } = climate;
  let conditions = known.get(ambientK);
  if (conditions === undefined) {
    if (known.size >= MOST_AMBIENTS) known.clear();
    conditions = { bank: warmedBank(reference, temperatureK), cache: createNetworkCache() };
    known.set(ambientK, conditions);
  }
  if (kernel.bank === conditions.bank) return;
  const { bank } = conditions;
  kernel.bank = bank;
  kernel.cache = conditions.cache;
  // The numbers of pieces and curves are others now.
  const { pieceOfCell } = kernel.point;
  for (let c = 0; c < bank.cells; c++) {
    pieceOfCell[c] = findPiece(bank.ocv, bank.curveOfCell[c], kernel.state.charge[c]);
  }
}

/** Lets each BMS refuse charging below its one temperature and allow it again from its other on. */
function judgeCharging(journey: Journey, temperatureK: Float64Array): void {
  const { bank, state, nowS } = journey.kernel;
  const { refusalK, releaseK } = bank.temperature;
  const tell = (kind: BankEventKind, module: number): void => journey.onEvent({ kind, timeS: nowS, module, cell: -1 });
  for (let m = 0; m < temperatureK.length; m++) {
    if (state.tooCold[m] === 1 ? temperatureK[m] < releaseK[m] : !(temperatureK[m] < refusalK[m])) continue;
    state.tooCold[m] = 1 - state.tooCold[m];
    tell(state.tooCold[m] === 1 ? 'cold-charge-refusal' : 'cold-charge-release', m);
  }
  clearIdleBridges(bank, state);
}
