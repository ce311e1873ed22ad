/**
 * Fade after a power law has gone on for a while from the fade reached, by virtual time.
 *
 *   f = k x^p;   x' = (f / k)^(1/p) is where the law of the present conditions reaches f, and
 *   f(x' + dx) = k (x' + dx)^p = (f^(1/p) + k^(1/p) dx)^p
 *
 * Time and throughput enter as what is added, never as what has gone by: the law evaluated anew at a milder condition
 * would give capacity back.
 *
 * @param fade reached so far, fraction of the capacity when new
 * @param factor k at the present conditions, 0 or more, fade per x^p
 * @param exponent p, above 0 and below 1
 * @param increment dx, 0 or more, in the unit of x
 * @returns fade, never below `fade`
 */
export function fadeAfter(fade: number, factor: number, exponent: number, increment: number): number {
  if (!(factor > 0 && increment > 0)) return fade;
  const grown = (fade ** (1 / exponent) + factor ** (1 / exponent) * increment) ** exponent;
  // There and back a power is off by its last digit, more than a minute adds to an old cell.
  return Math.max(fade, grown);
}
