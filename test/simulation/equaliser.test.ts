import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { compileOcvCurves } from '../../src/bank/ocv-curves.js';
import { chargePathOpen, dischargePathOpen } from '../../src/bank/paths.js';
import { dutyCourse } from '../../src/duty/course.js';
import { driftNow } from '../../src/measures/drift.js';
import { closeAccount } from '../../src/simulation/accountant.js';
import type { Journey } from '../../src/simulation/advance.js';
import { runCourse } from '../../src/simulation/run-course.js';
import { startBank } from '../../src/simulation/simulate-instance.js';
import { evaluateWithin } from '../../src/simulation/step.js';
import type { EqualiserSettings, ModuleParameters } from '../../src/study/study.js';
import { type BankSketch, bankOf } from '../reference/bank-of.js';
import { bareModule, noLeads, straightTable } from '../reference/bare-module.js';
import { plainModule } from '../reference/plain-module.js';
import type { ReferenceBank } from '../reference/reference-bank.js';
import { studyOf } from '../reference/study-of.js';
import { BENCH, seconds } from './one-cell.js';
import { dice, randomBankFrom } from './random-bank.js';

const DEVICE: EqualiserSettings = {
  currentA: 5,
  startV: 0.02,
  fullV: 0.1,
  efficiency: 0.9,
  standbyA: 0,
  enableV: null,
};

/** What became of a bank. */
function runOf(
  bank: ReferenceBank,
  onStep: (journey: Journey, stepS: number) => void = () => undefined,
  toleranceFactor = 1,
) {
  const study = studyOf(bank);
  const named = new Map(bank.modules.flat().map((module) => [module.id, module]));
  const parts = { study, candidate: bank.candidate, ocv: compileOcvCurves(bank.ocvTables), toleranceFactor };
  const { journey, recorder, accountant, visits } = startBank(parts, named, { onStep });
  runCourse(journey, recorder, dutyCourse(study.duty, study.cycles), bank, undefined, visits);
  const { state, bank: built } = journey.kernel;
  return {
    charge: [...state.charge],
    account: closeAccount(accountant, journey),
    drift: driftNow(built, state),
    journey,
  };
}

/** Two modules of one cell each, U = 3 + z, 10 mOhm, at rest for so many seconds. */
function pairAtRest(
  durationS: number,
  [first, second]: readonly [number, number],
  equaliser: EqualiserSettings,
  sketch: Partial<ModuleParameters> = {},
  bank: Partial<BankSketch> = {},
) {
  const modules = [
    [bareModule('a', { arrivalCharge: [first], ...sketch }), bareModule('b', { arrivalCharge: [second], ...sketch })],
  ];
  return runOf(
    bankOf('pair', {
      modules,
      cycles: [[seconds(durationS)]],
      ocvTables: [straightTable(3, 1)],
      leads: noLeads(1).map((lead) => ({ ...lead, betweenOhm: 0.001 })),
      equaliser,
      ...bank,
    }),
  );
}

