import type { PopulationStock } from '../study/study.js';
import type { UniformOf } from './streams.js';

/**
 * The lot that a module comes from: its name, or undefined for the one lot that every stock has.
 *
 * Of several unnamed lots each is as likely as any other, for every module by itself; the first is that one lot, so that
 * a second lot leaves its draws as they were.
 *
 * @param uniformOf uniforms of the module at level `lot`
 */
export function lotOf({ lots }: PopulationStock, module: string, uniformOf: UniformOf): string | undefined {
  if (lots === undefined) return undefined;
  if (lots.kind === 'by-name') return lots.lotOf[module];
  const number = 1 + Math.floor(lots.count * uniformOf('lot'));
  return number === 1 ? undefined : String(number);
}
