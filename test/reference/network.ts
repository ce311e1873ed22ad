/** What a branch lets through: both ways, one way only, or nothing but the leak. */
export type Conduction = 'both' | 'charge-only' | 'discharge-only' | 'none';

/** A module with the leads in series with it, as the network sees it at one instant. */
export interface Branch {
  /** EMF including a forward drop, V. */
  emfV: number;
  resistanceOhm: number;
  leadOhm: number;
  conduction: Conduction;
}

export interface NetworkShape {
  readonly strings: number;
  readonly positions: number;
  /** Between neighbouring strings at equal positions below the top; null = not tied. */
  readonly linkOhm: number | null;
  /** From every node and from the bus to bus minus. */
  readonly nodeLeakS: number;
}

/** Currents as affine functions of the bus voltage while the same branches conduct: I = at0 + slope V. */
export interface Piece {
  readonly conducting: readonly boolean[];
  readonly branchAt0A: readonly number[];
  readonly branchSlopeS: readonly number[];
  readonly bankAt0A: number;
  readonly bankSlopeS: number;
}

/** What a blocked branch still lets through, S. */
export const LEAK_S = 1e-6;
/** Rounding allowed before a branch counts as in conflict: A if it conducts, V if it blocks. */
const SLACK = 1e-9;

/**
 * Solves the network for one pattern of conducting branches by nodal analysis.
 *
 * Nodes are the positive posts below the top of every string; bus minus is 0 V and the bus is given. Branch k, string
 * by string from the negative end, carries I_k = g_k (V_above - V_below - E_k), positive into its positive post;
 * a branch that does not conduct leaks 1 uS instead. Every node and the bus leak `nodeLeakS` to bus minus.
 */
function pieceOf(shape: NetworkShape, branches: readonly Branch[], conducting: readonly boolean[]): Piece {
  const { strings, positions, linkOhm, nodeLeakS } = shape;
  const perString = positions - 1;
  const size = strings * perString;
  // Row: matrix, then the right-hand side at bus voltage 0, then its slope with the bus voltage.
  const rows = Array.from({ length: size }, () => new Array<number>(size + 2).fill(0));
  const conductanceS = branches.map((b, k) => 1 / (b.leadOhm + (conducting[k] ? b.resistanceOhm : 1 / LEAK_S)));

  branches.forEach((branch, k) => {
    const g = conductanceS[k];
    const position = k % positions;
    const above = Math.floor(k / positions) * perString + position;
    if (position < perString) {
      rows[above][above] += g + nodeLeakS;
      rows[above][size] += g * branch.emfV;
      if (position > 0) rows[above][above - 1] -= g;
    }
    if (position > 0) {
      const below = above - 1;
      rows[below][below] += g;
      rows[below][size] -= g * branch.emfV;
      if (position < perString) rows[below][above] -= g;
      else rows[below][size + 1] += g;
    }
  });
  if (linkOhm !== null) {
    for (let node = 0; node + perString < size; node++) {
      const neighbour = node + perString;
      rows[node][node] += 1 / linkOhm;
      rows[neighbour][neighbour] += 1 / linkOhm;
      rows[node][neighbour] -= 1 / linkOhm;
      rows[neighbour][node] -= 1 / linkOhm;
    }
  }
  eliminate(rows);

  const branchAt0A: number[] = [];
  const branchSlopeS: number[] = [];
  let bankAt0A = 0;
  let bankSlopeS = nodeLeakS;
  branches.forEach((branch, k) => {
    const position = k % positions;
    const above = Math.floor(k / positions) * perString + position;
    const top = position === perString;
    const at0 = (top ? 0 : rows[above][size]) - (position === 0 ? 0 : rows[above - 1][size]) - branch.emfV;
    const slope = (top ? 1 : rows[above][size + 1]) - (position === 0 ? 0 : rows[above - 1][size + 1]);
    branchAt0A.push(conductanceS[k] * at0);
    branchSlopeS.push(conductanceS[k] * slope);
    if (top) {
      bankAt0A += branchAt0A[k];
      bankSlopeS += branchSlopeS[k];
    }
  });
  return { conducting, branchAt0A, branchSlopeS, bankAt0A, bankSlopeS };
}

/**
 * The piece that holds at a bus voltage: every one-way branch either conducts the permitted way or blocks against a
 * voltage that would drive the refused way. Flips the first branch in conflict until none is left; that ends, because
 * the conductance matrix is a P-matrix (K. G. Murty, Linear Algebra Appl. 7 (1974) 63).
 */
export function pieceAt(shape: NetworkShape, branches: readonly Branch[], busV: number, start: boolean[]): Piece {
  const conducting = branches.map((b, k) => b.conduction === 'both' || (b.conduction !== 'none' && start[k]));
  const limit = 4 * 2 ** branches.length;
  for (let flips = 0; flips <= limit; flips++) {
    const piece = pieceOf(shape, branches, [...conducting]);
    const wrong = branches.findIndex((branch, k) => {
      const sign = permittedSign(branch.conduction);
      const currentA = piece.branchAt0A[k] + piece.branchSlopeS[k] * busV;
      // The current of a blocked branch times a megohm is the voltage that presses on it.
      return conducting[k] ? sign * currentA < -SLACK : sign * currentA > SLACK * LEAK_S;
    });
    if (wrong < 0) return piece;
    conducting[wrong] = !conducting[wrong];
  }
  throw new Error(`no pattern of conducting branches fits at ${busV} V`);
}

/** Lowest bus voltage down to which a piece holds, from a voltage at which it does. */
export function lowestVoltageOf(piece: Piece, branches: readonly Branch[], busV: number): number {
  let lowestV = Number.NEGATIVE_INFINITY;
  branches.forEach((branch, k) => {
    const sign = permittedSign(branch.conduction) * (piece.conducting[k] ? 1 : -1);
    const slopeS = sign * piece.branchSlopeS[k];
    if (slopeS > 0) lowestV = Math.max(lowestV, Math.min(busV, -piece.branchAt0A[k] / piece.branchSlopeS[k]));
  });
  return lowestV;
}

function permittedSign(conduction: Conduction): number {
  if (conduction === 'charge-only') return 1;
  return conduction === 'discharge-only' ? -1 : 0;
}

/** Gauss-Jordan elimination with partial pivoting, in place; the last two columns become the solutions. */
function eliminate(rows: number[][]): void {
  const size = rows.length;
  for (let column = 0; column < size; column++) {
    let pivot = column;
    for (let r = column + 1; r < size; r++) if (Math.abs(rows[r][column]) > Math.abs(rows[pivot][column])) pivot = r;
    [rows[column], rows[pivot]] = [rows[pivot], rows[column]];
    const pivotRow = rows[column];
    const scale = 1 / pivotRow[column];
    for (let c = column; c < size + 2; c++) pivotRow[c] *= scale;
    for (let r = 0; r < size; r++) {
      const factor = rows[r][column];
      if (r === column || factor === 0) continue;
      for (let c = column; c < size + 2; c++) rows[r][c] -= factor * pivotRow[c];
    }
  }
}
