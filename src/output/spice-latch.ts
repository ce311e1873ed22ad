/**
 * A switch with memory: node `q` goes to 1 when `set` rises above 0, back to 0 when `clear` does, and stays in between.
 *
 * The margins are amplified: a simulator bounds its steps by how near a switch is to its threshold only to within some
 * hundredths of a volt. The store behind the switch makes the transition last a fraction of a millisecond.
 */
export function latchSubcircuits(): readonly string[] {
  return [false, true].flatMap((isSet) => [
    `.subckt ${latchName(isSet)} set clear q`,
    'Bu u 0 V = 100000*((1-v(o))*v(set) - v(o)*v(clear))',
    'V1 one 0 1',
    `S1 one o u 0 latch ${isSet ? 'ON' : 'OFF'}`,
    'Ro o 0 0.001',
    'Eq q1 0 o 0 1',
    'Rq q1 q 2e-8',
    `Cq q 0 10000 ic=${isSet ? 1 : 0}`,
    '.model latch SW(vt=0 vh=1 ron=1e-9 roff=1e12)',
    '.ends',
  ]);
}

export function latchName(isSet: boolean): string {
  return isSet ? 'latch_set' : 'latch_clear';
}
