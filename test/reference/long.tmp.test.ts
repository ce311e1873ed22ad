import { appendFileSync } from 'node:fs';
import { it } from 'vitest';
import { referenceBanks } from './banks.js';
import { chargeDifference, compareEvents } from './contract.js';
import { repeated } from './duties.js';
import { simulateSlowBank } from './slow-bank.js';

it('x', () => {
  for (const bank of referenceBanks().filter((b) => b.name === '2s2p-strings' || b.name === '2s2p-cross-linked')) {
    const long = { ...bank, cycles: repeated(bank.cycles[0], 180) };
    const t = process.cpuUsage();
    const a = simulateSlowBank(long, { stepS: 60, fineStepS: 5 });
    const ca = process.cpuUsage(t).user / 1e6;
    const b = simulateSlowBank(long, { stepS: 10, fineStepS: 2 });
    const d = chargeDifference(a.cycleEndCharge, b.cycleEndCharge);
    const e = compareEvents(a.events, b.events, b.segmentStartS);
    appendFileSync(
      '/tmp/long.txt',
      `${bank.name} cpu ${ca} ${[0, 9, 29, 59, 119, 179].map((i) => d[i].toExponential(1))} ${e.timeS} ${e.ofTolerance} ${e.faults.length} ${a.events.length}\n`,
    );
  }
}, 3600000);
