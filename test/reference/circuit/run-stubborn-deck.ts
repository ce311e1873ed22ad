import { type CircuitRun, runDeck } from './run-deck.js';

/** Options in which the attempts at a deck differ: in how its equations are ordered, not in what they say. */
const ORDERINGS = ['', 'pivrel=0.02', 'pivrel=0.1', 'pivrel=0.5', 'pivrel=0.005'];
const LIMIT_S = 240;

/**
 * Runs a deck, again with its equations solved in another order where the simulator gives up. Soon after a cascade of trips
 * the equations are ill-conditioned, since a path of milliohms has become one of a megohm within a step, and whether the
 * simulator gets over it or shortens its steps to nothing hangs on that order.
 *
 * @returns the first run that comes to its end, and the number of attempts
 * @throws Error of the last attempt if none does
 */
export async function runStubbornDeck(deck: string): Promise<CircuitRun & { readonly attempts: number }> {
  for (let attempts = 1; ; attempts++) {
    try {
      const run = await runDeck(deck.replace(/^\.option /m, `.option ${ORDERINGS[attempts - 1]} `), LIMIT_S);
      return { ...run, attempts };
    } catch (error) {
      if (attempts === ORDERINGS.length) throw error;
    }
  }
}
