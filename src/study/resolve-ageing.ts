import { type AgeingInput, DEFAULT_AGEING } from './ageing.js';
import type { AgeingSettings } from './ageing-settings.js';
import type { Layers } from './layers.js';
import type { Reading } from './reading.js';
import { exactly, type ResolvedSpread, resolveSpread } from './resolve-spread.js';

/** How a stock or module ages, with the spread of its rate. */
export interface ResolvedAgeing {
  readonly settings: AgeingSettings;
  readonly rate: ResolvedSpread;
}

/** Rate of what does not age, so that every stock has all quantities. */
export const UNAGEING: ResolvedSpread = exactly(1);

/**
 * @param written the section `ageing` of a stock or module and of those it is like
 * @returns undefined if nothing ages; a section without a law is a fault
 */
export function resolveAgeing(written: Layers<AgeingInput>, reading: Reading): ResolvedAgeing | undefined {
  const [first] = written.layers;
  if (first === undefined) return undefined;
  const law = written.pick('law')?.value;
  if (law === undefined) {
    reading.fault(first.path, 'a mapping with a law such as naumann');
    return undefined;
  }
  const layers = written.over({ source: 'default', path: written.owner, values: DEFAULT_AGEING });
  layers.setting('law', reading);
  if (law === 'none') return undefined;
  const settings: AgeingSettings = {
    law,
    initialFadeFraction: layers.si('initial_fade_percent', reading),
    resistanceGrowth: layers.si('resistance_growth', reading),
  };
  const rate = resolveSpread(layers, 'rate', reading);
  return rate && { settings, rate };
}
