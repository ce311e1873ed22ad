/** One table of counts over the cells of a multinomial law, with its probability. */
export interface CountTable {
  readonly counts: readonly number[];
  readonly probability: number;
}

/** Every table of n over the cells: what an interval does on all of them, weighted, is its exact behaviour. */
export function allTables(n: number, shares: readonly number[]): CountTable[] {
  const [share = 1, ...others] = shares;
  if (others.length === 0) return [{ counts: [n], probability: share ** n }];
  const tables: CountTable[] = [];
  let ways = 1;
  for (let count = 0; count <= n; count++) {
    if (count > 0) ways = (ways * (n - count + 1)) / count;
    for (const rest of allTables(n - count, others)) {
      tables.push({
        counts: [count, ...rest.counts],
        probability: ways * share ** count * rest.probability,
      });
    }
  }
  return tables;
}

/** Probability of the tables for which a statement holds. */
export function probabilityThat(tables: readonly CountTable[], holds: (counts: readonly number[]) => boolean): number {
  return tables.reduce((sum, { counts, probability }) => sum + (holds(counts) ? probability : 0), 0);
}
