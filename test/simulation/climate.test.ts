import { describe, expect, it } from 'vitest';
import { REFERENCE_K } from '../../src/bank/temperature.js';
import type { Journey, JourneyListeners } from '../../src/simulation/advance.js';
import { createClimate } from '../../src/simulation/climate.js';
import { runSegment } from '../../src/simulation/run-cycle.js';
import type { DutySegment } from '../../src/study/study.js';
import { bankOf } from '../reference/bank-of.js';
import { noLeads } from '../reference/bare-module.js';
import type { ReferenceBank } from '../reference/reference-bank.js';
import { journeyOf } from './journey-of.js';
import { CHARGE, DISCHARGE, oneCell, seconds } from './one-cell.js';

const kelvin = (celsius: number): number => celsius + 273.15;
const at = (celsius: number, segment: DutySegment): DutySegment => ({ ...segment, ambientK: kelvin(celsius) });
const activation = { resistanceJPerMol: 20_000, leakageJPerMol: 39_000 };
const REFUSING = { chargeRefusal: { belowK: kelvin(0), releaseK: kelvin(5) } };

/** Takes a bank of which ambient temperature is told through the segments of its one cycle. */
function runInClimate(
  bank: ReferenceBank,
  listeners: Partial<JourneyListeners> = {},
  onSegment: (journey: Journey) => void = () => undefined,
): Journey {
  const journey = journeyOf(bank, listeners);
  journey.climate = createClimate(journey.kernel.bank);
  for (const segment of bank.cycles.flat()) {
    runSegment(journey, segment, bank);
    onSegment(journey);
  }
  return journey;
}

describe('a bank in the cold', () => {
  it('drops more at its cells and the same at its path', () => {
    // By hand: U = 3 + z, half full, 1 mOhm at 25 degC, 9 mOhm of path, 18 A; at -10 degC z counts from 0.12:
    // U = 3 + 0.38 / 0.88, and 1 mOhm is 2.9245 mOhm; at 40 degC 0.67945 mOhm.
    const busV = (celsius: number): number =>
      runInClimate(oneCell([[at(celsius, seconds(0, DISCHARGE))]], { activation })).kernel.bus.bankV;
    expect(busV(25)).toBeCloseTo(3.5 - 18 * 0.01, 9);
    expect(busV(-10)).toBeCloseTo(3 + 0.38 / 0.88 - 18 * (0.009 + 0.0029245), 6);
    expect(busV(40)).toBeCloseTo(3.5 - 18 * (0.009 + 0.00067945), 6);
  });

  it('finds every cell on its own curve after a change', () => {
    // By hand: as above, two in series, the second 35 K colder; at 60 degC both still reach down to 0, at 25 degC the second
    // has its floor at 0.12.
    const [module] = oneCell([]).modules[0] ?? [];
    if (module === undefined) throw new RangeError('no module');
    const cycles = [[at(60, seconds(60)), at(25, seconds(0, DISCHARGE))]];
    const pair = bankOf('pair', {
      ...oneCell(cycles),
      modules: [
        [
          { ...module, id: 'warm' },
          { ...module, id: 'cold' },
        ],
      ],
      leads: noLeads(1),
      slotOffsetK: [[0, -35]],
    });
    expect(runInClimate(pair).kernel.bus.bankV).toBeCloseTo(3.5 + 3 + 0.38 / 0.88 - 18 * 0.02, 9);
  });

  it('leaks 1.67 times as fast 10 K above 25 degC', () => {
    // By hand: 10 mA for 100 h is 1 Ah, a hundredth of the cell; exp(39000 / 8.314 (1 / 298.15 - 1 / 308.15)) = 1.6662.
    const lost = (celsius: number): number =>
      0.5 -
      runInClimate(oneCell([[at(celsius, seconds(360_000))]], { activation, leakageA: [0.01] })).kernel.state.charge[0];
    expect(lost(25)).toBeCloseTo(0.01, 9);
    expect(lost(35)).toBeCloseTo(0.016662, 6);
  });

  it('keeps its charge through cold and warmth: what is passed is what changes', () => {
    const cycle = [
      at(25, seconds(3600, DISCHARGE)),
      at(-10, seconds(3600, DISCHARGE)),
      at(-10, seconds(1800)),
      at(40, seconds(5000, CHARGE)),
      at(5, seconds(600, { loadW: 40 })),
    ];
    let passedAs = 0;
    const { kernel } = runInClimate(oneCell([cycle], { activation }), {
      onStep: ({ work }) => {
        passedAs += work.endAs[0];
      },
    });
    // 100 Ah are 360000 As; a sum of some hundred steps rounds by far less than 1e-10 of that.
    expect(kernel.state.charge[0]).toBeCloseTo(0.5 + passedAs / 360_000, 10);
    // By hand: -2 h + 5000 s at 18 A, and 600 s of 40 W: at z = 0.3797 the floor of 0.04 leaves U = 3.35385 V, behind
    // 9 + 1.7863 mOhm, so V = (U + sqrt(U^2 - 4 x 0.43145)) / 2 = 3.21985 V and 12.4229 A, 2.0705 Ah.
    expect(kernel.state.charge[0]).toBeCloseTo(0.5 - 0.36 + 0.25 - 0.020705, 5);
  });

  it('gives back when it is warm what was out of reach', () => {
    // By hand: the BMS trips at 3.02 V and rest, that is at z = 0.02 when warm; at -10 degC at 0.12 + 0.02 x 0.88 = 0.1376.
    const sketch = { arrivalCharge: [0.3], underVoltageV: 3.02, underVoltageReleaseV: 3.03, pathResistanceOhm: 0.01 };
    const slow = { loadA: 0.01 };
    const trips: string[] = [];
    const charges: number[] = [];
    const bank = oneCell([[at(-10, seconds(40 * 3600, { loadA: 0.5 })), at(25, seconds(20 * 3600, slow))]], {
      ...sketch,
      resistanceOhm: [1e-6],
    });
    runInClimate(bank, { onEvent: ({ kind }) => trips.push(kind) }, ({ kernel }) =>
      charges.push(kernel.state.charge[0]),
    );
    expect(trips).toEqual(['under-voltage-trip', 'load-lost', 'under-voltage-release', 'load-back']);
    // Tripped 2 s late at 0.5 A; then 0.2 Ah more when warm, without a charge in between.
    expect(charges[0]).toBeCloseTo(0.1376, 5);
    expect(charges[1]).toBeCloseTo((charges[0] ?? 0) - 0.002, 4);
  });
});

