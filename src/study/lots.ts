import { z } from 'zod';
import { count } from './amount.js';
import type { Layers } from './layers.js';
import { moduleId, NAME, NAME_RULE } from './names.js';
import type { Reading } from './reading.js';
import { named } from './section.js';
import type { Lots } from './study.js';
import { renderPath } from './study-path.js';

const RULE = 'a whole number from 1 to 1000, or a mapping such as {spring: [A1, A2], autumn: [A3]}';

/** The lots that the modules of a stock come from: how many, or which module is of which. */
export const LOTS = z
  .union([count({ atLeast: 1, atMost: 1000 }), named(NAME, NAME_RULE, z.array(moduleId, 'a list of modules'))], RULE)
  .meta({
    description:
      'How many lots there are (each module comes from one of them by chance), or the modules of each lot by its name; ' +
      'a stock that is like another takes over the number only.',
    default: 1,
  });

export type LotsInput = z.infer<typeof LOTS>;

/** @returns the lots of a stock, undefined if all its modules are of one */
export function resolveLots(
  layers: Layers<{ lots?: LotsInput | undefined }>,
  modules: readonly string[],
  reading: Reading,
): Lots | undefined {
  // Lots of another stock by their modules say nothing about the modules of this one.
  const layer = layers.layers.find(
    ({ values }, place) => typeof values.lots === 'number' || (place === 0 && values.lots !== undefined),
  );
  const lots = layer?.values.lots;
  if (layer === undefined || lots === undefined) return undefined;
  const path = [...layers.owner, 'lots'];
  const words = typeof lots === 'number' ? String(lots) : Object.keys(lots).join(', ');
  reading.origins.push({ path: renderPath(path), value: words, unit: '', source: layer.source });
  if (typeof lots === 'number') return lots === 1 ? undefined : { kind: 'by-chance', count: lots };
  const lotOf = new Map<string, string>();
  for (const [lot, ids] of Object.entries(lots)) {
    for (const [index, id] of ids.entries()) {
      if (!modules.includes(id)) reading.fault([...path, lot, index], 'a module of this stock');
      else if (lotOf.has(id)) reading.fault([...path, lot, index], 'a module that stands in one lot only');
      lotOf.set(id, lot);
    }
  }
  const left = modules.filter((id) => !lotOf.has(id));
  if (left.length > 0)
    reading.faultWith(path, `must be lots of all modules of the stock, got none with ${left.join(', ')}`);
  return { kind: 'by-name', lotOf: Object.fromEntries(lotOf) };
}
