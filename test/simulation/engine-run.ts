import { buildBank } from '../../src/bank/bank.js';
import { createBankState } from '../../src/bank/bank-state.js';
import { compileOcvCurves } from '../../src/bank/ocv-curves.js';
import { createJourney, type Journey } from '../../src/simulation/advance.js';
import { type BankSample, type Sampler, sampleStep } from '../../src/simulation/bank-sample.js';
import { runSegment, startCycle } from '../../src/simulation/run-cycle.js';
import type { ComparedEvent, Waveform } from '../reference/contract.js';
import type { ReferenceBank } from '../reference/reference-bank.js';

/** What the engine made of a reference bank, in the words of the slow rewrite. */
export interface EngineRun {
  readonly journey: Journey;
  readonly events: readonly ComparedEvent[];
  readonly cycleEndCharge: readonly (readonly number[])[];
  readonly segmentStartS: readonly number[];
  readonly waveform: Waveform;
}

/** Takes a reference bank through its cycles with the engine, sampled every `everyS` seconds (never by default). */
export function runEngine(bank: ReferenceBank, everyS = Number.POSITIVE_INFINITY, toleranceFactor = 1): EngineRun {
  const modules = new Map(bank.modules.flat().map((module) => [module.id, module]));
  const built = buildBank(bank.candidate, modules, compileOcvCurves(bank.ocvTables));
  const events: ComparedEvent[] = [];
  const samples: BankSample[] = [];
  const sampler: Sampler = { everyS, nextS: everyS, onSample: (sample) => samples.push(sample) };
  const journey = createJourney(
    built,
    createBankState(built),
    bank.candidate.charger,
    bank.candidate.load,
    {
      onEvent: ({ kind, timeS, module }) => {
        // Nobody visits a reference bank.
        if (kind === 'upkeep-visit') return;
        const slot = module < 0 ? null : module;
        events.push({
          timeS,
          // The slow rewrite calls the release of a lock a retry.
          kind: kind === 'over-current-unlock' ? 'over-current-retry' : kind,
          string: slot === null ? null : Math.floor(slot / built.positions) + 1,
          position: slot === null ? null : (slot % built.positions) + 1,
        });
      },
      onStep: (_, stepS) => sampleStep(sampler, journey, stepS),
    },
    toleranceFactor,
  );
  const cycleEndCharge: number[][] = [];
  const segmentStartS: number[] = [];
  for (const cycle of bank.cycles) {
    startCycle(journey);
    for (const segment of cycle) {
      segmentStartS.push(journey.kernel.nowS);
      runSegment(journey, segment, bank);
    }
    cycleEndCharge.push([...journey.kernel.state.charge]);
  }
  return { journey, events, cycleEndCharge, segmentStartS, waveform: waveformOfSamples(samples) };
}

function waveformOfSamples(samples: readonly BankSample[]): Waveform {
  const slots = samples[0]?.modules ?? [];
  return {
    timeS: samples.map(({ timeS }) => timeS),
    busV: samples.map(({ busV }) => busV),
    modules: slots.map(({ string, position }, m) => {
      const over = <T>(of: (module: BankSample['modules'][number]) => T): T[] => samples.map((s) => of(s.modules[m]));
      return {
        string,
        position,
        currentA: over(({ currentA }) => currentA),
        terminalV: over(({ terminalV }) => terminalV),
        cells: over(({ cellV }) => cellV.length)[0],
        lowestCharge: over(({ charge }) => Math.min(...charge)),
        highestCharge: over(({ charge }) => Math.max(...charge)),
        lowestCellV: over(({ cellV }) => Math.min(...cellV)),
        highestCellV: over(({ cellV }) => Math.max(...cellV)),
        chargeOpen: over(({ chargeOpen }) => chargeOpen),
        dischargeOpen: over(({ dischargeOpen }) => dischargeOpen),
      };
    }),
  };
}
