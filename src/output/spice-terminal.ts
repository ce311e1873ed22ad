import type { BankCircuit, DemandChange } from '../bank/circuit.js';
import { slowLatch } from './spice-latch.js';
import { LEAK_S } from './spice-modules.js';
import { spiceNumber as n, spiceStatement } from './spice-text.js';

/** Resistance of the charger as it holds a voltage, ohm. */
const CHARGER_OHM = 1e-5;
/**
 * What keeps the bus defined while nothing feeds it: a conductance per string, as much as a blocked path leaks, so that the
 * bus then falls to half of the bank's voltage and no load is connected again; and a capacitor.
 */
const BUS_S = LEAK_S;
const BUS_F = 0.01;
/** Time before and after an end of charge in the trace within which that of the circuit decides, s. */
export const CHARGER_DECIDES_S = 20;
/** Time in which demand goes from one value to the next, s. */
const CHANGE_S = 0.2;
/** Time for which the beginning of a cycle pushes the charger towards absorption: its latch takes less, s. */
const RESTART_S = 0.5;
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
    ...demand(circuit, 'load_w', ({ loadW }) => loadW),
    ...demand(circuit, 'load_a', ({ loadA }) => loadA),
    ...demand(circuit, 'charge_w', ({ chargeW }) => Math.min(chargeW, mostW)),
  ];
}

/**
 * A demand as a source by the clock, 1 V for 1 W or 1 A. About the end of charge that the next demand waited for in the
 * trace, the charger of the circuit decides which of the two holds.
 */
function demand(circuit: BankCircuit, name: string, of: (change: DemandChange) => number): readonly string[] {
  const clock: Point[] = [];
  const early: Point[] = [];
  let value = Number.NaN;
  for (const [index, change] of circuit.demand.entries()) {
    const next = of(change);
    const atS = change.atS - circuit.startS;
    if (index > 0 && next !== value) {
      const lateS = change.afterCharge ? CHARGER_DECIDES_S : 0;
      clock.push({ atS: atS + lateS, value: next });
      if (lateS > 0) early.push({ atS: Math.max(0, atS - lateS), value: next - value }, { atS: atS + lateS, value: 0 });
    }
    value = next;
  }
  const first = circuit.demand.length > 0 ? of(circuit.demand[0]) : 0;
  if (early.length === 0) return [course(name, first, clock)];
  return [
    course(`${name}_clock`, first, clock),
    course(`${name}_early`, 0, early),
    `B${name} ${name} 0 V = v(${name}_clock) + max(0, min(1, 4*v(ended) - 1.5))*v(${name}_early)`,
  ];
}

interface Point {
  readonly atS: number;
  /** From then on. */
  readonly value: number;
}

/** A source that goes from one value to the next by the clock. */
function course(name: string, first: number, changes: readonly Point[]): string {
  if (changes.length === 0) return `V${name} ${name} 0 ${n(first)}`;
  let before = first;
  const points = changes.map(({ atS, value }) => {
    const pair = `${n(atS)} ${n(before)} ${n(atS + CHANGE_S)} ${n(value)}`;
    before = value;
    return pair;
  });
  return spiceStatement(`V${name} ${name} 0 PWL(0 ${n(first)} ${points.join(' ')})`);
}

function loadLines({ load, loadConnected, bank }: BankCircuit): readonly string[] {
  const leastV = GIVES_WAY_V * bank.cellStart[bank.positions];
  const draws = `(v(load_a) + v(load_w)/max(v(bus), ${n(leastV)}))*max(0, min(1, v(bus)/${n(leastV)}))`;
  const disconnect =
    load.disconnectV === null
      ? ['Vload_off load_off 0 0']
      : slowLatch('load_off', !loadConnected, {
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
  const { charger, charging } = circuit;
  const eachCycle = charger.restart === 'each-cycle';
  const tail = `min(v(bus) - ${n(AT_ABSORPTION * charger.absorptionV)}, ${n(charger.tailA)} - v(bank_i))`;
  const offered = `v(charge_w) - ${LEAST_W}`;
  const ends = charger.tailA > 0 ? `min(min(${tail}, ${offered}), 0.5 - v(cycle))` : '-1';
  const ceiling = `${n(charger.floatV ?? 0)} + ${n(charger.absorptionV - (charger.floatV ?? 0))}*(1 - v(ended))`;
  const most = `min(${n(charger.limitA)}, v(charge_w)/max(v(bus), 1))`;
  return [
    '* charger: ended is 1 from the tail on until it works towards absorption again',
    course('cycle', 0, eachCycle ? restarts(circuit) : []),
    ...slowLatch('ended', !charging && !eachCycle, {
      set: ends,
      clear: `max(min(min(${n(charger.restartV)} - v(bus), ${offered}), v(ended) - 0.9), v(cycle) - 0.5)`,
    }),
    `Bceiling ceiling 0 V = ${ceiling}`,
    'Vcharger charger bus 0',
    'Hcharger charger_i 0 Vcharger 1',
    spiceStatement(`Bcharger 0 charger I = max(0, min(${most}, (v(ceiling) - v(charger))/${n(CHARGER_OHM)}))`),
  ];
}

/** A moment of 1 V at the beginning of each cycle but the first. */
function restarts({ cycleStartS, demand, startS }: BankCircuit): readonly Point[] {
  return cycleStartS.slice(1).flatMap((beginS) => {
    const waited = demand.some(({ atS, afterCharge }) => afterCharge && atS === beginS);
    const atS = beginS - startS + (waited ? CHARGER_DECIDES_S : 0);
    return [
      { atS, value: 1 },
      { atS: atS + RESTART_S, value: 0 },
    ];
  });
}
