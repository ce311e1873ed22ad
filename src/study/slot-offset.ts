import { z } from 'zod';
import { amount } from './amount.js';
import { siFromKey } from './units.js';

const offset = amount({ atLeast: -50, atMost: 50 });
const RULE = 'a list with one value per position, or a list of one such list per string';
const perPosition = z.array(offset, RULE).min(1, RULE).max(4, RULE);

/** By how much each slot is warmer than ambient: a list over positions for every string alike, or one list per string. */
export const SLOT_OFFSET = z
  .union([perPosition, z.array(perPosition, RULE).min(1, RULE).max(8, RULE)], RULE)
  .meta({ description: 'By how much each slot is warmer than ambient, from the negative end. Default: 0 everywhere.' });

export type SlotOffsetInput = z.infer<typeof SLOT_OFFSET>;

/** @returns the offset of every slot, string by string, K; undefined if a list has not one per slot */
export function slotOffsets(
  input: SlotOffsetInput,
  strings: number,
  positions: number,
): readonly (readonly number[])[] | undefined {
  const list = isPerString(input) ? input : Array.from({ length: strings }, () => input);
  if (list.length !== strings || list.some((string) => string.length !== positions)) return undefined;
  return list.map((string) => string.map((kelvin) => siFromKey('slot_temperature_offset_K', kelvin)));
}

function isPerString(input: SlotOffsetInput): input is number[][] {
  return Array.isArray(input[0]);
}
