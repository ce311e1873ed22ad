import type { SummaryRow } from '../questions/answers.js';

/** A figure with its interval, as rows of answers hold it. */
export type Figure = Pick<SummaryRow, 'estimate' | 'lower' | 'upper' | 'note'>;

/** From this size on numbers are printed with an exponent, so that no column outgrows the screen. */
const LARGE = 1e6;
const MOST_DECIMALS = 4;

/**
 * Decimals that a column of figures deserves: so many that its widest interval shows two digits of its width, at least
 * one; one if no figure has an interval.
 */
export function decimalsOf(figures: readonly Figure[]): number {
  const widths = figures.map(({ lower, upper }) => (lower === null || upper === null ? 0 : upper - lower));
  const widest = Math.max(0, ...widths);
  if (widest === 0) return 1;
  return Math.min(MOST_DECIMALS, Math.max(1, 1 - Math.floor(Math.log10(widest))));
}

/** A number on the screen; without a sign if it rounds to zero. */
export function screenNumber(value: number, decimals: number): string {
  if (Math.abs(value) >= LARGE) return value.toExponential(2);
  const text = value.toFixed(decimals);
  return Number(text) === 0 ? (0).toFixed(decimals) : text;
}

/** The same with a sign in front, for differences. */
export function signedNumber(value: number, decimals: number): string {
  const text = screenNumber(value, decimals);
  return Number(text) > 0 ? `+${text}` : text;
}
