/**
 * Standard normal distribution function without any library, to hold the library to.
 *
 * Near the middle the series Phi(x) = 1/2 + phi(x) (x + x^3/3 + x^5/(3 5) + ...) (Marsaglia 2004, J. Stat. Softw. 11(4));
 * in the tails Laplace's continued fraction Q(x) = phi(x) / (x + 1/(x + 2/(x + 3/(x + ...)))), which keeps relative digits.
 */
export function phiBySeries(x: number): number {
  const density = Math.exp((-x * x) / 2) / Math.sqrt(2 * Math.PI);
  if (Math.abs(x) < 3) {
    let sum = 0;
    for (let term = x, k = 1; Math.abs(term) > 1e-18 * Math.abs(sum); k += 2) {
      sum += term;
      term *= (x * x) / (k + 2);
    }
    return 0.5 + density * sum;
  }
  let fraction = Math.abs(x);
  for (let k = 200; k >= 1; k--) fraction = Math.abs(x) + k / fraction;
  const tail = density / fraction;
  return x < 0 ? tail : 1 - tail;
}

/** Inverse of `phiBySeries` by bisection. */
export function normalQuantileByBisection(p: number): number {
  let low = -10;
  let high = 10;
  for (let halving = 0; halving < 80; halving++) {
    const middle = (low + high) / 2;
    if (phiBySeries(middle) < p) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}
