import type { ChargerSettings, DutySegment } from '../../src/study/study.js';
import { agreeingCurrents, type Device, deviceCurrentA, devicesOf, intoModulesA } from './equaliser.js';
import { type Branch, LEAK_S, type NetworkShape } from './network.js';
import type { Packs } from './packs.js';
import type { ReferenceBank } from './reference-bank.js';
import { type BankSwitches, chargeOpen, dischargeOpen, type PackSwitches } from './switches.js';
import {
  canDischarge,
  type Demand,
  restTerminal,
  type Status,
  type Supply,
  solveTerminal,
  type Terminal,
} from './terminal.js';
import { wiringOf } from './wiring.js';

/** Currents and voltages of one instant; they follow from the states and switches without memory. */
export interface View {
  busV: number;
  bankA: number;
  status: Status;
  /** A charger or a bank that could discharge keeps the bus at its voltage. Judged while the load is disconnected. */
  fed: boolean;
  /** In overload: the load could be served again with 2 % to spare. */
  recoverable: boolean;
  readonly packs: readonly PackView[];
}

export interface PackView {
  /** Through the pack itself: beside that of its leads, what equalisers drive into its posts. */
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
  readonly #devices: readonly Device[];
  /** Where the devices stood at the evaluation before: a start for the next. */
  #deviceA: number[];
  #intoA: number[];

  constructor(
    readonly bank: ReferenceBank,
    public layout: Packs,
    readonly packSwitches: readonly PackSwitches[],
    readonly bankSwitches: BankSwitches,
    nodeLeakS: number,
  ) {
    const { candidate } = bank;
    const { nodes, ties, places } = wiringOf(bank);
    this.#shape = { nodes, positions: layout.positions, ties, nodeLeakS };
    this.#branches = layout.packs.map((pack, k) => ({
      ...places[k],
      emfV: 0,
      resistanceOhm: pack.resistanceOhm,
      conduction: 'both',
    }));
    this.#devices = candidate.equaliser === undefined ? [] : devicesOf(bank.modules.length, layout.positions);
    this.#deviceA = this.#devices.map(() => 0);
    this.#intoA = layout.packs.map(() => 0);
    this.view = {
      busV: 0,
      bankA: 0,
      status: 'served',
      fed: true,
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

  /** Takes the same packs at another temperature or age. */
  takeLayout(layout: Packs): void {
    this.layout = layout;
    layout.packs.forEach((pack, k) => {
      this.#branches[k].resistanceOhm = pack.resistanceOhm;
    });
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
    const terminal = this.#balanced(() =>
      bankSwitches.overloaded
        ? restTerminal(this.#shape, branches)
        : solveTerminal(this.#shape, branches, supply, demand),
    );
    view.recoverable = bankSwitches.overloaded && this.#servesWithMargin(supply, demand);
    if (terminal.status === 'overload' && !bankSwitches.overloaded) this.overloadSeen = true;
    view.busV = terminal.busV;
    view.status = terminal.status;
    view.fed = bankSwitches.loadConnected || supply !== null || canDischarge(this.#shape, branches);
    view.bankA = terminal.piece.bankAt0A + terminal.piece.bankSlopeS * terminal.busV;
    layout.packs.forEach((pack, k) => {
      const packView = view.packs[k];
      const leadA = leadCurrentA(terminal, k);
      const currentA = leadA + this.#intoA[k];
      packView.currentA = currentA;
      const branch = branches[k];
      const pathOhm = terminal.piece.conducting[k] ? branch.resistanceOhm : 1 / LEAK_S;
      packView.terminalV = branch.emfV + pathOhm * leadA;
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

  /**
   * The terminal at which equalisers and voltages agree. A current s into the posts of a module of resistance R is to the
   * rest of the network an EMF of R s: the leads carry (V - E - R s) / R.
   */
  #balanced(solve: () => Terminal): Terminal {
    const branches = this.#branches;
    const settings = this.bank.candidate.equaliser;
    if (settings === undefined) return solve();
    // Standby is drawn while a device waits for its voltage too.
    const enabled = this.bankSwitches.equalising;
    const works = this.#devices.map(
      ({ lower, upper }) => branches[lower].conduction === 'both' && branches[upper].conduction === 'both',
    );
    const emfV = branches.map((branch) => branch.emfV);
    let terminal: Terminal | null = null;
    const mismatch = (amps: readonly number[]): number[] => {
      const taken = amps.map((each, k) => (works[k] ? each : null));
      this.#intoA = intoModulesA(settings, this.#devices, taken, branches.length);
      branches.forEach((branch, m) => {
        branch.emfV = emfV[m] + branch.resistanceOhm * this.#intoA[m];
      });
      const found = solve();
      terminal = found;
      const postsV = (m: number): number => branches[m].emfV + branches[m].resistanceOhm * leadCurrentA(found, m);
      return this.#devices.map(({ lower, upper }, k) =>
        enabled && works[k] ? amps[k] - deviceCurrentA(settings, postsV(upper) - postsV(lower)) : amps[k],
      );
    };
    this.#deviceA = agreeingCurrents(
      this.#deviceA.map((amps, k) => (enabled && works[k] ? amps : 0)),
      mismatch,
    );
    if (terminal === null) throw new Error('agreement without an evaluation');
    return terminal;
  }

  #servesWithMargin(supply: Supply | null, demand: Demand): boolean {
    const more = { powerW: 1.02 * demand.powerW, currentA: 1.02 * demand.currentA };
    return solveTerminal(this.#shape, this.#branches, supply, more).status === 'served';
  }
}

function leadCurrentA({ piece, busV }: Terminal, k: number): number {
  return piece.branchAt0A[k] + piece.branchSlopeS[k] * busV;
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
