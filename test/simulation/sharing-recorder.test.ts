import { describe, expect, it } from 'vitest';
import { compileOcvCurves } from '../../src/bank/ocv-curves.js';
import { dutyCourse } from '../../src/duty/course.js';
import type { SharingFacts } from '../../src/measures/sharing.js';
import { runCourse } from '../../src/simulation/run-course.js';
import { beginBurstSharing, recordSharingLeap, sharingFacts } from '../../src/simulation/sharing-recorder.js';
import { startBank } from '../../src/simulation/simulate-instance.js';
import type { DutySegment, ModuleParameters, ModuleRatings } from '../../src/study/study.js';
import { bankOf } from '../reference/bank-of.js';
import { bareModule, noLeads, straightTable } from '../reference/bare-module.js';
import type { ReferenceBank } from '../reference/reference-bank.js';
import { studyOf } from '../reference/study-of.js';
import { BENCH, DISCHARGE, oneCell, seconds } from './one-cell.js';

const UNRATED: ModuleRatings = {
  continuousA: null,
  peakA: null,
  blockingV: null,
  mostInSeries: null,
  mostInParallel: null,
};

/** Facts of a bank's course; `leap` stands for that many times as much endless switching. */
function factsOf(bank: ReferenceBank, ratings: Partial<ModuleRatings> = {}, leap = 0): SharingFacts {
  const modules = bank.modules.map((string) =>
    string.map((module) => ({ ...module, ratings: { ...UNRATED, ...ratings } })),
  );
  const study = studyOf({ ...bank, modules });
  const named = new Map(modules.flat().map((module) => [module.id, module]));
  const parts = { study, candidate: bank.candidate, ocv: compileOcvCurves(bank.ocvTables), toleranceFactor: 1 };
  const { journey, recorder, sharing } = startBank(parts, named);
  beginBurstSharing(sharing);
  runCourse(journey, recorder, dutyCourse(study.duty, study.cycles), bank);
  if (leap > 0) recordSharingLeap(sharing, leap);
  const stated = modules.flat().map((module) => module.ratings);
  return sharingFacts(sharing, stated, bank.candidate.ratings ?? null);
}

/** Two cells side by side, U = 3 + z, 100 Ah. */
function pair(
  first: Partial<ModuleParameters>,
  second: Partial<ModuleParameters>,
  segment: DutySegment,
): ReferenceBank {
  const modules = [[bareModule('a', first)], [bareModule('b', second)]];
  return bankOf('pair', {
    modules,
    cycles: [[segment]],
    ocvTables: [straightTable(3, 1)],
    leads: noLeads(2),
    charger: BENCH,
  });
}

describe('the record of sharing at rest', () => {
  // Closed form of two batteries in parallel, derived by hand (agrees with Brand et al., J. Power Sources 334 (2016) 202):
  // 0.1 V over 20 mOhm are 5 A; tau = (R1 + R2) / alpha x Q / 2 = 1 h, so 5 (1 - 1/e) Ah move in the first hour.
  const facts = factsOf(pair({ arrivalCharge: [0.6] }, { arrivalCharge: [0.5] }, seconds(3600)));

  it('has voltage and current at joining', () => {
    expect(facts.joiningV).toBeCloseTo(0.1, 9);
    expect(facts.joiningA).toBeCloseTo(5, 6);
    expect(facts.peakModuleA).toBeCloseTo(5, 6);
    expect(facts.peakBankA).toBeLessThan(1e-3);
  });

  it('has the charge that circulates', () => {
    expect((facts.circulatingAs ?? 0) / 3600).toBeCloseTo(5 * (1 - Math.exp(-1)), 3);
    expect(facts.mostThroughputAs / facts.leastThroughputAs).toBeCloseTo(1, 9);
    // Mean square of 5 exp(-t) over an hour: 25 (1 - exp(-2)) / 2.
    expect(facts.rmsModuleA).toBeCloseTo(5 * Math.sqrt((1 - Math.exp(-2)) / 2), 2);
  });

  it('counts no charge as circulating while the bank works', () => {
    const working = factsOf(pair({ arrivalCharge: [0.6] }, { arrivalCharge: [0.5] }, seconds(3600, DISCHARGE)));
    expect(working.circulatingAs).toBe(0);
  });

  it('adds a leap in proportion', () => {
    const leapt = factsOf(pair({ arrivalCharge: [0.6] }, { arrivalCharge: [0.5] }, seconds(3600)), {}, 9);
    expect(leapt.elapsedS).toBeCloseTo(36_000, 6);
    expect(leapt.circulatingAs).toBeCloseTo(10 * (facts.circulatingAs ?? 0), 6);
    expect(leapt.rmsModuleA).toBeCloseTo(facts.rmsModuleA, 9);
  });
});

