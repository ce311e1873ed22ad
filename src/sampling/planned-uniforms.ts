import type { Study } from '../study/study.js';
import { nestedScramble } from './nested-scramble.js';
import { permutedPlace } from './permuted-place.js';
import { sobolDigits } from './sobol.js';
import { columnStream, type DrawScope, type UniformOf, uniformsOf } from './streams.js';

/** Steps within a stratum: with the 12 digits of the largest block, u has the 53 digits of a double. */
const STEPS = 2 ** 40;

/**
 * The uniforms of a scope by the sampling plan of a study.
 *
 * A plan that binds the instances of a block says for every draw in which of the B equal strata of 0 to 1 it lies; within
 * the stratum it lies where the independent draw lies in 0 to 1:
 *
 *   u = (stratum + v) / B
 *
 * - `latin-hypercube`: the strata of a draw are a random permutation of the instances of a block, another for every draw
 *   and every block.
 * - `sobol`: draws that have a column take the strata of scrambled points of Sobol, so that they are evenly spread
 *   together too; all others are as in a Latin hypercube, which permutes them at random against the columns and against
 *   each other.
 *
 * Either way every block is drawn anew, so blocks are independent of each other, and every u by itself is uniform and
 * strictly between 0 and 1. It depends on the scope, the quantity, the block size and, for `sobol`, its column.
 *
 * @see McKay, Beckman & Conover 1979, Technometrics 21(2), 239-245; Owen 1998, ACM Trans. Model. Comput. Simul. 8(1),
 *   71-102 (Latin supercube sampling)
 */
export function plannedUniforms({
  plan,
  blockSize,
  sobolColumns = [],
}: Pick<Study, 'plan' | 'blockSize' | 'sobolColumns'>): (scope: DrawScope) => UniformOf {
  if (plan === 'independent') return uniformsOf;
  const own = plan === 'sobol' ? sobolColumns : [];
  const columns = new Map(own.map((column, number) => [addressOf(column, column.quantity), number]));
  const digits = 31 - Math.clz32(blockSize);
  return (scope) => {
    const uniformOf = uniformsOf(scope);
    const place = scope.index - 1;
    return (quantity) => {
      const next = columnStream(scope, quantity);
      const column = columns.get(addressOf(scope, quantity));
      const stratum =
        column === undefined
          ? permutedPlace(place, blockSize, next)
          : nestedScramble(sobolDigits(column, place, digits), digits, next);
      return (stratum + (Math.floor(uniformOf(quantity) * STEPS) + 0.5) / STEPS) / blockSize;
    };
  };
}

/** What a draw and a column have in common. */
interface Address {
  readonly level: string;
  readonly stock: string | null;
  readonly module: string | null;
  readonly lot?: string | undefined;
}

function addressOf({ level, stock, module, lot }: Address, quantity: string): string {
  return JSON.stringify([level, stock, module, lot ?? null, quantity]);
}
