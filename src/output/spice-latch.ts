import { spiceNumber, spiceStatement } from './spice-text.js';

/**
 * Two kinds of memory. Node `q` goes to 1 when `set` rises above 0, back to 0 when `clear` does, and stays in between.
 *
 * `quick_set` and `quick_clear` (by where they start) are a switch for margins of cell voltages, which move with charge. A
 * simulator bounds its steps by how near a switch is to its threshold, to within 0.05 V of the control voltage: so the
 * margins are amplified. The store behind the switch makes the transition last some hundredths of a second.
 *
 * `slow` is for margins of currents and of the bus, which jump while a solution is sought and would leave a switch closed
 * for nothing: a charge that cannot jump. Beyond 0.1 it goes the rest of the way without a push. Node `live` lets no margin
 * push within the first millisecond, in which the voltages of the start are found. A transition takes some hundredths of
 * a second.
 */
export function latchLines(): readonly string[] {
  const pushes = (margin: string): string => `10*max(0, min(v(live), 1000*v(${margin})))`;
  return [
    ...[false, true].flatMap((isSet) => [
      `.subckt quick_${isSet ? 'set' : 'clear'} set clear q`,
      'Bu u 0 V = 100000*((1-v(o))*v(set) - v(o)*v(clear))',
      'V1 one 0 1',
      `S1 one o u 0 latch ${isSet ? 'ON' : 'OFF'}`,
      'Ro o 0 0.001',
      'Eq q1 0 o 0 1',
      'Rq q1 q 2e-6',
      `Cq q 0 10000 ic=${isSet ? 1 : 0}`,
      '.model latch SW(vt=0 vh=0.1 ron=1e-9 roff=1e12)',
      '.ends',
    ]),
    '.subckt slow set clear q live q0=0',
    spiceStatement(
      `Bq 0 q I = 1e5*(${pushes('set')}*(1-v(q)) - ${pushes('clear')}*v(q) + 20*v(q)*(1-v(q))*(v(q)-0.1))`,
    ),
    'Cq q 0 10000 ic={q0}',
    'Rq q 0 1e15',
    '.ends',
    'Vlive live 0 PWL(0 0 0.001 0 0.002 1)',
  ];
}

interface Margins {
  readonly set: string;
  readonly clear: string;
}

/** A latch for cell voltages, its margins in V on nodes of their own. */
export function quickLatch(q: string, isSet: boolean, on: Margins): readonly string[] {
  return [...marginLines(q, on), `X${q} ${q}_set ${q}_clear ${q} quick_${isSet ? 'set' : 'clear'}`];
}

/** A latch for currents and the bus, its margins in V or A on nodes of their own. */
export function slowLatch(q: string, isSet: boolean, on: Margins): readonly string[] {
  return [...marginLines(q, on), `X${q} ${q}_set ${q}_clear ${q} live slow q0=${spiceNumber(isSet ? 1 : 0)}`];
}

function marginLines(q: string, { set, clear }: Margins): readonly string[] {
  return [spiceStatement(`B${q}_set ${q}_set 0 V = ${set}`), spiceStatement(`B${q}_clear ${q}_clear 0 V = ${clear}`)];
}
