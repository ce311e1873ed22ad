import { readFileSync } from 'node:fs';
import type { CircuitBank, CircuitModule } from '../circuit/circuit-waveform.js';
import type { OracleCase } from './oracle-case.js';

const SLOTS = [
  [1, 1],
  [1, 2],
  [2, 1],
  [2, 2],
] as const;
const CELLS = [1, 2, 3, 4];

/** The outside deck of a case, and how it names things. */
export function readOracleDeck(name: OracleCase): { deck: string; bank: CircuitBank } {
  const deck = readFileSync(new URL(`./${name}/deck.cir`, import.meta.url), 'utf8');
  const modules = SLOTS.map(([string, position], i): CircuitModule => {
    const module = `m${i + 1}`;
    return {
      string,
      position,
      cells: CELLS.length,
      currentA: (v) => v(`v(${module}_i)`),
      terminalV: (v) => v(`v(${module}p)`) - v(`v(${module}n)`),
      charge: CELLS.map((cell) => (v) => v(`v(${module}c${cell}_soc)`)),
      cellV: [(v) => v(`v(${module}_vmin)`), (v) => v(`v(${module}_vmax)`)],
      chargeClosed: (v) => v(`v(${module}_chg)`),
      dischargeClosed: (v) => v(`v(${module}_dsg)`),
    };
  });
  return { deck, bank: { busV: (v) => v('v(bus)'), modules } };
}