describe('an equaliser between two modules at rest', () => {
  it('takes a current that follows its law and the resistance of the modules, and delivers its share', () => {
    // By hand: open-circuit difference 0.08 V; d = 0.08 - 0.01 (1 + 0.9) i and i = 62.5 (d - 0.02), so
    // i = 62.5 x 0.06 / (1 + 62.5 x 0.019) = 1.7143 A. Over 10 s it falls by 10 / 6631.6 of it (see below).
    const { charge } = pairAtRest(10, [0.5, 0.58], DEVICE);
    const amps = ((62.5 * 0.06) / (1 + 62.5 * 0.019)) * (1 - 5 / 6631.6);
    expect((360_000 * (0.58 - charge[1])) / 10).toBeCloseTo(amps, 4);
    expect((360_000 * (charge[0] - 0.5)) / 10).toBeCloseTo(0.9 * amps, 4);
  });

  it('works the other way round too', () => {
    const [up, down] = [pairAtRest(3600, [0.5, 0.58], DEVICE), pairAtRest(3600, [0.58, 0.5], DEVICE)];
    expect(down.charge[0]).toBeCloseTo(up.charge[1], 9);
    expect(down.charge[1]).toBeCloseTo(up.charge[0], 9);
  });

  it('brings them together exponentially as far as its start', () => {
    // By hand: the excess x = U_b - U_a - 0.02 falls by 1.9 i / 360000 V/s with i = 62.5 x / (1 + 62.5 x 0.019), so
    // tau = 360000 (1 + 1.1875) / (1.9 x 62.5) = 6631.6 s.
    const tauS = (360_000 * (1 + 62.5 * 0.019)) / (1.9 * 62.5);
    // A step may leave 5e-5 of a cell.
    for (const durationS of [2000, tauS, 40_000]) {
      const { charge } = pairAtRest(durationS, [0.5, 0.58], DEVICE);
      expect(charge[1] - charge[0]).toBeCloseTo(0.02 + 0.06 * Math.exp(-durationS / tauS), 5);
    }
  });

  it('gives its greatest current beyond the stated difference, then less', () => {
    // By hand: 0.3 V less 0.019 x 5 A leave 0.205 V, beyond 0.1 V until the open-circuit difference is 0.195 V: after
    // 0.105 x 360000 / 9.5 s = 3978.9 s; from there exponentially.
    const limitedS = (0.105 * 360_000) / 9.5;
    const early = pairAtRest(3000, [0.4, 0.7], DEVICE);
    expect(0.7 - early.charge[1]).toBeCloseTo((5 * 3000) / 360_000, 8);
    const tauS = (360_000 * (1 + 62.5 * 0.019)) / (1.9 * 62.5);
    const late = pairAtRest(limitedS + tauS, [0.4, 0.7], DEVICE);
    expect(late.charge[1] - late.charge[0]).toBeCloseTo(0.02 + 0.175 * Math.exp(-1), 5);
  });

  it('does nothing within its start, and draws its standby from both', () => {
    const idle = pairAtRest(3600, [0.5, 0.515], { ...DEVICE, standbyA: 0.1 });
    expect(idle.charge[0]).toBeCloseTo(0.5 - 0.001, 9);
    expect(idle.charge[1]).toBeCloseTo(0.515 - 0.001, 9);
    expect(idle.account.equaliserAh).toBe(0);
    expect(idle.account.equaliserWh).toBeCloseTo(0.1 * (3.5 + 3.515 - 0.001 - 0.002), 4);
  });

  it('waits for the bank voltage that enables it', () => {
    const waiting = pairAtRest(3600, [0.5, 0.58], { ...DEVICE, enableV: 7.2 });
    expect(waiting.charge).toEqual([0.5, 0.58]);
    expect(pairAtRest(3600, [0.5, 0.58], { ...DEVICE, enableV: 7 }).charge[1]).toBeLessThan(0.579);
  });

  it('rests while a path of one of its modules is open', () => {
    const open = pairAtRest(
      3600,
      [0.5, 0.58],
      { ...DEVICE, standbyA: 0.1 },
      { overVoltageV: 3.55, overVoltageReleaseV: 3 },
    );
    // By hand: at work for the 2 s of delay of the over-voltage trip, 1.71 A + 0.1 A.
    expect((0.58 - open.charge[1]) * 360_000).toBeCloseTo(2 * 1.8143, 1);
  });

  it('books what it moved and lost', () => {
    const { charge, account } = pairAtRest(7200, [0.5, 0.58], DEVICE);
    const takenAh = 100 * (0.58 - charge[1]);
    // The account looks at two points of every step.
    expect(account.equaliserAh / takenAh).toBeCloseTo(1, 4);
    expect(account.equaliserCounterAh).toBe(0);
    // Law: at rest the modules lose what the device loses, and the heat of their resistances, which is that of the currents.
    // The bus current is the small rest of what its modules and devices carry, 7 Wh here.
    expect(account.inWh + account.outWh).toBeLessThan(1e-4 * 7);
    const tauS = (360_000 * (1 + 62.5 * 0.019)) / (1.9 * 62.5);
    const peakA = (62.5 * 0.06) / (1 + 62.5 * 0.019);
    const heatWh = (0.01 * 1.81 * peakA ** 2 * (tauS / 2) * (1 - Math.exp((-2 * 7200) / tauS))) / 3600;
    expect(account.equaliserWh).toBeCloseTo(-account.storedGainWh - heatWh, 3);
  });
});

