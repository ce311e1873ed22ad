import { choleskyFactor } from '../mathematics/cholesky.js';
import { normalCdf, normalQuantile } from '../mathematics/inverse-cdf.js';
import type { QuantityName } from '../study/quantities.js';
import type { Correlation } from '../study/study.js';
import { QUANTITY_ORDER } from './quantity-order.js';
import type { UniformOf } from './streams.js';

/** The quantities of one level that are drawn together. */
export interface Copula {
  /** In registry order. */
  readonly members: readonly QuantityName[];
  /** Correlated uniforms, 0 to 1, one per member, from independent ones. */
  readonly uniforms: (uniformOf: UniformOf) => readonly number[];
}

/**
 * Gaussian copula of the correlations of one level: u = Phi(L z) with z = PhiInverse of the members' own independent
 * uniforms and L the Cholesky factor of their correlation matrix in registry order.
 *
 * rho is the correlation of the normal scores. Between two normals it is that of the values too, but for the cut; between
 * other laws the values are correlated slightly less.
 *
 * Quantities outside every correlation are no members, and the first member keeps its own uniform, so what is drawn for
 * them does not depend on the correlations. A member whose law is fixed still takes part: to take away one spread leaves
 * the draws of the others as they were.
 *
 * @param correlations those of one level, pairs not named are uncorrelated
 * @throws RangeError if the correlations contradict each other
 */
export function copulaOf(correlations: readonly Correlation[]): Copula {
  const named = new Set(correlations.flatMap(({ of }) => of));
  const members = QUANTITY_ORDER.filter((name) => named.has(name));
  const factor = choleskyFactor(correlationMatrix(members, correlations));
  if (factor === null) throw new RangeError(`correlations between ${members.join(', ')} contradict each other`);
  return {
    members,
    uniforms: (uniformOf) => {
      const scores = members.map((name) => normalQuantile(uniformOf(name)));
      return factor.map((row) => normalCdf(row.reduce((sum, weight, k) => sum + weight * (scores[k] ?? 0), 0)));
    },
  };
}

function correlationMatrix(members: readonly QuantityName[], correlations: readonly Correlation[]): number[][] {
  return members.map((row) =>
    members.map((column) => {
      if (row === column) return 1;
      return correlations.find(({ of }) => of.includes(row) && of.includes(column))?.rho ?? 0;
    }),
  );
}
