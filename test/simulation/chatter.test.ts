import { describe, expect, it } from 'vitest';
import { buildBank } from '../../src/bank/bank.js';
import { createBankState } from '../../src/bank/bank-state.js';
import { compileOcvCurves } from '../../src/bank/ocv-curves.js';
import { createJourney, type Journey } from '../../src/simulation/advance.js';
import { runSegment, startCycle } from '../../src/simulation/run-cycle.js';
import { oneCell, seconds } from './one-cell.js';

/** A flat module under a load of 18 A that nothing disconnects: its BMS opens, recovers by voltage, and opens again. */
function underLoadFor(durationS: number): { journey: Journey; tripsS: number[]; trips: number; leaps: number } {
  const bank = oneCell(
    [[seconds(durationS, { loadA: 18 })]],
    // U = 3 + z: 3.47 V at rest, 3.29 V under load; 1600 trips of 10 mAh until it no longer recovers.
    { arrivalCharge: [0.47], resistanceOhm: [0.01], underVoltageV: 3.3, underVoltageReleaseV: 3.31 },
    { underVoltageDelayS: 2, underVoltageReleaseHoldS: 60 },
  );
  const modules = new Map(bank.modules.flat().map((module) => [module.id, module]));
  const built = buildBank(bank.candidate, modules, compileOcvCurves(bank.ocvTables));
  const tripsS: number[] = [];
  let trips = 0;
  let atBurst = 0;
  let leaps = 0;
  const journey: Journey = createJourney(
    built,
    createBankState(built),
    bank.candidate.charger,
    { disconnectV: null, disconnectDelayS: 0, reconnectV: 0 },
    {
      onEvent: ({ kind, timeS }) => {
        if (kind !== 'under-voltage-trip') return;
        trips++;
        tripsS.push(timeS);
      },
      onBurst: () => {
        atBurst = trips;
      },
      onLeap: (ratio) => {
        leaps++;
        trips += ratio * (trips - atBurst);
      },
    },
  );
  startCycle(journey);
  for (const segment of bank.cycles[0]) runSegment(journey, segment, bank);
  return { journey, tripsS, trips, leaps };
}

describe('a BMS that switches without end', () => {
  it('is simulated trip by trip within its budget: a trip every 62 s', () => {
    // By hand: 2 s under load (delay), then 60 s until the release has held; the rest between is a few milliseconds.
    const { tripsS, leaps } = underLoadFor(5400);
    const periods = tripsS.slice(1).map((timeS, k) => timeS - tripsS[k]);
    expect(leaps).toBe(0);
    for (const period of periods) expect(period).toBeCloseTo(62, 0);
  });

  it('is leapt over beyond it, with trips and charge as rate times time', () => {
    const durationS = 24 * 3600;
    const { journey, trips, leaps } = underLoadFor(durationS);
    expect(leaps).toBeGreaterThan(0);
    // By hand: 18 A for 2 s of every 62 s.
    const expectedTrips = durationS / 62;
    expect(Math.abs(trips / expectedTrips - 1)).toBeLessThan(0.01);
    const passedAh = 100 * (0.47 - journey.kernel.state.charge[0]);
    expect(Math.abs(passedAh / ((expectedTrips * 18 * 2) / 3600) - 1)).toBeLessThan(0.02);
    expect(journey.kernel.nowS).toBeCloseTo(durationS, 6);
    expect(journey.steps).toBeLessThan(4000);
  });
});
