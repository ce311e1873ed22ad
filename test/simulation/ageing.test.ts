import { describe, expect, it } from 'vitest';
import { fadeAfter } from '../../src/bank/fade-after.js';
import { calendarFactor } from '../../src/bank/naumann-2018.js';
import { cycleFactor } from '../../src/bank/naumann-2020.js';
import { compileOcvCurves } from '../../src/bank/ocv-curves.js';
import { dutyCourse } from '../../src/duty/course.js';
import { closeAccount } from '../../src/simulation/accountant.js';
import type { Journey } from '../../src/simulation/advance.js';
import type { Ageing } from '../../src/simulation/ageing.js';
import { runCourse } from '../../src/simulation/run-course.js';
import { startBank } from '../../src/simulation/simulate-instance.js';
import type { ModuleAgeing } from '../../src/study/ageing-settings.js';
import type { DutySegment, ModuleParameters } from '../../src/study/study.js';
import { bankOf } from '../reference/bank-of.js';
import { bareModule, noLeads, straightTable } from '../reference/bare-module.js';
import type { ReferenceBank } from '../reference/reference-bank.js';
import { studyOf } from '../reference/study-of.js';
import { BENCH, CHARGE, DISCHARGE, oneCell, seconds } from './one-cell.js';

const HOUR_S = 3600;
const WANG: ModuleAgeing = { law: 'wang-2011', initialFadeFraction: 0, resistanceGrowth: 5, rate: 1 };
const NAUMANN: ModuleAgeing = { ...WANG, law: 'naumann' };

const at = (celsius: number, segment: DutySegment): DutySegment => ({ ...segment, ambientK: celsius + 273.15 });

/** One hour of 18 A out, one at rest, one of 18 A in: 18 of 100 Ah from half full and back. */
const TO_AND_FRO = [seconds(HOUR_S, DISCHARGE), seconds(HOUR_S), seconds(HOUR_S, CHARGE)];

/** Takes a bank through its cycles, so many times over. */
function aged(
  bank: ReferenceBank,
  cycles = bank.cycles.length,
  onCycle: (cycle: number, journey: Journey) => void = () => undefined,
  onStep: (journey: Journey, stepS: number) => void = () => undefined,
) {
  const study = { ...studyOf(bank), cycles };
  const named = new Map(bank.modules.flat().map((module) => [module.id, module]));
  const parts = { study, candidate: bank.candidate, ocv: compileOcvCurves(bank.ocvTables), toleranceFactor: 1 };
  const { journey, recorder, accountant, visits } = startBank(parts, named, { onStep });
  const course = dutyCourse(study.duty, cycles);
  runCourse(journey, recorder, course, bank, (cycle) => onCycle(cycle, journey), visits);
  const { ageing } = journey;
  if (ageing === null) throw new RangeError('nothing ages');
  return { journey, ageing, account: closeAccount(accountant, journey) };
}

const cellOf = (
  ageing: ModuleAgeing,
  cycles: readonly (readonly DutySegment[])[],
  rest: Partial<ModuleParameters> = {},
) => oneCell(cycles, { ageing, ...rest });