describe('the record of sharing under load', () => {
  // By hand: 18 A over 10 and 30 mOhm begin as 13.5 and 4.5 A. Closed form as above: tau = 0.04 / 1 x 50 Ah = 2 h,
  // dz = -0.18 (1 - exp(-t / tau)), I1 = 13.5 + dz / 0.04, so I1 is down to 13.4 A after 2 h x ln(0.18 / 0.176) = 161.8 s.
  const bank = pair({}, { pathResistanceOhm: 0.03 }, seconds(600, DISCHARGE));

  it('has the peak of the most loaded module against an equal share and its rating', () => {
    const facts = factsOf(bank, { peakA: 27 });
    expect(facts.peakModuleA).toBeCloseTo(13.5, 6);
    expect(facts.peakBankA).toBeCloseTo(18, 9);
    expect(facts.peakOfRating).toBeCloseTo(0.5, 6);
    expect(facts.aboveContinuousS).toBeNull();
  });

  it('has the time above the continuous rating', () => {
    expect(Math.abs((factsOf(bank, { continuousA: 13.4 }).aboveContinuousS ?? 0) - 161.8)).toBeLessThan(1);
    expect(factsOf(bank, { continuousA: 13.6 }).aboveContinuousS).toBe(0);
  });

  it('has throughputs that add up to that of the bank', () => {
    const { mostThroughputAs, leastThroughputAs } = factsOf(bank);
    expect(mostThroughputAs + leastThroughputAs).toBeCloseTo(18 * 600, 6);
  });
});

describe('the record of joining', () => {
  it('looks at equal positions too where strings are tied between their modules', () => {
    // By hand, U = 3 + z: strings of 0.6 + 0.4 and 0.4 + 0.6 are equal, their positions 0.2 V apart.
    const modules = [
      [0.6, 0.4],
      [0.4, 0.6],
    ].map((string, s) => string.map((z, p) => bareModule(`m${s}${p}`, { arrivalCharge: [z] })));
    const joiningV = (wiring: 'strings' | 'cross-linked') =>
      factsOf(
        bankOf('joined', {
          modules,
          cycles: [[seconds(1)]],
          ocvTables: [straightTable(3, 1)],
          leads: noLeads(2),
          charger: { ...BENCH, absorptionV: 9 },
          wiring,
        }),
      ).joiningV;
    expect(joiningV('strings')).toBeCloseTo(0, 12);
    expect(joiningV('cross-linked')).toBeCloseTo(0.2, 12);
  });
});

describe('the record of links', () => {
  it('has their largest current', () => {
    // By hand, two strings of two, 10 over 12 mOhm and mirrored, a link of 1 mOhm, 100 A: 54.166667 A and 8.333333 A at first.
    const ohms = [
      [0.01, 0.012],
      [0.012, 0.01],
    ];
    const modules = ohms.map((string, s) =>
      string.map((ohm, p) => bareModule(`m${s}${p}`, { pathResistanceOhm: ohm })),
    );
    const bank = bankOf('linked', {
      modules,
      cycles: [[seconds(600, { loadA: 100 })]],
      ocvTables: [straightTable(3, 1)],
      leads: noLeads(2),
      charger: { ...BENCH, absorptionV: 9 },
      wiring: 'cross-linked',
      linkOhm: 0.001,
    });
    const facts = factsOf(bank);
    expect(facts.peakModuleA).toBeCloseTo(54.166667, 5);
    expect(facts.peakLinkA).toBeCloseTo(8.333333, 5);
    expect(facts.rmsLinkA).toBeLessThan(8.333333);
    expect(facts.rmsLinkA).toBeGreaterThan(0);
  });
});

describe('the record of open paths', () => {
  it('has the whole voltage of a cell that is cut off under load', () => {
    // By hand: under-voltage at 642 s, with z = 0.5 - 18 x 642 / 360000; the load pulls the dead bus to 0 V.
    const under = { underVoltageV: 3.45, underVoltageReleaseV: 9 };
    const bank = oneCell([[seconds(1200, DISCHARGE)]], under);
    const facts = factsOf(bank, { blockingV: 34.679 });
    expect(facts.blockingV).toBeCloseTo(3.4679, 4);
    expect(facts.blockingOfRating).toBeCloseTo(0.1, 5);
    expect(facts.joiningV).toBeNull();
  });

  it('is absent where none was open', () => {
    expect(factsOf(oneCell([[seconds(60, DISCHARGE)]])).blockingV).toBeNull();
  });
});
