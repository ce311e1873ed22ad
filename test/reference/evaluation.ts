import type { ChargerSettings, DutySegment } from '../../src/study/study.js';
import { type Branch, LEAK_S, type NetworkShape } from './network.js';
import type { Packs } from './packs.js';
import type { ReferenceBank } from './reference-bank.js';
import { type BankSwitches, chargeOpen, dischargeOpen, type PackSwitches } from './switches.js';
import { type Demand, restTerminal, type Status, type Supply, solveTerminal } from './terminal.js';

/** Currents and voltages of one instant; they follow from the states and switches without memory. */
export interface View {
  busV: number;
  bankA: number;
  status: Status;
  /** In overload: the load could be served again with 2 % to spare. */
  recoverable: boolean;
  readonly packs: readonly PackView[];
}

export interface PackView {
  currentA: number;
  terminalV: number;
  /** Drawn from every cell beside the terminal current. */
  standbyA: number;
  readonly cellV: Float64Array;
  lowestV: number;
  highestV: number;
}

/** Evaluates a bank: the algebraic part of the model. */
export class Evaluation {
  readonly view: View;
  /**
   * Set when a load met for the first time cannot be served: near that limit the bus voltage falls without bound, and a
   * step whose inner stages lie beyond the limit must not be accepted even if its end does not.
   */
  overloadSeen = false;
  readonly #branches: Branch[];
  readonly #shape: NetworkShape;

  constructor(
    readonly bank: ReferenceBank,
    readonly layout: Packs,
    readonly packSwitches: readonly PackSwitches[],
    readonly bankSwitches: BankSwitches,
    nodeLeakS: number,
  ) {
    const { candidate } = bank;
    this.#shape = {
      strings: bank.modules.length,
      positions: layout.positions,
      linkOhm: candidate.wiring === 'cross-linked' ? candidate.linkOhm : null,
      nodeLeakS,
    };
    this.#branches = layout.packs.map((pack) => ({
      emfV: 0,
      resistanceOhm: pack.resistanceOhm,
      leadOhm: pack.leadOhm,
      conduction: 'both',
    }));
    this.view = {
      busV: 0,
      bankA: 0,
      status: 'served',
      recoverable: false,
      packs: layout.packs.map((pack) => ({
        currentA: 0,
        terminalV: 0,
        standbyA: 0,
        cellV: new Float64Array(pack.cells.length),
        lowestV: 0,
        highestV: 0,
      })),
    };
  }

  /** Demand of a segment on this bank while the load is connected, else none. */
  demandOf(segment: DutySegment): Demand {
    const factor = this.bankSwitches.loadConnected ? this.bank.loadFactor : 0;
    return { powerW: factor * segment.loadW, currentA: factor * segment.loadA };
  }

  /** Fills `view` from the states and the switches. */
  evaluate(states: Float64Array, segment: DutySegment): View {
    const { view, layout, bankSwitches } = this;
    const branches = this.#branches;
    layout.packs.forEach((_, k) => {
      this.#openCircuit(states, k);
    });
    const demand = this.demandOf(segment);
    const supply = supplyOf(this.bank.candidate.charger, segment, this.bank.chargeFactor, bankSwitches.chargeEnded);
    const terminal = bankSwitches.overloaded
      ? restTerminal(this.#shape, branches)
      : solveTerminal(this.#shape, branches, supply, demand);
    view.recoverable = bankSwitches.overloaded && this.#servesWithMargin(supply, demand);
    if (terminal.status === 'overload' && !bankSwitches.overloaded) this.overloadSeen = true;
    view.busV = terminal.busV;
    view.status = terminal.status;
    view.bankA = terminal.piece.bankAt0A + terminal.piece.bankSlopeS * terminal.busV;
    layout.packs.forEach((pack, k) => {
      const packView = view.packs[k];
      const currentA = terminal.piece.branchAt0A[k] + terminal.piece.branchSlopeS[k] * terminal.busV;
      packView.currentA = currentA;
      const branch = branches[k];
      const pathOhm = terminal.piece.conducting[k] ? branch.resistanceOhm : 1 / LEAK_S;
      packView.terminalV = branch.emfV + pathOhm * currentA;
      packView.lowestV = Number.POSITIVE_INFINITY;
      packView.highestV = Number.NEGATIVE_INFINITY;
      pack.cells.forEach((cell, c) => {
        const v = packView.cellV[c] + cell.resistanceOhm * currentA;
        packView.cellV[c] = v;
        packView.lowestV = Math.min(packView.lowestV, v);
        packView.highestV = Math.max(packView.highestV, v);
      });
    });
    return view;
  }

  /** Cell voltages without the drop of the terminal current, and from them the branch. */
  #openCircuit(states: Float64Array, k: number): void {
    const pack = this.layout.packs[k];
    const switches = this.packSwitches[k];
    const packView = this.view.packs[k];
    const branch = this.#branches[k];
    packView.standbyA = switches.asleep ? pack.bms.asleepA : pack.module.standbyA;
    let emfV = 0;
    pack.cells.forEach((cell, c) => {
      const drawnA = packView.standbyA + (switches.bleeding[c] ? pack.bleedA : 0);
      let v = cell.curve(states[cell.at]) + cell.hysteresisV * states[cell.at + 1] - cell.resistanceOhm * drawnA;
      for (let p = 0; p < cell.pairs.length; p++) v += states[cell.at + 2 + p];
      packView.cellV[c] = v;
      emfV += v;
    });
    const noCharge = chargeOpen(switches, pack.bms.overCurrent.opens);
    const noDischarge = dischargeOpen(switches, pack.bms.overCurrent.opens);
    const dropV = switches.reclosed ? 0 : pack.bms.forwardDropV;
    branch.emfV = emfV;
    if (noCharge && noDischarge) branch.conduction = 'none';
    else if (noCharge) {
      branch.conduction = 'discharge-only';
      branch.emfV -= dropV;
    } else if (noDischarge) {
      branch.conduction = 'charge-only';
      branch.emfV += dropV;
    } else branch.conduction = 'both';
  }

  #servesWithMargin(supply: Supply | null, demand: Demand): boolean {
    const more = { powerW: 1.02 * demand.powerW, currentA: 1.02 * demand.currentA };
    return solveTerminal(this.#shape, this.#branches, supply, more).status === 'served';
  }
}

/** The segment lets the charger work at all. */
export function chargingAvailable(charger: ChargerSettings, segment: DutySegment, factor: number): boolean {
  return charger.limitA > 0 && (segment.chargeW === null || segment.chargeW * factor > 0);
}

function supplyOf(charger: ChargerSettings, segment: DutySegment, factor: number, ended: boolean): Supply | null {
  const ceilingV = ended ? charger.floatV : charger.absorptionV;
  if (ceilingV === null || !chargingAvailable(charger, segment, factor)) return null;
  const powerW = segment.chargeW === null ? Number.POSITIVE_INFINITY : segment.chargeW * factor;
  return { limitA: charger.limitA, powerW, ceilingV };
}
