import type { BankCircuit } from '../bank/circuit.js';
import { slowLatch } from './spice-latch.js';
import { moduleName, spiceNumber as n, nodeName, spiceStatement } from './spice-text.js';

/** Time constant with which a device follows the difference of voltages, s. */
const FOLLOWS_S = 0.01;

/** Devices between neighbouring modules of a string, at their posts; none if the bank has none. */
export function equaliserLines({ bank, state, graph }: BankCircuit): readonly string[] {
  const { equaliser } = bank;
  if (equaliser === null) return [];
  const { settings, disableV, perVolt } = equaliser;
  const lines = ['* equalisers'];
  if (settings.enableV === null) lines.push('Veq_on eq_on 0 1');
  else {
    const [set, clear] = [`v(bus) - ${n(settings.enableV)}`, `${n(disableV)} - v(bus)`];
    lines.push(...slowLatch('eq_on', state.equaliserOn[0] === 1, { set, clear }));
  }
  const posts = new Map(graph.branches.flatMap((b) => (b.kind === 'module' ? [[b.module, b] as const] : [])));
  const along = (d: string): string =>
    `${n(perVolt)}*(max(0, ${d} - ${n(settings.startV)}) - max(0, ${d} - ${n(settings.fullV)}))`;
  for (let k = 0; k < equaliser.devices; k++) {
    const [lower, upper] = [equaliser.lower[k], equaliser.upper[k]];
    const [below, above] = [posts.get(lower), posts.get(upper)];
    if (below === undefined || above === undefined) throw new RangeError(`device ${k} must stand between two modules`);
    const [a, b] = [moduleName(bank, lower), moduleName(bank, upper)];
    const taken = `v(eq${k + 1})`;
    const closed = `v(eq${k + 1}_closed)`;
    const [lowerV, upperV] = [`v(${a}_v)`, `v(${b}_v)`];
    lines.push(
      `Beq${k + 1}_closed eq${k + 1}_closed 0 V = v(${a}_chg)*v(${a}_dsg)*v(${b}_chg)*v(${b}_dsg)`,
      spiceStatement(
        `Beq${k + 1} eq${k + 1}_wants 0 V = v(eq_on)*${closed}*(${along(`(${upperV} - ${lowerV})`)} - ${along(`(${lowerV} - ${upperV})`)})`,
      ),
      // A device follows within some hundredths of a second, or it would be sought anew whenever a path switches.
      `Geq${k + 1} 0 eq${k + 1} eq${k + 1}_wants 0 1e6`,
      `Req${k + 1} eq${k + 1} 0 1e-6`,
      `Ceq${k + 1} eq${k + 1} 0 ${FOLLOWS_S * 1e6} ic=0`,
      spiceStatement(
        `Beq${k + 1}_lower ${nodeName(below.from)} ${nodeName(below.to)} I = ${n(settings.efficiency)}*max(0, ${taken}) + min(0, ${taken}) - ${n(settings.standbyA)}*${closed}`,
      ),
      spiceStatement(
        `Beq${k + 1}_upper ${nodeName(above.to)} ${nodeName(above.from)} I = max(0, ${taken}) + ${n(settings.efficiency)}*min(0, ${taken}) + ${n(settings.standbyA)}*${closed}`,
      ),
    );
  }
  return lines;
}
