import { type Branch, lowestVoltageOf, type NetworkShape, type Piece, pieceAt } from './network.js';

/** What the charger may give: at most `limitA` and `powerW` (infinite = no bound), and nothing above `ceilingV`. */
export interface Supply {
  readonly limitA: number;
  readonly powerW: number;
  readonly ceilingV: number;
}

/** What the load draws: constant power beside constant current, both 0 or more. */
export interface Demand {
  readonly powerW: number;
  readonly currentA: number;
}

/**
 * `served`: a bus voltage exists at which charger, load and bank agree. `collapsed`: none exists and the bank cannot
 * discharge, the bus is at 0 V. `overload`: none exists although the bank conducts; the bank is taken to rest.
 */
export type Status = 'served' | 'collapsed' | 'overload';

export interface Terminal {
  readonly status: Status;
  readonly busV: number;
  readonly piece: Piece;
}

/** Current into a short circuit below which a bank counts as unable to discharge: far above the leaks. */
const NO_DISCHARGE_A = 0.01;
/** Step past a kink of the characteristic, to land in the next piece; a root this close to a kink lies on it. */
const PAST_KINK_V = 1e-8;

/**
 * Finds the bus voltage: the upper root of I_bank(V) = charger(V) - load(V).
 *
 * I_bank(V) rises piecewise straight, so on each piece the root is that of a quadratic; pieces are walked from a
 * voltage at which the bank takes more than it is given downwards, hence the first root met is the upper one.
 */
export function solveTerminal(
  shape: NetworkShape,
  branches: readonly Branch[],
  supply: Supply | null,
  demand: Demand,
): Terminal {
  const drawnA = -demand.currentA;
  const drawnW = -demand.powerW;
  const topV = shape.positions * branches.reduce((most, b) => Math.max(most, b.emfV), 0) + 1;
  let found: Terminal | null = null;
  if (supply === null) {
    found = upperRoot(shape, branches, topV, 0, drawnA, drawnW);
  } else {
    const { ceilingV, limitA, powerW } = supply;
    const piece = pieceAt(shape, branches, ceilingV, blockedStart(branches));
    const bankA = piece.bankAt0A + piece.bankSlopeS * ceilingV;
    const withoutA = drawnA + drawnW / ceilingV;
    if (bankA < withoutA) {
      found = upperRoot(shape, branches, Math.max(topV, ceilingV + 1), ceilingV, drawnA, drawnW);
    } else if (bankA <= withoutA + Math.min(limitA, powerW / ceilingV)) {
      found = { status: 'served', busV: ceilingV, piece };
    } else {
      const kinkV = Math.min(ceilingV, powerW / limitA);
      found =
        upperRoot(shape, branches, ceilingV, kinkV, drawnA, drawnW + (kinkV < ceilingV ? powerW : 0)) ??
        upperRoot(shape, branches, kinkV, 0, drawnA + limitA, drawnW);
    }
  }
  return found ?? restTerminal(shape, branches);
}

/** The bank when the load cannot be served: it rests at no current, or its bus is held at 0 V if it cannot discharge. */
export function restTerminal(shape: NetworkShape, branches: readonly Branch[]): Terminal {
  if (!canDischarge(shape, branches)) {
    return { status: 'collapsed', busV: 0, piece: pieceAt(shape, branches, 0, blockedStart(branches)) };
  }
  const topV = shape.positions * branches.reduce((most, b) => Math.max(most, b.emfV), 0) + 1;
  const found = upperRoot(shape, branches, topV, 0, 0, 0);
  if (found === null) throw new Error('the resting bank has no bus voltage');
  return { ...found, status: 'overload' };
}

/** More than the leaks would flow into a short circuit. */
export function canDischarge(shape: NetworkShape, branches: readonly Branch[]): boolean {
  return pieceAt(shape, branches, 0, blockedStart(branches)).bankAt0A < -NO_DISCHARGE_A;
}

/** Largest V in [downToV, fromV] with I_bank(V) = constantA + powerW / V, given that the bank takes more at `fromV`. */
function upperRoot(
  shape: NetworkShape,
  branches: readonly Branch[],
  fromV: number,
  downToV: number,
  constantA: number,
  powerW: number,
): Terminal | null {
  let highV = fromV;
  let atV = fromV;
  while (highV > downToV) {
    const piece = pieceAt(shape, branches, atV, blockedStart(branches));
    const lowV = Math.max(downToV, lowestVoltageOf(piece, branches, atV));
    // slope V^2 + b V - powerW = 0
    const b = piece.bankAt0A - constantA;
    const discriminant = b * b + 4 * piece.bankSlopeS * powerW;
    const root = (Math.sqrt(discriminant) - b) / (2 * piece.bankSlopeS);
    if (discriminant >= 0 && root <= highV + PAST_KINK_V && root >= lowV && root > 0) {
      return { status: 'served', busV: root, piece };
    }
    atV = Math.min(highV, lowV) - PAST_KINK_V;
    highV = Math.min(highV, lowV);
    if (atV <= downToV) break;
  }
  return null;
}

function blockedStart(branches: readonly Branch[]): boolean[] {
  return branches.map(() => false);
}
