import type { WiringGraph } from '../bank/wiring-graph.js';
import { nodeName, spiceNumber } from './spice-text.js';

/** Leads, links and bus segments. One without resistance is a source of 0 V: a resistor of 0 would be given some. */
export function wiringLines({ branches }: WiringGraph): readonly string[] {
  const lines: string[] = [];
  for (const branch of branches) {
    if (branch.kind === 'module') continue;
    const name = `${branch.kind}${lines.length + 1}`;
    const ends = `${nodeName(branch.from)} ${nodeName(branch.to)}`;
    lines.push(branch.ohm > 0 ? `R${name} ${ends} ${spiceNumber(branch.ohm)}` : `V${name} ${ends} 0`);
  }
  return lines;
}
