/** Weights below this share of the largest one no longer change a sum in double precision, however many there are. */
const NEGLIGIBLE = 1e-30;

/**
 * P(X <= k) for X binomial (n, p).
 *
 * Weights follow from the one at the mode, set to 1, by the ratio of neighbours
 *
 *   w(j + 1) / w(j) = (n - j) p / ((j + 1) (1 - p))
 *
 * outwards until they are negligible, and are divided by their own sum: no gamma function, no loss for large n.
 * Relative error about 1e-13; tails below 1e-30 are 0. Takes about 25 standard deviations of X in steps.
 *
 * @param k whole; below 0 the result is 0
 * @param n whole, 0 or more
 * @param p 0 to 1
 * @throws RangeError if an argument is not such a number
 */
export function binomialCdf(k: number, n: number, p: number): number {
  if (!Number.isInteger(k)) throw new RangeError(`count must be whole, got ${k}`);
  if (!(Number.isInteger(n) && n >= 0)) throw new RangeError(`number of trials must be whole, from 0, got ${n}`);
  if (!(p >= 0 && p <= 1)) throw new RangeError(`probability must be 0 to 1, got ${p}`);
  if (k < 0) return 0;
  if (k >= n) return 1;
  if (p === 0) return 1;
  if (p === 1) return 0;
  const odds = p / (1 - p);
  const mode = Math.min(n, Math.floor((n + 1) * p));
  let upTo = 0;
  let beyond = 0;
  for (let j = mode, weight = 1; j >= 0 && weight > NEGLIGIBLE; j--) {
    if (j <= k) upTo += weight;
    else beyond += weight;
    weight *= j / ((n - j + 1) * odds);
  }
  for (let j = mode + 1, weight = ((n - mode) * odds) / (mode + 1); j <= n && weight > NEGLIGIBLE; j++) {
    if (j <= k) upTo += weight;
    else beyond += weight;
    weight *= ((n - j) * odds) / (j + 1);
  }
  return upTo / (upTo + beyond);
}

/**
 * The smallest k with P(X <= k) > q for X binomial (n, p).
 *
 * @param q probability, 0 inclusive to 1 exclusive
 * @throws RangeError if an argument is out of range
 */
export function binomialQuantile(q: number, n: number, p: number): number {
  if (!(q >= 0 && q < 1)) throw new RangeError(`probability must be 0 or more and below 1, got ${q}`);
  let low = 0;
  let high = n;
  while (low < high) {
    const middle = Math.floor((low + high) / 2);
    if (binomialCdf(middle, n, p) > q) high = middle;
    else low = middle + 1;
  }
  return low;
}
