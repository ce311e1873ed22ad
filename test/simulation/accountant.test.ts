import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { CLOSED, FORWARD } from '../../src/bank/network.js';
import { compileOcvCurves } from '../../src/bank/ocv-curves.js';
import { dutyCourse } from '../../src/duty/course.js';
import type { BankAccount } from '../../src/measures/bank-account.js';
import { closeAccount } from '../../src/simulation/accountant.js';
import type { Journey } from '../../src/simulation/advance.js';
import { runCourse } from '../../src/simulation/run-course.js';
import { startBank } from '../../src/simulation/simulate-instance.js';
import { busEnergyJ, evaluateWithin } from '../../src/simulation/step.js';
import type { ReferenceBank } from '../reference/reference-bank.js';
import { studyOf } from '../reference/study-of.js';
import { BENCH, CHARGE, DISCHARGE, oneCell, seconds } from './one-cell.js';
import { dice, randomBankFrom } from './random-bank.js';

/** Account of a bank's course. */
function accountOf(bank: ReferenceBank, onStep: (journey: Journey, stepS: number) => void = () => undefined) {
  const study = studyOf(bank);
  const named = new Map(bank.modules.flat().map((module) => [module.id, module]));
  const parts = { study, candidate: bank.candidate, ocv: compileOcvCurves(bank.ocvTables), toleranceFactor: 1 };
  const { journey, recorder, accountant, visits } = startBank(parts, named, { onStep });
  runCourse(journey, recorder, dutyCourse(study.duty, study.cycles), bank, undefined, visits);
  return closeAccount(accountant, journey);
}

const toFull = { ...CHARGE, endsWhenCharged: true };

describe('the account of energy', () => {
  it('has what a constant current gives through a straight line', () => {
    // By hand: U = 3.5 - 5e-5 t, 10 mOhm, 18 A for 1000 s: 18 x (3.32 x 1000 - 25) J out; the cells lose 5 Ah from 3.5 V to
    // 3.45 V: 18000 x 3.475 J.
    const account = accountOf(oneCell([[seconds(1000, DISCHARGE)]]));
    expect(account.outWh).toBeCloseTo((18 * (3320 - 25)) / 3600, 6);
    expect(account.inWh).toBe(0);
    expect(account.storedGainWh).toBeCloseTo((-18_000 * 3.475) / 3600, 6);
  });

  it('has the heat of leads while a current decays', () => {
    // By hand: 4 mOhm of leads make 14 mOhm, tau = 5040 s; held at 3.6 V from z = 0.5 the current begins with 100 mV / 14
    // mOhm = 7.143 A, so the heat is R I^2 tau / 2 (1 - exp(-2 t / tau)).
    const leads = [{ negativeOhm: 0.003, betweenOhm: 0, positiveOhm: 0.001 }];
    const charger = { ...BENCH, absorptionV: 3.6 };
    const account = accountOf(oneCell([[seconds(5040, CHARGE)]], {}, {}, { leads, charger }));
    expect(account.wiringWh).toBeCloseTo((0.004 * (0.1 / 0.014) ** 2 * 2520 * (1 - Math.exp(-2))) / 3600, 6);
  });

  it('agrees with Simpson and Gauss on random banks of every wiring', () => {
    let counted = 0;
    fc.assert(
      fc.property(dice, (rolls) => {
        const bank = randomBankFrom(rolls);
        const sums = { busJ: 0, turnoverJ: 0, wiringJ: 0 };
        let leapt = false;
        const account = accountOf(bank, (journey, stepS) => {
          const busJ = busEnergyJ(journey.kernel, journey.work);
          sums.busJ += busJ;
          sums.turnoverJ += Math.abs(busJ);
          // Gauss's two points.
          for (const theta of [0.5 - Math.sqrt(1 / 12), 0.5 + Math.sqrt(1 / 12)]) {
            evaluateWithin(journey.kernel, journey.work, theta);
            sums.wiringJ += 0.5 * stepS * heatByBalanceW(journey);
          }
          evaluateWithin(journey.kernel, journey.work, 1);
          leapt ||= journey.chatter.module >= 0;
        });
        if (leapt) return;
        counted++;
        // Of the voltage, which moves by up to 0.1 V a cell in a step, only its bow is missed: at most an eighth of that
        // where it turns sharply, which is the case in few steps.
        expect(Math.abs(3600 * (account.inWh - account.outWh) - sums.busJ)).toBeLessThan(1e-3 * sums.turnoverJ + 5);
        expect(Math.abs(3600 * account.wiringWh - sums.wiringJ)).toBeLessThan(0.005 * sums.wiringJ + 5);
      }),
      { seed: 131, numRuns: 30, endOnFailure: true },
    );
    expect(counted).toBeGreaterThan(20);
  });
});

