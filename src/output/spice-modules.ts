import type { Bank } from '../bank/bank.js';
import type { BankState } from '../bank/bank-state.js';
import type { BankCircuit } from '../bank/circuit.js';
import { quickLatch, slowLatch } from './spice-latch.js';
import { extremeOf, moduleName, spiceNumber as n, nodeName, spiceStatement } from './spice-text.js';

/** Resistance that a BMS path without any gets: a switch has to have some, ohm. */
export const LEAST_PATH_OHM = 1e-5;
/** Conductance that a blocked path keeps, S, and how far from 0 V its rectifier is rounded off, V. */
export const LEAK_S = 1e-6;
const ROUNDED_V = 1e-5;
/** Current from which a BMS takes a module to be charging or discharging, A: as the engine has it. */
const FLOW_A = 0.01;

/**
 * A cell as a subcircuit. Its states stand on nodes to ground: `z` the charge fraction, `h` hysteresis, `fK` the current seen
 * through time constant K; capacitors of so many farads make volts of them. `i` is the cell's current in volts.
 */
export function cellSubcircuit(bank: Bank, curve: number): readonly string[] {
  const pairs = Array.from(bank.timeConstantS, (_, k) => k + 1);
  const perPair = pairs.map((k) => ` R${k}=0 tau${k}=1 f${k}0=0`).join('');
  return [
    `.subckt cell${curve + 1} p n i z Qas=1 R0=1 eta=1 leak=0 z0=0 M=0 hAs=1 h0=0${perPair}`,
    'R0 p a {R0}',
    `Bv a n V = v(u) + {M}*v(h)${pairs.map((k) => ` + {R${k}}*v(f${k})`).join('')}`,
    `Xu z u ocv${curve + 1}`,
    'Bz 0 z I = {eta}*max(v(i), 0) + min(v(i), 0) - {leak}',
    'Cz z 0 {Qas} ic={z0}',
    'Rz z 0 1e15',
    'Bh 0 h I = v(i) - abs(v(i))*v(h)',
    'Ch h 0 {hAs} ic={h0}',
    'Rh h 0 1e15',
    ...pairs.flatMap((k) => [`G${k} 0 f${k} i 0 1`, `R${k}f f${k} 0 1`, `C${k} f${k} 0 {tau${k}} ic={f${k}0}`]),
    '.ends',
  ];
}

/** Every module: its cells, its BMS, and nodes that show its current and voltage. */
export function moduleLines(circuit: BankCircuit): readonly string[] {
  const { graph, bank } = circuit;
  return graph.branches.flatMap((branch) => {
    if (branch.kind !== 'module') return [];
    const { module: m } = branch;
    const [minus, plus] = [nodeName(branch.from), nodeName(branch.to)];
    const name = moduleName(bank, m);
    return [
      `* string ${name.slice(1).replace('p', ' position ')}: module ${bank.placed[m].parameters.id}`,
      ...cellLines(circuit, m, minus),
      ...bmsLines(circuit, m, plus, minus),
      `E${name}_v ${name}_v 0 ${plus} ${minus} 1`,
    ];
  });
}

function cellLines({ bank, state }: BankCircuit, m: number, minus: string): readonly string[] {
  const name = moduleName(bank, m);
  const first = bank.cellStart[m];
  return Array.from({ length: bank.cellStart[m + 1] - first }, (_, k) => {
    const below = k === 0 ? minus : `${name}_${k}`;
    const parameters = Object.entries(cellParameters(bank, state, first + k))
      .map(([key, value]) => `${key}=${n(value)}`)
      .join(' ');
    const kind = `cell${bank.curveOfCell[first + k] + 1}`;
    return spiceStatement(
      `X${name}c${k + 1} ${name}_${k + 1} ${below} ${name}_ic ${name}c${k + 1}_z ${kind} ${parameters}`,
    );
  });
}

function cellParameters(bank: Bank, state: BankState, c: number): Readonly<Record<string, number>> {
  const i = bank.chainOfModule[bank.moduleOfCell[c]];
  const chains = bank.chainOhm.length;
  const pairs = Array.from(bank.timeConstantS, (tauS, k) => ({
    [`R${k + 1}`]: bank.polarisationOhm[k * bank.cells + c],
    [`tau${k + 1}`]: tauS,
    [`f${k + 1}0`]: state.filterA[k * chains + i] - state.offsetFilterA[k * bank.cells + c],
  }));
  return {
    Qas: bank.capacityAs[c],
    R0: bank.resistanceOhm[c],
    eta: bank.efficiency[c],
    leak: bank.leakageA[c],
    z0: state.charge[c],
    M: bank.hysteresisV[c],
    // Without a rate the state stays where it is.
    hAs: bank.hysteresisPerAs[c] > 0 ? 1 / bank.hysteresisPerAs[c] : 1e15,
    h0: state.hysteresis[c],
    ...Object.assign({}, ...pairs),
  };
}

/**
 * A BMS. Node `ov` and `uv` are its latches, `chg` and `dsg` its paths (1 = closed), `vmax` and `vmin` the extremes of its
 * cells, `i` its current, `ic` that of its cells, which is less by the standby current. With one path open it conducts the
 * other way with the forward drop, which a current above `reclose_A` bridges.
 */
