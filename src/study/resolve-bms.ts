import { STOP_BELOW_START_V } from './bleed.js';
import type { BmsInput } from './bms.js';
import type { Layers } from './layers.js';
import type { QuantityName } from './quantities.js';
import type { Reading } from './reading.js';
import { checkRefusal, resolveChargeRefusal } from './resolve-charge-refusal.js';
import { type ResolvedSpread, resolveSpread } from './resolve-spread.js';
import type { BleedSettings, BmsSettings, OverCurrentSettings } from './study.js';
import { renderPath } from './study-path.js';

/** Quantities of a module that stand in the section `bms`. */
type BmsQuantity = Extract<QuantityName, `over${string}` | `under${string}` | `bleed${string}` | `refusal${string}`>;

/** A resolved BMS: what spreads and what does not. */
export interface ResolvedBms {
  readonly settings: BmsSettings;
  readonly spreads: Readonly<Record<BmsQuantity, ResolvedSpread>>;
}

/** @throws RangeError if the layers leave something open: a hole in the defaults is a fault of this program */
export function resolveBms(layers: Layers<BmsInput>, reading: Reading): ResolvedBms {
  const over = layers.inside('over_voltage');
  const under = layers.inside('under_voltage');
  const current = layers.inside('over_current');
  const bleed = layers.inside('bleed');
  const refusal = resolveChargeRefusal(layers.inside('charge_refusal'), reading);
  const spreads = {
    overVoltageV: spreadIn(over, 'cell_V', reading),
    overVoltageReleaseV: spreadIn(over, 'release_V', reading),
    underVoltageV: spreadIn(under, 'cell_V', reading),
    underVoltageReleaseV: spreadIn(under, 'release_V', reading),
    overCurrentChargeA: spreadIn(current, 'charge_A', reading),
    overCurrentDischargeA: spreadIn(current, 'discharge_A', reading),
    bleedA: spreadIn(bleed, 'current_mA', reading),
    bleedStartV: spreadIn(bleed, 'start_V', reading),
    ...refusal.spreads,
  };
  const settings: BmsSettings = {
    overVoltageDelayS: over.si('delay_s', reading),
    overVoltageReleaseHoldS: over.si('release_hold_s', reading),
    underVoltageDelayS: under.si('delay_s', reading),
    underVoltageReleaseHoldS: under.si('release_hold_s', reading),
    underVoltageReleaseOnCharge: under.setting('release_on_charge', reading),
    overCurrent: resolveOverCurrent(current, reading),
    forwardDropV: layers.si('forward_drop_V', reading),
    recloseA: layers.siOrNull('reclose_A', reading),
    recloseDelayS: layers.si('reclose_delay_s', reading),
    bleed: resolveBleed(bleed, spreads.bleedStartV.nominal, reading),
    asleepA: layers.si('asleep_mA', reading),
    asleepAfterS: layers.si('asleep_after_h', reading),
    ...(refusal.settings !== undefined && { chargeRefusal: refusal.settings }),
  };
  checkThresholds(layers, spreads, reading);
  return { settings, spreads };
}

function resolveOverCurrent(
  layers: Layers<NonNullable<BmsInput['over_current']>>,
  reading: Reading,
): OverCurrentSettings {
  return {
    delayS: layers.si('delay_s', reading),
    opens: layers.setting('opens', reading),
    retryS: layers.si('retry_s', reading),
    lockAfterTrips: layers.setting('lock_after', reading),
    lockWindowS: layers.si('lock_window_h', reading),
    lock: layers.setting('lock', reading),
  };
}

function resolveBleed(layers: Layers<NonNullable<BmsInput['bleed']>>, startV: number, reading: Reading): BleedSettings {
  const stop = layers.pick('stop_V') ?? {
    value: Number((startV - STOP_BELOW_START_V).toPrecision(12)),
    source: 'default' as const,
    path: layers.owner,
  };
  if (!(stop.value < startV)) reading.fault(stop.path, `a number below the start of bleeding, ${startV} V`);
  reading.origins.push({
    path: renderPath([...layers.owner, 'stop_V']),
    value: String(stop.value),
    unit: 'V',
    source: stop.source,
  });
  return {
    rule: layers.setting('rule', reading),
    when: layers.setting('when', reading),
    stopBelowStartV: Number((startV - stop.value).toPrecision(12)),
    deltaV: layers.si('delta_mV', reading),
  };
}

/** Thresholds of one BMS must stand in order for every value that their spreads allow. */
export function checkThresholds(
  layers: Layers<BmsInput>,
  spreads: Readonly<Record<BmsQuantity, ResolvedSpread>>,
  reading: Reading,
): void {
  const { overVoltageV, overVoltageReleaseV, underVoltageV, underVoltageReleaseV } = spreads;
  const order = (section: string, key: string, low: ResolvedSpread, high: ResolvedSpread, rule: string): void => {
    if (low.upper < high.lower) return;
    const got = `got up to ${volts(low.upper)} against ${volts(high.lower)}`;
    reading.faultWith([...layers.owner, section, key], `must be ${rule}, ${got}`);
  };
  order('over_voltage', 'release_V', overVoltageReleaseV, overVoltageV, 'below every over-voltage threshold');
  order('under_voltage', 'cell_V', underVoltageV, underVoltageReleaseV, 'below every under-voltage release');
  order('under_voltage', 'cell_V', underVoltageV, overVoltageV, 'below every over-voltage threshold');
  checkRefusal(layers.inside('charge_refusal'), spreads, reading);
}

function spreadIn<T extends object>(layers: Layers<T>, key: keyof T & string, reading: Reading): ResolvedSpread {
  const spread = resolveSpread(layers, key, reading);
  if (spread === undefined) throw new RangeError(`no default for ${[...layers.owner, key].join('.')}`);
  return spread;
}

function volts(value: number): string {
  return `${Math.round(value * 1e4) / 1e4} V`;
}
