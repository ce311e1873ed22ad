import type { ChargerSettings, LoadSettings } from '../study/study.js';
import { type Bank, BLEED_NONE } from './bank.js';
import type { BankState } from './bank-state.js';
import type { PlacedModule } from './placed-module.js';

/** What a circuit of ideal elements and switches with hysteresis does not carry of a bank. */
export type LeftOut =
  | 'bleed'
  | 'bms-delays'
  | 'over-current'
  | 'standby-sleep'
  | 'tail-hold'
  | 'absorption-time'
  | 'disconnect-delay'
  | 'ambient-course'
  | 'ageing'
  | 'visits';

/** What of a stretch of a course decides, beside the bank, what a circuit leaves out of it. */
export interface Stretch {
  readonly cycles: number;
  /** Ambient changes within it. */
  readonly ambientChanges: boolean;
  /** Someone may come to rebalance. */
  readonly hasUpkeep: boolean;
}

/** What this bank, its charger and its load have that a circuit leaves out, in a fixed order. */
export function leftOutOf(bank: Bank, charger: ChargerSettings, load: LoadSettings, stretch: Stretch): LeftOut[] {
  const has: Readonly<Record<LeftOut, boolean>> = {
    bleed: bank.bleedRule.some((rule) => rule !== BLEED_NONE),
    'bms-delays': bank.placed.some(isDelayed),
    'over-current': [bank.overCurrentChargeA, bank.overCurrentDischargeA].some((limits) =>
      limits.some(Number.isFinite),
    ),
    'standby-sleep': bank.asleepA.some((amperes, m) => amperes !== bank.standbyA[m]),
    'tail-hold': charger.tailA > 0 && charger.tailHoldS > 0,
    'absorption-time': charger.absorptionS !== null,
    'disconnect-delay': load.disconnectV !== null && load.disconnectDelayS > 0,
    'ambient-course': stretch.ambientChanges,
    ageing: bank.ageing !== null && stretch.cycles > 1,
    visits: stretch.hasUpkeep && stretch.cycles > 1,
  };
  return (Object.keys(has) as LeftOut[]).filter((what) => has[what]);
}

function isDelayed({ parameters: { bms } }: PlacedModule): boolean {
  const bridges = bms.recloseA !== null && bms.forwardDropV > 0;
  return (
    bms.overVoltageDelayS > 0 ||
    bms.overVoltageReleaseHoldS > 0 ||
    bms.underVoltageDelayS > 0 ||
    bms.underVoltageReleaseHoldS > 0 ||
    (bridges && bms.recloseDelayS > 0)
  );
}

/** The bank without what a circuit leaves out of it. */
export function carriedBank(bank: Bank): Bank {
  const never = new Float64Array(bank.modules).fill(Number.POSITIVE_INFINITY);
  return {
    ...bank,
    bleedRule: new Uint8Array(bank.modules).fill(BLEED_NONE),
    overCurrentChargeA: never,
    overCurrentDischargeA: never,
    asleepA: bank.standbyA,
    placed: bank.placed.map(withoutDelays),
    ageing: null,
  };
}

function withoutDelays({ parameters, cells }: PlacedModule): PlacedModule {
  const atOnce = {
    overVoltageDelayS: 0,
    overVoltageReleaseHoldS: 0,
    underVoltageDelayS: 0,
    underVoltageReleaseHoldS: 0,
    recloseDelayS: 0,
  };
  return { parameters: { ...parameters, bms: { ...parameters.bms, ...atOnce } }, cells };
}

/** The charger without its clocks: charging ends as soon as the tail is reached, and by the tail alone. */
export function carriedCharger(charger: ChargerSettings): ChargerSettings {
  return { ...charger, tailHoldS: 0, absorptionS: null };
}

/** The load without the delay of its disconnect. */
export function carriedLoad(load: LoadSettings): LoadSettings {
  return { ...load, disconnectDelayS: 0 };
}

/** Forgets what a state holds of what a circuit leaves out. */
export function forgetLeftOut(state: BankState): void {
  const { bleeding, overCurrentCharge, overCurrentDischarge, lockedCharge, lockedDischarge, asleep } = state;
  for (const flags of [bleeding, overCurrentCharge, overCurrentDischarge, lockedCharge, lockedDischarge, asleep]) {
    flags.fill(0);
  }
  for (const timesS of [state.retryChargeS, state.retryDischargeS, state.sleepAtS]) {
    timesS.fill(Number.POSITIVE_INFINITY);
  }
  for (const trips of state.recentTripsS) trips.length = 0;
}
