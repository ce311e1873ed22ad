/** Settings at which a circuit simulator is quick and still useful on such banks. */
const LOOSE_RELTOL = '1e-4';
const LOOSE_STEP_S = 30;

/**
 * A deck of ours with loose tolerances and long steps.
 *
 * @throws RangeError if it does not set them where our decks do
 */
export function looseDeck(deck: string): string {
  const loose = deck
    .replace(/^(\.option .*reltol=)\S+/m, `$1${LOOSE_RELTOL}`)
    .replace(/^(\.tran \S+ \S+ 0 )\S+/m, `$1${LOOSE_STEP_S}`);
  if (!loose.includes(`reltol=${LOOSE_RELTOL}`) || !/^\.tran \S+ \S+ 0 30 /m.test(loose)) {
    throw new RangeError('the deck must have a line .option with reltol and a line .tran with a longest step');
  }
  return loose;
}
