/** Two points close to each other with a rise through zero between them. */
export interface Bracket {
  readonly low: number;
  /** Value at `low`, below 0. */
  readonly lowValue: number;
  readonly high: number;
  /** Value at `high`, 0 or more. */
  readonly highValue: number;
}

/**
 * Narrows a bracket around a point at which a continuous function rises through zero.
 *
 * False position with the weight of a retained end halved (Illinois), every fourth guess a bisection so that it cannot
 * stall.
 *
 * @param width greatest distance between the ends of the bracket returned, above 0
 * @see Dowell & Jarratt 1971, BIT 11, 168-174
 */
export function firstCrossing(f: (x: number) => number, bracket: Bracket, width: number): Bracket {
  let { low, lowValue, high, highValue } = bracket;
  let [lowWeight, highWeight] = [lowValue, highValue];
  let movedLast: 'low' | 'high' | null = null;
  for (let guess = 1; high - low > width; guess++) {
    const secant = low + ((high - low) * lowWeight) / (lowWeight - highWeight);
    const bounded = Math.min(Math.max(secant, low + 0.5 * width), high - 0.5 * width);
    const x = guess % 4 === 0 ? 0.5 * (low + high) : bounded;
    const value = f(x);
    if (value >= 0) {
      high = x;
      highValue = highWeight = value;
      if (movedLast === 'high') lowWeight *= 0.5;
      movedLast = 'high';
    } else {
      low = x;
      lowValue = lowWeight = value;
      if (movedLast === 'low') highWeight *= 0.5;
      movedLast = 'low';
    }
  }
  return { low, lowValue, high, highValue };
}