/** Heat in leads and links, W: what goes into the bus and does not reach the posts of the modules. */
function heatByBalanceW({ kernel }: Journey): number {
  const { bank, state, point } = kernel;
  let watts = point.bankV * point.bankA;
  bank.wiring.chains.forEach((chain, i) => {
    if (state.conduction[i] !== CLOSED && state.conduction[i] !== FORWARD) return;
    const amps = point.currentA[i];
    watts -= amps * (point.effectiveV[i] + (bank.chainOhm[i] - chain.ohm) * amps);
  });
  return watts;
}

describe('the account of care', () => {
  it('has the longest time without a full charge and the charge that ended it', () => {
    // By hand: 3.7 V is reached after (3.7 - 3.68) / 5e-5 = 400 s, 9 A after 3600 s x ln 2 more, and the end 60 s later. A
    // second charge ends at the same voltage and current, so it puts back the 18 Ah taken out; it begins at 18 Ah less:
    // 18 A falls 11.149 Ah short of that, so 3.7 V is reached after 1770.2 s.
    const charger = { ...BENCH, absorptionV: 3.7, tailA: 9 };
    const cycles = [
      [seconds(9000, toFull)],
      [seconds(3600, DISCHARGE), seconds(36_000), seconds(9000, toFull)],
      [seconds(3600)],
    ];
    const account = accountOf(oneCell(cycles, {}, {}, { charger }));
    const firstAh = (18 * 400 + 3600 * (18 - 9 * Math.exp(-60 / 3600))) / 3600;
    const absorbedS = (0.02 - firstAh / 100 + 0.18) / 5e-5;
    expect(account.longestUnfilledS).toBeCloseTo(39_600 + absorbedS + 3600 * Math.LN2 + 60, 0);
    expect(account.toFullAh).toBeCloseTo(18, 3);
    expect(account.tripsToFull).toBe(0);
  });

  it('has no charge to full where the longest time lasts to the end', () => {
    const account = accountOf(oneCell([[seconds(600, DISCHARGE)], [seconds(7200)]]));
    expect([account.longestUnfilledS, account.toFullAh, account.tripsToFull]).toEqual([7800, null, null]);
  });

  it('has the time on the charger alone', () => {
    // By hand: 27 A less 9 A of load charge with 18 A, 3.518 V + 5e-5 t passes 3.55 V at 640 s, 5 s of delay; then the
    // charger feeds the load by itself.
    const account = accountOf(
      oneCell(
        [[seconds(900, { ...CHARGE, loadA: 9 })]],
        { overVoltageV: 3.55, overVoltageReleaseV: 3 },
        { overVoltageDelayS: 5 },
        { charger: { ...BENCH, limitA: 27 } },
      ),
    );
    expect(account.chargerOnlyS).toBeCloseTo(255, 1);
  });

  it('has the energy of bleed', () => {
    // By hand: 1 A from 3.5 V on a straight line, at rest for an hour: the charge falls by 1 %, the voltage by 10 mV; the
    // current of the bleed drops 1 mV more in the cell.
    const bleed = { rule: 'each', when: 'always', stopBelowStartV: 1, deltaV: 0.01 } as const;
    const account = accountOf(oneCell([[seconds(3600)]], { bleedA: 1, bleedStartV: 3.4 }, { bleed }));
    expect(account.bleedWh).toBeCloseTo(3.494, 2);
  });

  it('has the cells that were below 2 V', () => {
    const below = (durationS: number): BankAccount =>
      accountOf(oneCell([[seconds(durationS, DISCHARGE)]], { arrivalCharge: [-0.9] }));
    // By hand: 2.1 V less 18 mV less 5e-5 t passes 2 V at 1640 s.
    expect([below(1500).damagedCells, below(1800).damagedCells]).toEqual([0, 1]);
  });
});