/** Strings of bare modules of two cells each, unlike in charge and resistance, worked hard for some hours. */
function workedHard(rolls: readonly number[], wiring: 'strings' | 'cross-linked', efficiency: number): ReferenceBank {
  let next = 0;
  const between = (low: number, high: number): number => low + (high - low) * (rolls[next++ % rolls.length] ?? 0);
  const [strings, positions] = [2, 2 + Math.floor(between(0, 2.999))];
  const modules = Array.from({ length: strings }, (_, s) =>
    Array.from({ length: positions }, (_, p) =>
      bareModule(`m${s}${p}`, {
        capacityAh: [between(90, 110), between(90, 110)],
        resistanceOhm: [0.001, 0.001],
        leakageA: [0, 0],
        efficiency: [1, 1],
        arrivalCharge: [between(0.4, 0.6), between(0.4, 0.6)],
        pathResistanceOhm: between(0.002, 0.008),
      }),
    ),
  );
  return bankOf('worked', {
    modules,
    wiring,
    linkOhm: between(0.0005, 0.005),
    leads: modules.map(() => ({ negativeOhm: between(0.0002, 0.001), betweenOhm: 0.0004, positiveOhm: 0.0006 })),
    charger: { ...BENCH, limitA: 60, absorptionV: 7.1 * positions },
    ocvTables: [straightTable(3, 1)],
    equaliser: {
      currentA: between(1, 10),
      startV: between(0, 0.05),
      fullV: between(0.06, 0.3),
      efficiency,
      standbyA: between(0, 0.05),
      enableV: between(0, 1) < 0.5 ? null : 7 * positions,
    },
    cycles: [
      [
        seconds(between(600, 5000), { loadW: between(50, 400) }),
        seconds(between(600, 5000)),
        seconds(between(600, 5000), { chargeW: null }),
        seconds(between(600, 5000), { loadA: between(5, 50) }),
      ],
    ],
  });
}

const rolls = fc.array(fc.double({ min: 0, max: 1, noNaN: true }), { minLength: 60, maxLength: 60 });

