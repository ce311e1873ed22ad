/** A rational number, exact: for checks of rounding. The denominator is above 0; fractions are not reduced. */
export interface Fraction {
  readonly over: bigint;
  readonly under: bigint;
}

export const ZERO: Fraction = { over: 0n, under: 1n };
export const ONE: Fraction = { over: 1n, under: 1n };

/** The exact value of a finite double. */
export function fractionOf(value: number): Fraction {
  let under = 1n;
  let rest = value;
  while (!Number.isInteger(rest)) {
    rest *= 2;
    under *= 2n;
  }
  return reduced(BigInt(rest), under);
}

export const sum = (a: Fraction, b: Fraction): Fraction =>
  reduced(a.over * b.under + b.over * a.under, a.under * b.under);
export const difference = (a: Fraction, b: Fraction): Fraction => sum(a, { over: -b.over, under: b.under });
export const product = (a: Fraction, b: Fraction): Fraction => reduced(a.over * b.over, a.under * b.under);

/** @throws RangeError if `b` is 0 */
export function quotient(a: Fraction, b: Fraction): Fraction {
  return b.over < 0n ? reduced(-a.over * b.under, a.under * -b.over) : reduced(a.over * b.under, a.under * b.over);
}

/** The nearest double within 2 units of its last place, for values whose size a double can hold. */
export function numberOf({ over, under }: Fraction): number {
  const shift = BigInt(64 + Math.max(0, under.toString(2).length - over.toString(2).length));
  return Number((over << shift) / under) / 2 ** Number(shift);
}

function reduced(over: bigint, under: bigint): Fraction {
  let [a, b] = [over < 0n ? -over : over, under];
  while (b > 0n) [a, b] = [b, a % b];
  return { over: over / a, under: under / a };
}
