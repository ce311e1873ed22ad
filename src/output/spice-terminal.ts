import type { BankCircuit, DemandChange } from '../bank/circuit.js';
import { LEAK_S, latch } from './spice-modules.js';
import { spiceNumber as n, spiceStatement } from './spice-text.js';

/** Resistance of the charger as it holds a voltage, ohm. */
const CHARGER_OHM = 1e-5;
/**
 * What keeps the bus defined while nothing feeds it: a conductance per string, as much as a blocked path leaks, so that the
 * bus then falls to half of the bank's voltage and no load is connected again; and a capacitor.
 */
const BUS_S = LEAK_S;
const BUS_F = 0.01;
/** Time in which demand goes from one value to the next, and in which a cycle restarts the charger, s. */
export const CHANGE_S = 0.01;
/** Bus voltage per cell in series below which a load gives way, V: no bank carries a constant power there. */
const GIVES_WAY_V = 1;
/** Share of the absorption voltage from which the bus counts as at absorption: as the engine has it. */
const AT_ABSORPTION = 0.995;
/** Power from which the charger is offered any, W. */
const LEAST_W = 0.001;

/** What stands at the bus: demand by the clock, the load with its disconnect, the charger with its control. */
export function terminalLines(circuit: BankCircuit): readonly string[] {
  return [
    '* bus, with the current into the bank as a node',
    'Vbank bus bank 0',
    'Hbank bank_i 0 Vbank 1',
    `Rbus bus 0 ${n(1 / (BUS_S * circuit.bank.strings))}`,
    `Cbus bus 0 ${n(BUS_F)} ic=${n(circuit.busV)}`,
    ...demandLines(circuit),
    ...loadLines(circuit),
    ...chargerLines(circuit),
  ];
}

function demandLines(circuit: BankCircuit): readonly string[] {
  const { charger } = circuit;
  // As much as the limit can take at any voltage stands for as much as it likes.
  const mostW = 1.2 * charger.limitA * charger.absorptionV;
  return [
    '* demand: load in W and in A, charging power on offer in W',
    course(circuit, 'load_w', ({ loadW }) => loadW),
    course(circuit, 'load_a', ({ loadA }) => loadA),
    course(circuit, 'charge_w', ({ chargeW }) => Math.min(chargeW, mostW)),
  ];
}

/** A demand as a source by the clock, 1 V for 1 W or 1 A. */
function course({ demand, startS }: BankCircuit, name: string, of: (change: DemandChange) => number): string {
  const points: string[] = [];
  let value = Number.NaN;
  for (const change of demand) {
    const next = of(change);
    const atS = change.atS - startS;
    if (next === value) continue;
    if (points.length === 0) points.push(`0 ${n(next)}`);
    else points.push(`${n(atS)} ${n(value)}`, `${n(atS + CHANGE_S)} ${n(next)}`);
    value = next;
  }
  if (points.length < 2) return `V${name} ${name} 0 ${n(Number.isNaN(value) ? 0 : value)}`;
  return spiceStatement(`V${name} ${name} 0 PWL(${points.join(' ')})`);
}

function loadLines({ load, loadConnected, bank }: BankCircuit): readonly string[] {
  const leastV = GIVES_WAY_V * bank.cellStart[bank.positions];
  const draws = `(v(load_a) + v(load_w)/max(v(bus), ${n(leastV)}))*max(0, min(1, v(bus)/${n(leastV)}))`;
  const disconnect =
    load.disconnectV === null
      ? ['Vload_off load_off 0 0']
      : latch('load_off', !loadConnected, {
          set: `${n(load.disconnectV)} - v(bus)`,
          clear: `v(bus) - ${n(load.reconnectV)}`,
        });
  return [
    '* load, and whether the low-voltage disconnect is open',
    ...disconnect,
    'Vload bus load 0',
    'Hload load_i 0 Vload 1',
    spiceStatement(`Bload load 0 I = (1 - v(load_off))*${draws}`),
  ];
}

function chargerLines(circuit: BankCircuit): readonly string[] {
  const { charger, charging, cycleStartS, startS } = circuit;
  const eachCycle = charger.restart === 'each-cycle';
  const restarts = eachCycle ? cycleStartS.slice(1).map((atS) => atS - startS) : [];
  const tail = `min(v(bus) - ${n(AT_ABSORPTION * charger.absorptionV)}, ${n(charger.tailA)} - v(bank_i))`;
  const offered = `v(charge_w) - ${LEAST_W}`;
  const ends = charger.tailA > 0 ? `min(min(${tail}, ${offered}), 0.5 - v(cycle))` : '-1';
  const ceiling = `${n(charger.floatV ?? 0)} + ${n(charger.absorptionV - (charger.floatV ?? 0))}*(1 - v(ended))`;
  const most = `min(${n(charger.limitA)}, v(charge_w)/max(v(bus), 1))`;
  return [
    '* charger: ended is 1 from the tail on until it works towards absorption again',
    spiceStatement(`Vcycle cycle 0 ${pulses(restarts)}`),
    ...latch('ended', !charging && !eachCycle, {
      set: ends,
      clear: `max(min(${n(charger.restartV)} - v(bus), ${offered}), v(cycle) - 0.5)`,
    }),
    `Bceiling ceiling 0 V = ${ceiling}`,
    'Vcharger charger bus 0',
    'Hcharger charger_i 0 Vcharger 1',
    spiceStatement(`Bcharger 0 charger I = max(0, min(${most}, (v(ceiling) - v(charger))/${n(CHARGER_OHM)}))`),
  ];
}

/** 1 V for a moment at each instant, 0 otherwise. */
function pulses(atS: readonly number[]): string {
  if (atS.length === 0) return '0';
  const points = atS.flatMap((s) => [
    `${n(s)} 0 ${n(s + CHANGE_S)} 1`,
    `${n(s + 2 * CHANGE_S)} 1 ${n(s + 3 * CHANGE_S)} 0`,
  ]);
  return `PWL(0 0 ${points.join(' ')})`;
}
