/**
 * Node voltages of a network of conductances for given currents into its nodes, by eliminating node after node as star
 * to mesh:
 *
 *   p_k = s_k + sum_j a_kj;   a_ij += a_ik a_kj / p_k;   s_i += a_ik s_k / p_k
 *
 * with a_ij the conductance between two nodes and s_i that to ground. No step subtracts, so conductances keep nearly full
 * relative precision even where 1000 S and 1 µS meet at one node. What flows in at one node and out at another leaves
 * only a small voltage of both together behind, so their difference keeps its digits too; it would lose them as the
 * difference of entries of the inverse where both nodes hang on a shunt.
 *
 * @param between conductances between nodes, row by row, symmetric, diagonal ignored, none negative; overwritten
 * @param toGround conductance of each node to ground, none negative; overwritten
 * @param currentA currents into the nodes, one case after the other; overwritten with the node voltages
 * @throws RangeError if a node has no path to ground
 * @see Grassmann, Taksar & Heyman 1985, Operations Research 33(5), 1107-1116 (elimination without subtraction);
 *   Alfa, Xue & Ye 2002, Math. Comp. 71, 217-236 (its precision for diagonally dominant M-matrices)
 */
export function solveConductances(between: Float64Array, toGround: Float64Array, currentA: Float64Array): void {
  const n = toGround.length;
  const pivots = new Float64Array(n);
  for (let k = 0; k < n; k++) {
    let pivot = toGround[k];
    for (let j = k + 1; j < n; j++) pivot += between[k * n + j];
    if (!(pivot > 0)) throw new RangeError(`node ${k + 1} must have a path to ground`);
    pivots[k] = pivot;
    for (let i = k + 1; i < n; i++) {
      const share = between[i * n + k] / pivot;
      if (share === 0) continue;
      toGround[i] += share * toGround[k];
      for (let j = k + 1; j < n; j++) if (j !== i) between[i * n + j] += share * between[k * n + j];
    }
  }
  for (let start = 0; start < currentA.length; start += n) {
    const x = currentA.subarray(start, start + n);
    for (let k = 0; k < n; k++) {
      if (x[k] === 0) continue;
      for (let i = k + 1; i < n; i++) x[i] += (between[i * n + k] / pivots[k]) * x[k];
    }
    for (let k = n - 1; k >= 0; k--) {
      let sum = x[k];
      for (let j = k + 1; j < n; j++) sum += between[k * n + j] * x[j];
      x[k] = sum / pivots[k];
    }
  }
}