function bmsLines({ bank, state, stackV }: BankCircuit, m: number, plus: string, minus: string): readonly string[] {
  const name = moduleName(bank, m);
  const node = (suffix: string): string => `${name}_${suffix}`;
  const v = (suffix: string): string => `v(${node(suffix)})`;
  const count = bank.cellStart[m + 1] - bank.cellStart[m];
  const cellV = Array.from({ length: count }, (_, k) =>
    k === 0 ? `v(${name}_1, ${minus})`.replace(', 0)', ')') : `v(${name}_${k + 1}, ${name}_${k})`,
  );
  const top = `${name}_${count}`;
  const bridges = bank.forwardDropV[m] > 0 && Number.isFinite(bank.recloseA[m]);
  const released = `${v('vmin')} - ${n(bank.underVoltageReleaseV[m])}`;
  const onCharge = bank.underVoltageReleaseOnCharge[m] === 1;
  return [
    spiceStatement(`B${name}_vmax ${node('vmax')} 0 V = ${extremeOf('max', cellV)}`),
    spiceStatement(`B${name}_vmin ${node('vmin')} 0 V = ${extremeOf('min', cellV)}`),
    ...quickLatch(node('ov'), state.overVoltage[m] === 1, {
      set: `${v('vmax')} - ${n(bank.overVoltageV[m])}`,
      clear: `${n(bank.overVoltageReleaseV[m])} - ${v('vmax')}`,
    }),
    ...quickLatch(node('uv'), state.underVoltage[m] === 1, {
      set: `${n(bank.underVoltageV[m])} - ${v('vmin')}`,
      clear: onCharge ? `min(${released}, 0.001*(${v('i')} - ${FLOW_A}))` : released,
    }),
    `B${name}_chg ${node('chg')} 0 V = ${state.tooCold[m] === 1 ? '0' : closed(v('ov'))}`,
    `B${name}_dsg ${node('dsg')} 0 V = ${closed(v('uv'))}`,
    ...(bridges ? bridgeLines(bank, state, m) : []),
    ...pathLines(bank, m, plus, top, bridges),
    `C${name} ${plus} ${minus} 0.001 ic=${n(stackV[m])}`,
    `I${name}_standby ${top} ${minus} ${n(bank.standbyA[m])}`,
    `B${name}_ic ${node('ic')} 0 V = ${v('i')} - ${n(bank.standbyA[m])}`,
  ];
}

/** 1 while the latch is clear, 0 while it is set. */
function closed(q: string): string {
  return `1 - max(0, min(1, 1.25*${q} - 0.125))`;
}

/** The bridge across the forward drop: it closes on current the permitted way, and opens when that has stopped. */
function bridgeLines(bank: Bank, state: BankState, m: number): readonly string[] {
  const name = moduleName(bank, m);
  const [i, chg, dsg] = [`v(${name}_i)`, `v(${name}_chg)`, `v(${name}_dsg)`];
  const permitted = `v(${name}_permitted)`;
  return [
    `B${name}_permitted ${name}_permitted 0 V = ${i}*(${chg}*(1-${dsg}) - ${dsg}*(1-${chg}))`,
    ...slowLatch(`${name}_bridge`, state.reclosed[m] === 1, {
      set: `${permitted} - ${n(bank.recloseA[m])}`,
      clear: `${FLOW_A} - ${permitted}`,
    }),
  ];
}

/** Both switches and their diodes in one element: a resistance where both are closed, a rectifier where one is. */
function pathLines(bank: Bank, m: number, plus: string, top: string, bridges: boolean): readonly string[] {
  const name = moduleName(bank, m);
  const [chg, dsg] = [`v(${name}_chg)`, `v(${name}_dsg)`];
  const across = `v(${plus}, ${name}_x)`;
  const drop = `${n(bank.forwardDropV[m])}${bridges ? `*(1-v(${name}_bridge))` : ''}`;
  const hasDrop = bank.forwardDropV[m] > 0;
  const [charging, discharging] = hasDrop
    ? [`(${across} - ${drop}*(1-${dsg}))`, `(${across} + ${drop}*(1-${chg}))`]
    : [across, across];
  const positive = (x: string): string => `(sqrt(${x}*${x} + ${n(ROUNDED_V ** 2)}) + ${x})`;
  const negative = (x: string): string => `(sqrt(${x}*${x} + ${n(ROUNDED_V ** 2)}) - ${x})`;
  const perOhm = n(0.5 / Math.max(LEAST_PATH_OHM, bank.pathOhm[m]));
  const ways = `${perOhm}*(${chg}*${positive(charging)} - ${dsg}*${negative(discharging)})`;
  return [
    spiceStatement(`B${name}_path ${plus} ${name}_x I = ${ways} + ${n(LEAK_S)}*${across}`),
    `V${name}_i ${name}_x ${top} 0`,
    `H${name}_i ${name}_i 0 V${name}_i 1`,
  ];
}