describe('a cell that ages', () => {
  it('is used as its cycle says', () => {
    // By hand: 36 Ah both ways are 0.18 cycles, 0.396 Ah of a cell of 2.2 Ah: 4.15915 % (0.396 / 1000)^0.552 = 0.055072 %.
    expect(1 - aged(cellOf(WANG, [TO_AND_FRO])).ageing.left[0]).toBeCloseTo(5.5072e-4, 8);
    // By hand: mean charge (0.41 + 0.32 + 0.41) / 3 = 0.38, depth 0.18, 18 A into 100 Ah; 3 h.
    const [fade] = aged(cellOf(NAUMANN, [TO_AND_FRO])).ageing.fade;
    expect(fade?.calendar).toBeCloseTo(fadeAfter(0, calendarFactor(298.15, 0.38), 0.5, 3 * HOUR_S), 9);
    expect(fade?.cycle).toBeCloseTo(cycleFactor(0.18, 0.18) * Math.sqrt(0.18), 9);
  });

  it('counts the temperature of its module, mean over the cycle', () => {
    // By hand: 2 h at 15 degC and 1 h at 60 degC are 30 degC on average.
    const [out, rest, back] = TO_AND_FRO;
    const day = [[at(15, out), at(60, rest), at(15, back)]];
    const mean = aged(cellOf(WANG, [TO_AND_FRO.map((segment) => at(30, segment))])).ageing.left[0];
    expect(aged(cellOf(WANG, day)).ageing.left[0]).toBeCloseTo(mean, 9);
    const warmer = aged(cellOf(WANG, [TO_AND_FRO], { temperatureOffsetK: 5 })).ageing.left[0];
    expect(warmer).toBeCloseTo(mean, 9);
  });

  it('starts on its curve where it is said to stand', () => {
    // By hand: 10 % gone, 100 Ah left of 111.1: 0.162 cycles, 0.3564 Ah of 2.2. The rate of the curve at 10 % is that of
    // 0.552 f / x; x' = 1000 (10 / 4.15915)^(1 / 0.552) = 4900.1 Ah, so 0.552 x 0.1 x 0.3564 / 4900.1 = 4.0149e-6 of the
    // new cell, 4.461e-6 of what is left.
    const { ageing } = aged(cellOf({ ...WANG, initialFadeFraction: 0.1 }, [TO_AND_FRO]));
    expect(1 - ageing.left[0]).toBeCloseTo(4.461e-6, 9);
  });

  it('loses nothing by cooling and never gains', () => {
    const cycles = [60, 60, 60, 0, -20, 0, 25].map((celsius) => TO_AND_FRO.map((segment) => at(celsius, segment)));
    const path: number[] = [];
    for (const law of [WANG, NAUMANN]) {
      const { ageing } = aged(cellOf(law, cycles), cycles.length, (_, journey) =>
        path.push(journey.ageing?.left[0] ?? 0),
      );
      path.push(ageing.left[0], 1);
    }
    path.forEach((left, k) => {
      if (path[k + 1] !== 1 && k + 1 < path.length) expect(path[k + 1]).toBeLessThan(left);
    });
  });

  it('has ten years on the shelf in its calendar alone', () => {
    // Naumann et al. 2018 (constants from memory): a year of 365 days at half charge takes 0.042516, ten sqrt(10) times it.
    const day = [seconds(24 * HOUR_S)];
    const { ageing } = aged(cellOf(NAUMANN, [day]), 3650);
    expect(1 - ageing.left[0]).toBeCloseTo(0.042516 * Math.sqrt(10), 5);
  });

  it('drops more at its cells only', () => {
    // By hand: as half charged, 9 mOhm of path and 1 mOhm (1 + 5 (1 - x)) of the cell at 18 A.
    const bank = cellOf({ ...WANG, rate: 100 }, [TO_AND_FRO, [seconds(1e-6, DISCHARGE)]]);
    let left = 1;
    let charge = 0;
    let busV = 0;
    const onCycle = (_: number, { ageing, kernel }: Journey): void => {
      left = ageing?.left[0] ?? 1;
      [charge] = kernel.state.charge;
    };
    aged(bank, 2, onCycle, ({ kernel }) => {
      busV = kernel.bus.bankV;
    });
    expect(left).toBeCloseTo(1 - 0.055072, 5);
    expect(busV).toBeCloseTo(3 + charge - 18 * (0.009 + 0.001 * (1 + 5 * (1 - left))), 8);
  });
});

/** Two strings of two unlike modules of one cell that leak and lose a little, with nothing that bleeds. */
function unlike(ageing: ModuleAgeing, sketch: Partial<Parameters<typeof bankOf>[1]> = {}): ReferenceBank {
  const module = (id: string, capacityAh: number, rate: number): ModuleParameters =>
    bareModule(id, {
      capacityAh: [capacityAh],
      resistanceOhm: [0.001],
      leakageA: [0.01],
      efficiency: [0.999],
      standbyA: 0.005,
      ageing: { ...ageing, rate },
    });
  return bankOf('unlike', {
    modules: [
      [module('a1', 100, 20), module('a2', 98, 30)],
      [module('b1', 95, 10), bareModule('b2', { resistanceOhm: [0.001] })],
    ],
    cycles: [TO_AND_FRO.map((segment) => ({ ...segment, loadA: 2 * segment.loadA }))],
    ocvTables: [straightTable(3, 1)],
    leads: noLeads(2),
    charger: { ...BENCH, limitA: 36, absorptionV: 9 },
    ...sketch,
  });
}

