/**
 * Upper end of a narrow bracket around a point at which a continuous function rises through zero.
 *
 * False position with the weight of a retained end halved (Illinois), every fourth guess a bisection so that it cannot stall.
 *
 * @param f below 0 at `low`, 0 or more at `high`
 * @param width greatest distance between the bracket's ends, above 0
 * @returns a point where f is 0 or more, at most `width` above one where it is below 0
 * @see Dowell & Jarratt 1971, BIT 11, 168-174
 */
export function firstCrossing(
  f: (x: number) => number,
  low: number,
  lowValue: number,
  high: number,
  highValue: number,
  width: number,
): number {
  let [a, b, fa, fb] = [low, high, lowValue, highValue];
  let movedLast: 'low' | 'high' | null = null;
  for (let guess = 1; b - a > width; guess++) {
    const secant = a + ((b - a) * fa) / (fa - fb);
    const x = guess % 4 === 0 ? 0.5 * (a + b) : Math.min(Math.max(secant, a + 0.5 * width), b - 0.5 * width);
    const value = f(x);
    if (value >= 0) {
      b = x;
      fb = value;
      if (movedLast === 'high') fa *= 0.5;
      movedLast = 'high';
    } else {
      a = x;
      fa = value;
      if (movedLast === 'low') fb *= 0.5;
      movedLast = 'low';
    }
  }
  return b;
}