describe('a BMS that refuses to charge when it is cold', () => {
  it('is charged nothing, yet discharges, and charges again when it is warm enough', () => {
    const story: string[] = [];
    const charges: number[] = [];
    const cycle = [
      at(-10, seconds(3600, CHARGE)),
      at(3, seconds(3600, CHARGE)),
      at(3, seconds(3600, DISCHARGE)),
      at(5, seconds(3600, CHARGE)),
      at(1, seconds(3600, CHARGE)),
      at(-1, seconds(3600, CHARGE)),
    ];
    runInClimate(
      oneCell([cycle], { activation }, REFUSING),
      { onEvent: ({ kind, timeS, module }) => story.push(`${timeS} ${kind} ${module}`) },
      ({ kernel }) => charges.push(100 * kernel.state.charge[0]),
    );
    // By hand: refused below 0 until 5 degC; 18 Ah an hour. An open path still leaks a microsiemens, 1e-6 Ah an hour.
    [50, 50, 32, 50, 68, 68].forEach((ampereHours, hour) => {
      expect(charges[hour]).toBeCloseTo(ampereHours, 4);
    });
    expect(story).toEqual(['0 cold-charge-refusal 0', '10800 cold-charge-release 0', '18000 cold-charge-refusal 0']);
  });

  it('lets go of its forward drop under load as after over-voltage', () => {
    const busV: number[] = [];
    const cycle = [at(-10, seconds(0.05, DISCHARGE)), at(-10, seconds(10, DISCHARGE)), at(10, seconds(10, DISCHARGE))];
    const { kernel } = runInClimate(oneCell([cycle], {}, { ...REFUSING, forwardDropV: 0.7 }), {}, (journey) =>
      busV.push(journey.kernel.bus.bankV),
    );
    // The drop is bridged after 0.1 s of more than 1 A.
    expect((busV[1] ?? 0) - (busV[0] ?? 0)).toBeCloseTo(0.7, 2);
    expect(kernel.state.reclosed[0]).toBe(0);
  });

  it('never refuses unless it is told to', () => {
    const kinds: string[] = [];
    const { kernel } = runInClimate(oneCell([[at(-30, seconds(3600, CHARGE))]]), {
      onEvent: ({ kind }) => kinds.push(kind),
    });
    expect(kernel.state.charge[0]).toBeCloseTo(0.68, 6);
    expect(kinds).toEqual([]);
  });
});

describe('a bank at 25 degC', () => {
  it('takes the same steps whether its temperature is told or not', () => {
    const cycle = [seconds(5000, DISCHARGE), seconds(600), seconds(4000, CHARGE)];
    const told = runInClimate(oneCell([cycle.map((segment) => at(25, segment))], { activation }));
    const untold = journeyOf(oneCell([cycle], { activation }));
    for (const segment of cycle) runSegment(untold, segment, { loadFactor: 1, chargeFactor: 1 });
    expect(told.kernel.bank).toBe(told.climate?.reference);
    expect(told.climate?.ambientK).toBe(REFERENCE_K);
    expect(told.steps).toBe(untold.steps);
    expect(told.kernel.state).toEqual(untold.kernel.state);
  });
});
