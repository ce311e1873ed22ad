import {
  BUS_DEAD,
  BUS_OVERLOADED,
  type BusPoint,
  type BusTerms,
  CHARGER_AT_LIMIT,
  CHARGER_AT_POWER,
  CHARGER_HOLDS,
  chargerCurrentA,
  loadCurrentA,
} from '../bank/bus.js';
import type { BankEventKind } from '../bank/events.js';
import type { ChargerSettings, LoadSettings } from '../study/study.js';

/** Conditions at the bus, watched like those of a BMS: they hold while their value is at least 0. */
export const REGIME = 0;
const LOAD_SWITCH = 1;
export const TAIL = 2;
const ABSORPTION = 3;
export const RESTART = 4;
export const TERMINAL_KINDS = 5;

/** Share of the absorption voltage from which the bus counts as at absorption. */
const AT_ABSORPTION = 0.995;
const NEVER = -1;

/** Charger and load of a bank: settings, and where their own control stands. */
export interface Terminal {
  charger: ChargerSettings;
  load: LoadSettings;
  /** Demand and charging power of the present segment, factors of the bank included. */
  demandW: number;
  demandA: number;
  chargeW: number;
  loadConnected: boolean;
  /** The charger works towards absorption; otherwise it has ended and floats or is off. */
  charging: boolean;
}

export function createTerminal(charger: ChargerSettings, load: LoadSettings): Terminal {
  return { charger, load, demandW: 0, demandA: 0, chargeW: 0, loadConnected: true, charging: true };
}

/** Puts what stands at the bus now into the terms of the solver. */
export function updateTerms(terminal: Terminal, terms: BusTerms): void {
  terms.loadW = terminal.loadConnected ? terminal.demandW : 0;
  terms.loadA = terminal.loadConnected ? terminal.demandA : 0;
  terms.chargeW = terminal.chargeW;
  terms.limitA = terminal.charger.limitA;
  terms.ceilingV = terminal.charging ? terminal.charger.absorptionV : terminal.charger.floatV;
}

/** Value of a condition at the bus, in V or A beyond its threshold. */
export function terminalValue(
  terminal: Terminal,
  terms: BusTerms,
  bus: BusPoint,
  kind: number,
  bankA: number,
  bankV: number,
): number {
  const { charger, load } = terminal;
  switch (kind) {
    case REGIME:
      return regimeValue(terms, bus, bankA, bankV);
    case LOAD_SWITCH:
      if (load.disconnectV === null) return NEVER;
      if (terminal.loadConnected) return load.disconnectV - bankV;
      // A bus that nothing feeds floats at any voltage.
      return bus.fed ? bankV - load.reconnectV : NEVER;
    case TAIL:
      if (!terminal.charging || terminal.chargeW === 0 || charger.tailA === 0) return NEVER;
      return Math.min(bankV - AT_ABSORPTION * charger.absorptionV, charger.tailA - bankA);
    case ABSORPTION:
      if (!terminal.charging || terminal.chargeW === 0 || charger.absorptionS === null) return NEVER;
      return bankV - AT_ABSORPTION * charger.absorptionV;
    default:
      return terminal.charging || terminal.chargeW === 0 ? NEVER : charger.restartV - bankV;
  }
}

/** How far the regime of the bus is from having to change. */
function regimeValue(terms: BusTerms, bus: BusPoint, bankA: number, bankV: number): number {
  const offersCharge = terms.ceilingV !== null && terms.chargeW > 0;
  switch (bus.regime) {
    case CHARGER_HOLDS: {
      const neededA = bankA + loadCurrentA(terms, bankV);
      return Math.max(neededA - chargerCurrentA(terms, bankV), -neededA);
    }
    case CHARGER_AT_POWER:
      return Math.max(bankV - (terms.ceilingV ?? 0), terms.chargeW / bankV - terms.limitA);
    case CHARGER_AT_LIMIT:
      return Math.max(bankV - (terms.ceilingV ?? 0), terms.limitA - terms.chargeW / bankV);
    // A dead bus waits for a path to close; an overloaded one is tried by the watch.
    case BUS_DEAD:
    case BUS_OVERLOADED:
      return NEVER;
    default:
      return offersCharge ? (terms.ceilingV ?? 0) - bankV : NEVER;
  }
}

/** Time for which a condition at the bus must hold without a break, s. */
export function terminalDelayS(terminal: Terminal, kind: number): number {
  switch (kind) {
    case LOAD_SWITCH:
      return terminal.load.disconnectDelayS;
    case TAIL:
      return terminal.charger.tailHoldS;
    case ABSORPTION:
      return terminal.charger.absorptionS ?? Number.POSITIVE_INFINITY;
    default:
      return 0;
  }
}

/** Does what a condition at the bus leads to once it has held for its time. @returns what happened */
export function actOnTerminal(terminal: Terminal, kind: number): BankEventKind[] {
  switch (kind) {
    case LOAD_SWITCH:
      terminal.loadConnected = !terminal.loadConnected;
      return [terminal.loadConnected ? 'load-reconnect' : 'load-disconnect'];
    case TAIL:
    case ABSORPTION:
      if (!terminal.charging) return [];
      terminal.charging = false;
      return ['charge-ended'];
    case RESTART:
      terminal.charging = true;
      return ['charge-restart'];
    default:
      return [];
  }
}
