/**
 * Name that was probably meant: the known one with the fewest single-character edits, if they are few for its length.
 *
 * @returns the nearest known name, or undefined if none is near; of equally near ones the first
 */
export function nearestName(name: string, names: readonly string[]): string | undefined {
  const wanted = name.toLowerCase();
  let best: string | undefined;
  // More than a third of the characters wrong is not a typing mistake any more.
  let fewest = Math.floor(Math.max(3, wanted.length) / 3) + 1;
  for (const candidate of names) {
    const known = candidate.toLowerCase();
    // A name that was only begun (capacity for capacity_Ah) is as near as one with a single wrong letter.
    const edits = wanted.length > 2 && known.startsWith(wanted) ? 1 : editDistance(wanted.slice(0, 80), known);
    if (edits < fewest) {
      fewest = edits;
      best = candidate;
    }
  }
  return best;
}

/** @returns ` (did you mean x?)` for the end of a message, empty if no known name is near */
export function didYouMean(name: string, known: readonly string[]): string {
  const near = nearestName(name, known);
  return near === undefined ? '' : ` (did you mean ${near}?)`;
}

/** Edit distance (insert, delete, replace, swap of neighbours): optimal string alignment by dynamic programming. */
function editDistance(a: string, b: string): number {
  let beforeLast: number[] = [];
  let last = Array.from({ length: b.length + 1 }, (_, column) => column);
  for (let row = 1; row <= a.length; row++) {
    const current = [row];
    for (let column = 1; column <= b.length; column++) {
      const same = a[row - 1] === b[column - 1];
      let edits = Math.min(
        (last[column] ?? 0) + 1,
        (current[column - 1] ?? 0) + 1,
        (last[column - 1] ?? 0) + (same ? 0 : 1),
      );
      if (row > 1 && column > 1 && a[row - 1] === b[column - 2] && a[row - 2] === b[column - 1]) {
        edits = Math.min(edits, (beforeLast[column - 2] ?? 0) + 1);
      }
      current.push(edits);
    }
    beforeLast = last;
    last = current;
  }
  return last[b.length] ?? 0;
}
