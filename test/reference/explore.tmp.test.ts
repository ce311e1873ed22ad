import { it } from 'vitest';
import { referenceBanks } from '/work/main/test/reference/banks.js';
import { simulateSlowBank } from '/work/main/test/reference/slow-bank.js';

it('x', () => {
  const only = process.env.ONLY?.split(',');
  for (const bank of referenceBanks()) {
    if (only && !only.includes(bank.name)) continue;
    const t = process.cpuUsage();
    const run = simulateSlowBank(bank, { stepS: Number(process.env.STEP ?? 10), nodeLeakS: 0 });
    const cpu = process.cpuUsage(t).user / 1e6;
    console.log(
      bank.name,
      'cpu',
      cpu,
      'steps',
      run.steps,
      'end',
      run.cycleEndS,
      'Wh',
      run.servedWh,
      run.lostWh,
      run.lostAh,
      '\n',
      run.events
        .map((e) => `${e.timeS.toFixed(2)} c${e.cycle} ${e.kind} ${e.string}.${e.position}.${e.cell}`)
        .join('\n '),
      '\n',
      run.cycleEndCharge.map((r) => r.map((z) => z.toFixed(4)).join(' ')).join('\n '),
    );
  }
}, 600000);
