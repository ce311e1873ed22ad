import { describe, expect, it } from 'vitest';
import { compileOcvCurves } from '../../src/bank/ocv-curves.js';
import { dutyCourse } from '../../src/duty/course.js';
import type { CycleLog } from '../../src/measures/cycle-log.js';
import { sampleBankFactors } from '../../src/sampling/bank-factors.js';
import { sampleModules } from '../../src/sampling/sample-modules.js';
import { runCourse } from '../../src/simulation/run-course.js';
import { prepareCandidate, simulateInstance, startBank } from '../../src/simulation/simulate-instance.js';
import { studyOf } from '../study/study-under-test.js';

/** Years of a coarse day: six hours of load, charge to full, a night's rest; cold in a fifth of them. Invented. */
const study = (cycles: number, modules = '[[A], [B]]', more = '') =>
  studyOf(`motleybank: 1
instances: 2
cycles: ${cycles}
stock:
  house: {grade: older, modules: [A, B, C, D], rated_Ah: 100, bms: {charge_refusal: {below_degC: -5}}}
duty:
  parts:
    - {name: warm, repeat: 292, phases: [{discharge_W: 150, for_h: 6}, {charge: to-full, at_most_h: 10}, {rest_h: 8}]}
    - name: cold
      repeat: 73
      ambient_degC: -4
      phases: [{discharge_W: 150, for_h: 6}, {charge: to-full, at_most_h: 10}, {rest_h: 8, ambient_degC: -8}]
  load_factor: {nominal: 1, bank_sd_percent: 5}
candidates:
  own: {wiring: strings, modules: ${modules}${more}}
`);

/** Everything that is kept for every cycle of one sampled bank. */
function logOf(cycles: number, modules: string, more: string): CycleLog {
  const read = study(cycles, modules, more);
  const parts = {
    study: read,
    candidate: read.candidates[0],
    ocv: compileOcvCurves(read.ocvTables),
    toleranceFactor: 1,
  };
  const { journey, recorder, visits } = startBank(parts, sampleModules(read, 1));
  runCourse(journey, recorder, dutyCourse(read.duty, cycles), sampleBankFactors(read, 1), undefined, visits);
  return recorder.log;
}

describe('ten years of days', () => {
  it('are gone through to their end with finite values', () => {
    const prepared = prepareCandidate(study(3650), 'own');
    const { values } = simulateInstance(prepared, 1);
    expect(values.filter((value) => value !== null && !Number.isFinite(value))).toEqual([]);
    const { log } = prepared.twin;
    expect(log.cycles).toBe(3650);
    // A day of phases ends when the bank is full, so it is shorter than 24 h, and longer than load and rest.
    expect(log.elapsedS / 3600 / 3650).toBeGreaterThan(14);
    expect(log.elapsedS / 3600 / 3650).toBeLessThan(24);
  });
});

describe('the first year', () => {
  it.each([
    ['strings beside each other', '[[A], [B]]', ''],
    ['strings of two with a device and visits', '[[A, B], [C, D]]', ', equaliser: {}, upkeep: {every_cycles: 90}'],
  ])('is the same to the last bit whatever the horizon, %s', (_, modules, more) => {
    const [year, both] = [365, 730].map((cycles) => logOf(cycles, modules, more));
    const kept = Object.entries(year).filter(([, values]) => ArrayBuffer.isView(values));
    expect(kept.length).toBeGreaterThan(15);
    for (const [name, values] of kept) {
      const long: Float64Array | Uint8Array = Object.getOwnPropertyDescriptor(both, name)?.value;
      expect([name, long.length]).toEqual([name, 730]);
      // Object.is tells NaN from nothing and 0 from -0.
      expect([name, [...long.subarray(0, 365)]]).toEqual([name, [...values]]);
    }
    // The second year is not the first one over again.
    expect(both.cellDriftAh[729]).not.toBe(both.cellDriftAh[364]);
  });
});
