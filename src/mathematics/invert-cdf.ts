/**
 * Least number x from `low` to `high` at which a distribution function reaches u, by halving down to neighbouring
 * numbers: exact where the function jumps, too.
 *
 * @param cdf non-decreasing
 * @param u share, 0 to 1
 * @param low a number at or below the answer
 * @param high a number at or above the answer; returned where the function stays below u up to rounding
 */
export function invertCdf(cdf: (x: number) => number, u: number, low: number, high: number): number {
  if (low >= high || cdf(low) >= u) return low;
  let [below, reached] = [low, high];
  for (;;) {
    const middle = below + (reached - below) / 2;
    if (!(middle > below && middle < reached)) return reached;
    if (cdf(middle) >= u) reached = middle;
    else below = middle;
  }
}