describe('a bank with equalisers', () => {
  it('obeys the laws of Kirchhoff and of its devices in every step', () => {
    const regions = new Set<number>();
    fc.assert(
      fc.property(rolls, fc.constantFrom('strings', 'cross-linked'), (rolled, wiring) => {
        runOf(
          workedHard(rolled, wiring, 0.9),
          (journey) => {
            const { kernel, work } = journey;
            const { bank, state, point } = kernel;
            const { equaliser } = bank;
            if (equaliser === null) throw new RangeError('no equaliser');
            const { settings } = equaliser;
            const J = point.currentA;
            const terminalV = J.map((amps, m) => point.emfV[m] + (bank.pathOhm[m] + 0.002) * amps);
            // What the devices drive, from the terminal voltages alone.
            const sourceA = J.map(() => 0);
            for (let string = 0; string < bank.strings; string++) {
              for (let p = 0; p + 1 < bank.positions; p++) {
                const [a, b] = [string * bank.positions + p, string * bank.positions + p + 1];
                const high = terminalV[b] > terminalV[a] ? b : a;
                const low = high === a ? b : a;
                const share = (terminalV[high] - terminalV[low] - settings.startV) / (settings.fullV - settings.startV);
                const amps = state.equaliserOn[0] * settings.currentA * Math.min(1, Math.max(0, share));
                sourceA[high] -= amps + settings.standbyA;
                sourceA[low] += settings.efficiency * amps - settings.standbyA;
                regions.add(amps === 0 ? 0 : share >= 1 ? 2 : 1);
              }
            }
            const leadA = J.map((amps, m) => amps - sourceA[m]);
            let bankA = 0;
            for (let string = 0; string < bank.strings; string++) {
              const first = string * bank.positions;
              let volts = 0;
              for (let m = first; m < first + bank.positions; m++) {
                volts += terminalV[m] + bank.wiring.chains[m].ohm * leadA[m];
                // In strings all leads of a string carry one current.
                if (wiring === 'strings') expect(Math.abs(leadA[m] - leadA[first])).toBeLessThan(1e-4);
              }
              expect(Math.abs(volts - work.endBankV)).toBeLessThan(1e-6);
              bankA += leadA[first];
            }
            expect(Math.abs(bankA - work.endBankA)).toBeLessThan(2e-4);
            // A region ends a little late: taken at a tenth of the stepper's tolerances.
          },
          0.1,
        );
      }),
      { seed: 141, numRuns: 40, endOnFailure: true },
    );
    // At rest, in proportion and at the limit.
    expect(regions.size).toBe(3);
  });

  it('keeps the balances of charge and energy', () => {
    fc.assert(
      fc.property(rolls, fc.constantFrom('strings', 'cross-linked'), (rolled, wiring) => {
        let heatJ = 0;
        let turnoverJ = 0;
        const { account, journey } = runOf(workedHard(rolled, wiring, 0.8), (moving, stepS) => {
          const { kernel, work } = moving;
          for (const theta of [0.5 - Math.sqrt(1 / 12), 0.5 + Math.sqrt(1 / 12)]) {
            evaluateWithin(kernel, work, theta);
            const { currentA, bankA, bankV } = kernel.point;
            turnoverJ += 0.5 * stepS * Math.abs(bankA * bankV);
            kernel.bank.pathOhm.forEach((ohm, m) => {
              heatJ += 0.5 * stepS * (ohm + 0.002) * currentA[m] ** 2;
            });
          }
          evaluateWithin(kernel, work, 1);
        });
        expect(journey.kernel.state.equaliserRegion.length).toBeGreaterThan(0);
        const leftWh =
          account.inWh - account.outWh - account.storedGainWh - account.wiringWh - account.equaliserWh - heatJ / 3600;
        expect(Math.abs(leftWh)).toBeLessThan((2e-4 * turnoverJ + 30) / 3600);
      }),
      { seed: 142, numRuns: 40, endOnFailure: true },
    );
  });

  it('with equal resistances never raises drift at rest above 95 % of charge', () => {
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: 0.95, max: 1, noNaN: true }), { minLength: 4, maxLength: 4 }),
        fc.double({ min: 0.5, max: 1, noNaN: true }),
        fc.double({ min: 0, max: 0.03, noNaN: true }),
        (charges, efficiency, startV) => {
          const driftAfter = (durationS: number): number => {
            const modules = [
              charges.map((z, p) => plainModule(`m${p}`, { arrivalCharge: [z, z, z, z], rest: { bleedA: 0 } })),
            ];
            const equaliser = { ...DEVICE, efficiency, startV, enableV: null };
            const bank = bankOf('rest', { modules, cycles: [[seconds(durationS)]], equaliser });
            return runOf(bank).drift.moduleAh ?? Number.NaN;
          };
          const start = 100 * (Math.max(...charges) - Math.min(...charges));
          let before = start;
          for (const hours of [0.1, 1, 10]) {
            const after = driftAfter(3600 * hours);
            expect(after).toBeLessThan(before + 1e-6);
            before = after;
          }
        },
      ),
      { seed: 143, numRuns: 25, endOnFailure: true },
    );
  });

  it('comes through trips, bleed and rectifiers of random banks with the energy accounted for', () => {
    let counted = 0;
    fc.assert(
      fc.property(dice, (rolled) => {
        const random = randomBankFrom(rolled);
        if (random.candidate.wiring === 'native' || (random.modules[0]?.length ?? 0) < 2) return;
        counted++;
        const bank = { ...random, candidate: { ...random.candidate, equaliser: { ...DEVICE, standbyA: 0.01 } } };
        let worstA = 0;
        const { charge, account } = runOf(bank, ({ kernel, work }) => {
          const { bank: built, state } = kernel;
          for (let m = 0; m < built.modules; m++) {
            if (chargePathOpen(built, state, m)) worstA = Math.max(worstA, work.lastA[m]);
            if (dischargePathOpen(built, state, m)) worstA = Math.max(worstA, -work.lastA[m]);
          }
        });
        expect(charge.every(Number.isFinite)).toBe(true);
        // As for banks without: nothing passes an open path but its leak, and what crosses zero within 10 ms.
        expect(worstA).toBeLessThan(5e-3);
        expect(account.equaliserCounterAh).toBeLessThanOrEqual(account.equaliserAh);
        expect(account.equaliserWh).toBeGreaterThanOrEqual(0);
      }),
      { seed: 144, numRuns: 60, endOnFailure: true },
    );
    expect(counted).toBeGreaterThan(15);
  });
});
