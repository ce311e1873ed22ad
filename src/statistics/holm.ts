/**
 * P values of a family of tests, adjusted by Holm's step-down procedure: all hypotheses whose adjusted value is at most
 * alpha may be rejected together with a probability of at most alpha that any of them is true.
 *
 *   p~(i) = max over j <= i of min(1, (m - j + 1) p(j)),   p(1) <= ... <= p(m)
 *
 * Good for decisions only; for intervals that hold together each takes the confidence of `bonferroniConfidence`.
 *
 * @param pValues each 0 to 1
 * @returns adjusted values in the order of `pValues`
 * @throws RangeError if a value is no probability
 * @see Holm 1979, Scand. J. Stat. 6, 65-70
 */
export function holmAdjusted(pValues: readonly number[]): readonly number[] {
  const adjusted = new Array<number>(pValues.length).fill(1);
  let largest = 0;
  const ascending = [...pValues.entries()].sort(([, one], [, other]) => one - other);
  for (const [place, [index, p]] of ascending.entries()) {
    if (!(p >= 0 && p <= 1)) throw new RangeError(`p value must be 0 to 1, got ${p}`);
    largest = Math.max(largest, Math.min(1, (pValues.length - place) * p));
    adjusted[index] = largest;
  }
  return adjusted;
}

/**
 * Confidence of each of several intervals so that all hold together with the confidence wanted, whatever their
 * dependence (Bonferroni's inequality).
 *
 * @param intervals 1 or more
 */
export function bonferroniConfidence(confidence: number, intervals: number): number {
  return 1 - (1 - confidence) / intervals;
}
