import type { ChargeRefusalInput } from './charge-refusal.js';
import { Layers } from './layers.js';
import type { Reading } from './reading.js';
import { exactly, type ResolvedSpread, resolveSpread } from './resolve-spread.js';
import type { BmsSettings } from './study.js';
import { inUnitOfKey } from './units.js';

/** The temperatures at which a BMS refuses charge and allows it again. */
export interface RefusalSpreads {
  readonly refusalBelowK: ResolvedSpread;
  readonly refusalReleaseK: ResolvedSpread;
}

export interface ResolvedRefusal {
  /** Nominal temperatures; undefined = never. */
  readonly settings: BmsSettings['chargeRefusal'];
  readonly spreads: RefusalSpreads;
}

/** What never refuses has all quantities too; nothing asks for these. */
const NEVER: ResolvedRefusal = {
  settings: undefined,
  spreads: { refusalBelowK: exactly(273.15), refusalReleaseK: exactly(278.15) },
};

export function resolveChargeRefusal(layers: Layers<ChargeRefusalInput>, reading: Reading): ResolvedRefusal {
  if (neverRefuses(layers)) {
    layers.setting('below_degC', reading);
    layers.setting('release_degC', reading);
    return NEVER;
  }
  // Whoever writes `never` says nothing of a temperature that a layer above could take over.
  const never = layers.layers.findIndex(({ values }) => values.below_degC === null);
  const sayingWhen = new Layers(layers.owner, never < 0 ? layers.layers : layers.layers.slice(0, never));
  const refusalBelowK = resolveSpread(sayingWhen, 'below_degC', reading);
  if (refusalBelowK === undefined) {
    reading.fault(layers.pick('below_degC')?.path ?? layers.owner, 'a spread with its nominal value');
    return NEVER;
  }
  const refusalReleaseK = resolveSpread(layers, 'release_degC', reading);
  if (refusalReleaseK === undefined) throw new RangeError('no default for release_degC');
  return {
    settings: { belowK: refusalBelowK.nominal, releaseK: refusalReleaseK.nominal },
    spreads: { refusalBelowK, refusalReleaseK },
  };
}

/** A release must be warmer than the refusal for every value that both spreads allow. */
export function checkRefusal(
  layers: Layers<ChargeRefusalInput>,
  { refusalBelowK, refusalReleaseK }: RefusalSpreads,
  reading: Reading,
): void {
  if (neverRefuses(layers) || refusalReleaseK.lower > refusalBelowK.upper) return;
  const degC = (kelvin: number): number => Math.round(inUnitOfKey('degC', kelvin) * 1e4) / 1e4;
  const byDefault = layers.pick('release_degC')?.source === 'default' ? ' by default' : '';
  reading.faultWith(
    [...layers.owner, 'release_degC'],
    `must be above every temperature of refusal, got ${degC(refusalReleaseK.lower)} degC${byDefault} against ${degC(refusalBelowK.upper)} degC`,
  );
}

function neverRefuses(layers: Layers<ChargeRefusalInput>): boolean {
  return layers.pick('below_degC')?.value === null;
}
