import { appendFileSync } from 'node:fs';
import { it } from 'vitest';
import { referenceBanks } from './banks.js';
import { chargeDifference, compareEvents, compareWaveforms, waveformOf } from './contract.js';
import { simulateSlowBank } from './slow-bank.js';

const no = { currentA: 1e9, charge: 1e9, plateauCellV: 1e9, kneeCellV: 1e9, terminalV: 1e9 };
it('x', () => {
  const only = process.env.ONLY?.split(',');
  for (const bank of referenceBanks()) {
    if (only && !only.includes(bank.name)) continue;
    const end = bank.cycles.flat().reduce((s, x) => s + x.durationS, 0);
    const sampleTimesS = Array.from({ length: Math.floor(end / 600) }, (_, i) => i * 600);
    const truth = simulateSlowBank(bank, { stepS: end > 200000 ? 0.5 : 0.1, sampleTimesS });
    const n = truth.samples.length;
    for (const [stepS, fineStepS] of [
      [1, 1],
      [5, 5],
      [10, 10],
      [20, 20],
      [60, 60],
      [60, 10],
      [60, 5],
      [60, 2],
      [120, 5],
    ]) {
      const t = process.cpuUsage();
      try {
        const run = simulateSlowBank(bank, { stepS, fineStepS, sampleTimesS: sampleTimesS.slice(0, n) });
        const cpu = process.cpuUsage(t).user / 1e6;
        const cut = <T>(w: T) => w;
        const m = Math.min(run.samples.length, n);
        const w = compareWaveforms(
          waveformOf({ ...run, samples: run.samples.slice(0, m) }),
          cut(waveformOf({ ...truth, samples: truth.samples.slice(0, m) })),
          no,
          truth.events,
          truth.segmentStartS,
        );
        const e = compareEvents(run.events, truth.events, truth.segmentStartS);
        const c = chargeDifference(run.cycleEndCharge, truth.cycleEndCharge);
        appendFileSync(
          '/tmp/steps.txt',
          `${bank.name.padEnd(20)} ${stepS}/${fineStepS} cpu ${cpu.toFixed(2)} steps ${run.steps} charge ${Math.max(...c).toExponential(1)} event ${e.timeS.toFixed(3)} s (${e.ofTolerance.toFixed(2)}) ${e.faults.length} faults; I ${w.currentA.toExponential(1)} V ${w.plateauCellV.toExponential(1)} knee ${w.kneeCellV.toExponential(1)} ${e.faults[0] ?? ''}\n`,
        );
      } catch (x) {
        appendFileSync('/tmp/steps.txt', `${bank.name} ${stepS}/${fineStepS} ${x}\n`);
      }
    }
  }
}, 3600000);
