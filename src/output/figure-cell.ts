import { type Figure, screenNumber, signedNumber } from './screen-number.js';

/** What stands below a dash, by the beginning of the note that says why there is no figure. */
const REASONS: readonly (readonly [string, string])[] = [
  ['not applicable: one BMS', 'one BMS'],
  ['not estimable', 'too few'],
  ['absent', 'absent'],
];

/**
 * Two lines: the estimate, below it the interval; a dash and the reason if there is none.
 *
 * @param style `share` marks shares that would be rounded to none or all; `difference` puts signs in front
 */
export function figureCell(
  figure: Figure,
  decimals: number,
  style: 'share' | 'amount' | 'difference',
): readonly string[] {
  const { estimate, lower, upper, note } = figure;
  if (estimate === null || lower === null || upper === null) return ['-', reasonFor(note)];
  const number = style === 'difference' ? signedNumber : screenNumber;
  const shown = style === 'share' ? shareText(estimate, decimals) : number(estimate, decimals);
  return [shown, `${number(lower, decimals)} to ${number(upper, decimals)}`];
}

/** A percentage that is neither none nor all does not look like it: `<0.1`, `>99.9`. */
function shareText(percent: number, decimals: number): string {
  const text = screenNumber(percent, decimals);
  const least = screenNumber(10 ** -decimals, decimals);
  if (percent > 0 && Number(text) === 0) return `<${least}`;
  if (percent < 100 && Number(text) === 100) return `>${screenNumber(100 - 10 ** -decimals, decimals)}`;
  return text;
}

function reasonFor(note: string): string {
  return REASONS.find(([start]) => note.startsWith(start))?.[1] ?? '';
}
