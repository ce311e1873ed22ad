import type { BankCircuit } from '../bank/circuit.js';
import { ocvSubcircuit } from './spice-curve.js';
import { equaliserLines } from './spice-equaliser.js';
import { type DeckAddress, deckHead } from './spice-head.js';
import { latchLines } from './spice-latch.js';
import { cellSubcircuit, moduleLines } from './spice-modules.js';
import { CHARGER_DECIDES_S, terminalLines } from './spice-terminal.js';
import { moduleName, spiceNumber, spiceStatement } from './spice-text.js';
import { wiringLines } from './spice-wiring.js';

/** Longest step of the simulator, s: with the tolerances below it seldom wants one of more than a few seconds. */
const MOST_STEP_S = 10;

/**
 * A bank over a stretch of time as a self-contained deck for circuit simulators of the SPICE family (behavioural sources,
 * switches with hysteresis), without a control section. It is run in batch and saves what a trace shows.
 */
export function renderSpiceDeck(circuit: BankCircuit, address: DeckAddress): string {
  const { bank } = circuit;
  const curves = [...new Set(bank.curveOfCell)].sort((a, b) => a - b);
  const lines = [
    ...deckHead(circuit, address),
    '',
    '.option reltol=1e-7 vntol=1e-9 abstol=1e-6 chgtol=100 method=gear itl4=100 gmin=1e-15',
    '',
    ...curves.flatMap((curve) => [...ocvSubcircuit(bank.ocv, curve), ...cellSubcircuit(bank, curve)]),
    ...latchLines(),
    '',
    ...moduleLines(circuit),
    '* leads, links, bus segments',
    ...wiringLines(circuit.graph),
    ...equaliserLines(circuit),
    ...terminalLines(circuit),
    '',
    spiceStatement(
      `.save ${savedNodes(circuit)
        .map((node) => `v(${node})`)
        .join(' ')}`,
    ),
    `.tran ${spiceNumber(address.everyS)} ${spiceNumber(circuit.endS - circuit.startS + CHARGER_DECIDES_S)} 0 ${spiceNumber(Math.min(address.everyS, MOST_STEP_S))} uic`,
    '.end',
  ];
  return `${lines.join('\n')}\n`;
}

function savedNodes({ bank }: BankCircuit): readonly string[] {
  const modules = Array.from({ length: bank.modules }, (_, m) => {
    const name = moduleName(bank, m);
    const cells = Array.from({ length: bank.cellStart[m + 1] - bank.cellStart[m] }, (__, k) => `${name}c${k + 1}_z`);
    return [...['i', 'v', 'vmax', 'vmin', 'chg', 'dsg'].map((what) => `${name}_${what}`), ...cells];
  });
  return ['bus', 'bank_i', 'load_i', 'charger_i', 'load_off', 'ended', ...modules.flat()];
}
