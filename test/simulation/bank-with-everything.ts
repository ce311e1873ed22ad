import type { DutySegment } from '../../src/study/study.js';
import type { ReferenceBank } from '../reference/reference-bank.js';
import { randomBankFrom } from './random-bank.js';

const RATINGS = { continuousA: 50, peakA: 100, blockingV: 30, mostInSeries: 2, mostInParallel: 2 };

/**
 * A random bank of two or three strings of two or three modules, tied or not, with all that can be said of one: unlike
 * temperatures through cold and warm, refusal of charge, ageing within days, equalisers, rails, peaks, ratings and a visit
 * after every cycle. Invented.
 *
 * @param rolls as of a random bank
 * @param more even numbers from 0 to 1
 */
export function bankWithEverything(rolls: readonly number[], more: readonly number[]): ReferenceBank {
  let next = 0;
  const between = (low: number, high: number): number => low + (high - low) * more[next++ % more.length];
  // The first rolls choose wiring, strings and positions: neither packs nor anything alone.
  const [wiring, strings, positions, ...rest] = rolls;
  const plural = (roll: number): number => 0.34 + 0.65 * roll;
  const bank = randomBankFrom([0.66 * wiring, plural(strings), plural(positions), ...rest]);
  const modules = bank.modules.map((string) =>
    string.map((module) => ({
      ...module,
      activation: { resistanceJPerMol: between(10_000, 30_000), leakageJPerMol: between(30_000, 50_000) },
      temperatureOffsetK: between(-2, 2),
      ratings: RATINGS,
      bms: { ...module.bms, chargeRefusal: { belowK: between(263, 273), releaseK: between(273.5, 276) } },
    })),
  );
  const segments = (cycle: readonly DutySegment[]): DutySegment[] =>
    cycle.flatMap((segment) => {
      const { ambientK: _, ...warm } = segment;
      // A quarter at 25 degC, which is left out.
      const at = between(0, 1) < 0.25 ? warm : { ...warm, ambientK: between(258, 308) };
      return [at, { ...at, durationS: between(5, 60), loadW: 3 * at.loadW, endsWhenCharged: false }];
    });
  const { absorptionV } = bank.candidate.charger;
  const withEverything: ReferenceBank = {
    ...bank,
    modules,
    cycles: [...bank.cycles, ...bank.cycles.slice(0, 1)].map(segments),
    candidate: {
      ...bank.candidate,
      slotOffsetK: modules.map((string) => string.map(() => between(-3, 3))),
      takeOff: {
        kind: between(0, 1) < 0.5 ? 'same-end' : 'diagonal',
        segmentOhm: modules.slice(1).map(() => between(0.0001, 0.002)),
      },
      ratings: { leadA: 60, linkA: 20, fuseA: 80, fuseBreakingA: 2000 },
      equaliser: {
        currentA: between(1, 10),
        startV: between(0, 0.05),
        fullV: between(0.06, 0.3),
        efficiency: between(0.7, 1),
        standbyA: between(0, 0.05),
        enableV: between(0, 1) < 0.5 ? null : 0.95 * absorptionV,
      },
      upkeep: { everyCycles: 1 },
    },
  };
  return {
    ...withEverything,
    modules: modules.map((string) =>
      string.map((module) => ({
        ...module,
        ageing: {
          law: between(0, 1) < 0.5 ? 'wang-2011' : 'naumann',
          initialFadeFraction: between(0, 0.02),
          resistanceGrowth: between(0, 5),
          rate: between(5, 50),
        },
      })),
    ),
  };
}
