import { describe, expect, it } from 'vitest';
import { conductorOhm } from '../../src/study/conductor.js';
import { class5OhmPerM, copperOhmPerM, type Gauge, gaugeOhmPerM } from '../../src/study/copper.js';
import { studyOf, studyWith } from './study-under-test.js';

describe('copper', () => {
  it('has the resistivity of IEC 60028 at 20 degC and 0.393 % more per K', () => {
    // IEC 60028: 1 m of 1 mm2 has 17.241 mOhm at 20 degC, 0.00393 per K; at 75 degC by hand 17.241 x 1.21615.
    expect(copperOhmPerM(1, 20)).toBe(0.017241);
    expect(copperOhmPerM(35, 20)).toBeCloseTo(0.0004926, 9);
    expect(copperOhmPerM(1, 75)).toBeCloseTo(0.02096764, 8);
  });

  it.each([
    [4, 1.0105],
    [2, 0.6365],
    ['1/0', 0.4003],
    ['2/0', 0.3173],
    ['4/0', 0.1995],
  ] as [Gauge, number][])(
    'of AWG %s has the resistance of NEC chapter 9 table 8 at 75 degC, uncoated',
    (gauge, milliohms) => {
      // The table has three digits in Ohm per 1000 ft (304.8 m): equal in those.
      const perKft = (ohmPerM: number): string => (304.8 * ohmPerM).toPrecision(3);
      expect(perKft(gaugeOhmPerM(gauge, 75))).toBe(perKft(milliohms / 1000));
    },
  );

  it.each([
    [16, 1.21],
    [25, 0.78],
    [35, 0.554],
    [50, 0.386],
    [70, 0.272],
    [95, 0.206],
    [120, 0.161],
  ])(
    'of class 5 and %d mm2 has at most %d mOhm/m at 20 degC (IEC 60228), and more than its cross-section of solid copper',
    (area, milliohms) => {
      expect(class5OhmPerM(area, 20)).toBeCloseTo(milliohms / 1000, 12);
      expect(class5OhmPerM(area, 20)).toBeGreaterThan(copperOhmPerM(area, 20));
      expect(class5OhmPerM(area, 70)).toBeCloseTo((milliohms / 1000) * (1 + 50 * 0.00393), 12);
    },
  );

  it('has no class 5 of sizes between', () => {
    expect(class5OhmPerM(30, 20)).toBeUndefined();
  });
});

describe('a conductor', () => {
  it('has two joints of 0.05 mOhm unless it says otherwise', () => {
    // By hand: 2 m of 35 mm2 class 5 are 1.108 mOhm.
    const lead = { length_m: 2, area_mm2: 35, conductor: 'class-5' } as const;
    expect(conductorOhm(lead)).toBeCloseTo(0.001208, 12);
    expect(conductorOhm({ ...lead, joints: 0 })).toBeCloseTo(0.001108, 12);
    expect(conductorOhm({ ...lead, joints: 3, joint_mOhm: 0.1 })).toBeCloseTo(0.001408, 12);
    expect(conductorOhm({ mOhm: 0.7, joints: 1 })).toBeCloseTo(0.00075, 12);
  });
});

describe('leads and links of a candidate', () => {
  const MODULES = 'modules: [[A1, A2], [A3, A4]]';
  const only = (options: string, more = '') =>
    studyOf(studyWith({ candidates: `  a: {wiring: cross-linked, ${MODULES}, ${options}}`, more })).candidates[0];

  it('may be conductors: both leads of a string together, or its parts, or string by string', () => {
    // By hand: 1 m of 35 mm2 class 5 is 0.554 mOhm at either end, with 2 x 0.05 mOhm each.
    const ends = { negativeOhm: 0.000654, betweenOhm: 0, positiveOhm: 0.000654 };
    const whole = '{length_m: 2, area_mm2: 35, conductor: class-5}';
    const parts = '{between: {mOhm: 0.2, joints: 2}, positive: {length_m: 1, awg: 2/0, joints: 0}}';
    const [first, second] = only(`string_lead: [${whole}, ${parts}]`)?.leads ?? [];
    expect(first?.negativeOhm).toBeCloseTo(ends.negativeOhm, 12);
    expect(first?.positiveOhm).toBeCloseTo(ends.positiveOhm, 12);
    expect(first?.betweenOhm).toBe(0);
    expect(second?.negativeOhm).toBe(0);
    expect(second?.betweenOhm).toBeCloseTo(0.0003, 12);
    expect(second?.positiveOhm).toBe(gaugeOhmPerM('2/0', 20));
    expect(only(`string_lead: ${whole}`)?.leads[1]?.negativeOhm).toBeCloseTo(ends.negativeOhm, 12);
  });

  it('as conductors overrule ohms of the bank, and the other way round', () => {
    expect(only('link: {mOhm: 3, joints: 0}', 'bank: {link_mOhm: 2}\n')?.linkOhm).toBe(0.003);
    expect(only('link_mOhm: 2', 'bank: {link: {mOhm: 3}}\n')?.linkOhm).toBe(0.002);
    expect(only('charger: {float_V: null}', 'bank: {link: {mOhm: 3}}\n')?.linkOhm).toBeCloseTo(0.0031, 12);
    const leads = only('string_lead_mOhm: 2', 'bank: {string_lead: {mOhm: 9}}\n')?.leads;
    expect(leads?.[0]).toEqual({ negativeOhm: 0.001, betweenOhm: 0, positiveOhm: 0.001 });
  });

  it('leave the resolved candidate as it was without any of the newer options', () => {
    expect(Object.keys(only('link_mOhm: 1') ?? {})).toEqual([
      'key',
      'title',
      'wiring',
      'strings',
      'leads',
      'linkOhm',
      'charger',
      'load',
      'commissioning',
      'bleed',
    ]);
  });
});

describe('the take-off', () => {
  const takeOff = (options: string, more = '') =>
    studyOf(studyWith({ candidates: `  a: {wiring: strings, modules: [[A1], [A2], [A3]], ${options}}`, more }))
      .candidates[0]?.takeOff;

  it('is a star unless said otherwise, and has a segment less than strings', () => {
    expect(takeOff('take_off: equal-leads')).toBeUndefined();
    expect(takeOff('take_off: same-end')).toEqual({ kind: 'same-end', segmentOhm: [0.0001, 0.0001] });
    expect(takeOff('take_off: diagonal, bus_segment_mOhm: 0.5')).toEqual({
      kind: 'diagonal',
      segmentOhm: [0.0005, 0.0005],
    });
    expect(takeOff('take_off: diagonal, bus_segment: {mOhm: 0.4}')?.segmentOhm[0]).toBeCloseTo(0.0005, 12);
    // What the bank says of segments stands for nothing in a star.
    expect(takeOff('take_off: equal-leads', 'bank: {bus_segment_mOhm: 0.5}\n')).toBeUndefined();
  });
});
