/** What a branch lets through: both ways, one way only, or nothing but the leak. */
export type Conduction = 'both' | 'charge-only' | 'discharge-only' | 'none';

/** A module with the leads in series with it, as the network sees it at one instant; it runs from minus to plus. */
export interface Branch {
  readonly from: number;
  readonly to: number;
  /** EMF including a forward drop, V. */
  emfV: number;
  resistanceOhm: number;
  leadOhm: number;
  conduction: Conduction;
}

export interface NetworkShape {
  /** Bus minus is node 0, bus plus node 1. */
  readonly nodes: number;
  /** Modules in series between them. */
  readonly positions: number;
  /** Resistors that tie nodes: links, rails. */
  readonly ties: readonly Tie[];
  /** From every node and from the bus to bus minus. */
  readonly nodeLeakS: number;
}

export interface Tie {
  readonly from: number;
  readonly to: number;
  readonly ohm: number;
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
 * Bus minus is 0 V and the bus is given. Branch k carries I_k = g_k (V_to - V_from - E_k), positive into its positive
 * post; a branch that does not conduct leaks 1 uS instead. Every node and the bus leak `nodeLeakS` to bus minus.
 */
function pieceOf(shape: NetworkShape, branches: readonly Branch[], conducting: readonly boolean[]): Piece {
  const { nodes, ties, nodeLeakS } = shape;
  const size = nodes - 2;
  // Row: matrix, then the right-hand side at bus voltage 0, then its slope with the bus voltage.
  const rows = Array.from({ length: size }, () => new Array<number>(size + 2).fill(0));
  const conductanceS = branches.map((b, k) => 1 / (b.leadOhm + (conducting[k] ? b.resistanceOhm : 1 / LEAK_S)));

  /** The current that leaves `node` towards `other` is g (V_node - V_other) - sourceA. */
  const stamp = (node: number, other: number, g: number, sourceA: number): void => {
    if (node < 2) return;
    const row = rows[node - 2];
    row[node - 2] += g;
    row[size] += sourceA;
    if (other === 1) row[size + 1] += g;
    else if (other > 1) row[other - 2] -= g;
  };
  branches.forEach(({ from, to, emfV }, k) => {
    stamp(to, from, conductanceS[k], conductanceS[k] * emfV);
    stamp(from, to, conductanceS[k], -conductanceS[k] * emfV);
  });
  for (const { from, to, ohm } of ties) {
    stamp(from, to, 1 / ohm, 0);
    stamp(to, from, 1 / ohm, 0);
  }
  for (let n = 0; n < size; n++) rows[n][n] += nodeLeakS;
  eliminate(rows);

  const at0V = (node: number): number => (node < 2 ? 0 : rows[node - 2][size]);
  const slopeOf = (node: number): number => (node < 2 ? node : rows[node - 2][size + 1]);
  let bankAt0A = 0;
  let bankSlopeS = nodeLeakS;
  const intoBank = ({ from, to }: { from: number; to: number }, at0A: number, slopeS: number): void => {
    const sign = (to === 1 ? 1 : 0) - (from === 1 ? 1 : 0);
    bankAt0A += sign * at0A;
    bankSlopeS += sign * slopeS;
  };
  const branchAt0A: number[] = [];
  const branchSlopeS: number[] = [];
  branches.forEach((branch, k) => {
    branchAt0A.push(conductanceS[k] * (at0V(branch.to) - at0V(branch.from) - branch.emfV));
    branchSlopeS.push(conductanceS[k] * (slopeOf(branch.to) - slopeOf(branch.from)));
    intoBank(branch, branchAt0A[k], branchSlopeS[k]);
  });
  for (const tie of ties) {
    intoBank(tie, (at0V(tie.to) - at0V(tie.from)) / tie.ohm, (slopeOf(tie.to) - slopeOf(tie.from)) / tie.ohm);
  }
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

/** Gauss-Jordan elimination with partial pivoting, in place; the columns beyond the square become the solutions. */
export function eliminate(rows: number[][]): void {
  const size = rows.length;
  const width = rows[0]?.length ?? 0;
  for (let column = 0; column < size; column++) {
    let pivot = column;
    for (let r = column + 1; r < size; r++) if (Math.abs(rows[r][column]) > Math.abs(rows[pivot][column])) pivot = r;
    [rows[column], rows[pivot]] = [rows[pivot], rows[column]];
    const pivotRow = rows[column];
    const scale = 1 / pivotRow[column];
    for (let c = column; c < width; c++) pivotRow[c] *= scale;
    for (let r = 0; r < size; r++) {
      const factor = rows[r][column];
      if (r === column || factor === 0) continue;
      for (let c = column; c < width; c++) rows[r][c] -= factor * pivotRow[c];
    }
  }
}