describe('a bank that ages', () => {
  it.each(['strings', 'cross-linked', 'native'] as const)('keeps its balance of charge as %s', (wiring) => {
    // Charge at the end = at the start + what passed the cells and what they lost by themselves - what went with capacity.
    let passedAs = 0;
    let startAs = 0;
    const onCycle = (cycle: number, { kernel }: Journey): void => {
      if (cycle === 1) startAs = chargeAs(kernel);
    };
    const { journey, ageing } = aged(unlike(NAUMANN, { wiring }), 30, onCycle, ({ kernel, work }, stepS) => {
      const { chargePerAs, chargePerS, chainOfCell, bank } = kernel;
      for (let c = 0; c < bank.cells; c++) {
        passedAs += bank.capacityAs[c] * (chargePerAs[c] * work.endAs[chainOfCell[c]] + chargePerS[c] * stepS);
      }
    });
    const fadedAs = ageing.fadedAs.reduce((sum, charge) => sum + charge, 0);
    expect(fadedAs).toBeGreaterThan(36_000);
    // Of some 700000 As; a sum of some thousand steps rounds by far less than 1e-9 of that.
    expect(Math.abs(chargeAs(journey.kernel) - startAs - passedAs + fadedAs)).toBeLessThan(7e-4);
  });

  it('leaves alone what is not said to age', () => {
    const { ageing } = aged(unlike(NAUMANN), 5);
    expect(ageing.left[3]).toBe(1);
    expect(ageing.left[1]).toBeLessThan(ageing.left[0]);
    expect(ageing.left[0]).toBeLessThan(ageing.left[2]);
  });

  it('has at any time what it would have under a longer horizon', () => {
    // Two and three years of a small bank, day by day.
    const day = [...TO_AND_FRO.map((segment) => ({ ...segment, loadA: 2 * segment.loadA })), seconds(21 * HOUR_S)];
    const smooth = { ...straightTable(3, 1), interpolation: 'monotone' as const };
    const bank = unlike(NAUMANN, { cycles: [day], ocvTables: [smooth] });
    const seen: number[][] = [[], []];
    [730, 1095].forEach((cycles, k) => {
      aged(bank, cycles, (cycle, { ageing, kernel }) => {
        if (cycle === 366 || cycle === 730) seen[k]?.push(...(ageing?.left ?? []), ...kernel.state.charge);
      });
    });
    expect(seen[0]).toHaveLength(16);
    expect(seen[1]).toEqual(seen[0]);
  });

  it('counts the energy that has gone with its capacity', () => {
    // By hand: U = 3 + z, so Q (3 z + z^2 / 2) is in a cell.
    const bank = cellOf({ ...WANG, rate: 100 }, [TO_AND_FRO]);
    const { account, ageing, journey } = aged(bank, 5);
    const [z] = journey.kernel.state.charge;
    const heldWh = (charge: number, capacityAh: number): number => capacityAh * (3 * charge + charge ** 2 / 2);
    expect(ageing.left[0]).toBeLessThan(0.9);
    expect(account.storedGainWh).toBeCloseTo(heldWh(z, 100 * ageing.left[0]) - heldWh(0.5, 100), 8);
  });

  it('is charged on the bench as it is now', () => {
    // By hand: 3.9 V through R = 9 + 1 + 1 (1 + 50 (1 - x)) mOhm, bench leads included; the tail of 2 A is held for 60 s in
    // which the current decays with R Q / (1 V): z = 0.9 - 2 A R exp(-60 s / (R Q)).
    const charger = { ...BENCH, absorptionV: 3.9 };
    const settings = { ...WANG, rate: 100, resistanceGrowth: 50 };
    const bank = oneCell([TO_AND_FRO], { ageing: settings }, {}, { charger, upkeep: { everyCycles: 1 } });
    let charge = 0;
    let left = 1;
    aged(bank, 2, (cycle, { kernel, ageing }: Journey) => {
      if (cycle === 2) [charge, left] = [kernel.state.charge[0], ageing?.left[0] ?? 1];
    });
    const ohm = 0.01 + 0.001 * (1 + 50 * (1 - left));
    expect(left).toBeCloseTo(1 - 0.055072, 5);
    expect(charge).toBeCloseTo(0.9 - 2 * ohm * Math.exp(-60 / (ohm * 360_000 * left)), 5);
  });
});

function chargeAs({ bank, state }: Journey['kernel']): number {
  return state.charge.reduce((sum, charge, c) => sum + charge * bank.capacityAs[c], 0);
}

/** So that a bank without ageing is known to have none. */
const nothingAges = (bank: ReferenceBank): Ageing | null => {
  const named = new Map(bank.modules.flat().map((module) => [module.id, module]));
  const parts = { study: studyOf(bank), candidate: bank.candidate, ocv: compileOcvCurves(bank.ocvTables) };
  return startBank({ ...parts, toleranceFactor: 1 }, named).journey.ageing;
};

describe('a bank of which nothing is said', () => {
  it('does not age', () => {
    expect(nothingAges(oneCell([TO_AND_FRO]))).toBeNull();
  });
});
