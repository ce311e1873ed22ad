import { describe, expect, it } from 'vitest';
import { read, studyOf, studyWith, studyWithStock } from './study-under-test.js';

const MODULES = 'modules: [[A1, A2], [A3, A4]]';

describe('a candidate', () => {
  it('has the levels of trade practice per four cells in series by default', () => {
    const candidate = studyOf(studyWith({})).candidates[0];
    expect(candidate?.charger).toEqual({
      limitA: 40,
      absorptionV: 28.4,
      tailA: 4,
      tailHoldS: 120,
      absorptionS: null,
      floatV: 27.2,
      restart: 'each-cycle',
      restartV: 26.4,
    });
    expect(candidate?.load).toEqual({ disconnectV: 23.2, disconnectDelayS: 10, reconnectV: 26 });
    expect(candidate).toMatchObject({ title: 'strings', linkOhm: 0, commissioning: 'as-received', bleed: null });
  });

  it('takes from the bank what it does not say itself, key by key', () => {
    const { candidates } = studyOf(
      studyWith({
        candidates: `  a: {wiring: strings, ${MODULES}, charger: {until: {tail_A: 2}}, load: {disconnect_V: null}}
  b: {wiring: cross-linked, ${MODULES}}`,
        more: 'bank: {link_mOhm: 2, charger: {absorption_V: 28.8, until: {tail_hold_s: 60, or_after_h: 2}, float_V: null}}\n',
      }),
    );
    expect(candidates[0]?.charger).toMatchObject({
      absorptionV: 28.8,
      tailA: 2,
      tailHoldS: 60,
      absorptionS: 7200,
      floatV: null,
    });
    expect(candidates[0]?.load.disconnectV).toBeNull();
    expect(candidates[0]?.linkOhm).toBe(0);
    expect(candidates[1]?.linkOhm).toBe(0.002);
  });

  it('halves the total of a string over its ends, and takes parts and strings one by one', () => {
    const leads = (written: string) =>
      studyOf(studyWith({ candidates: `  a: {wiring: strings, ${MODULES}, string_lead_mOhm: ${written}}` }))
        .candidates[0]?.leads;
    const ends = { negativeOhm: 0.00075, betweenOhm: 0, positiveOhm: 0.00075 };
    const parts = { negativeOhm: 0.0005, betweenOhm: 0.0004, positiveOhm: 0 };
    expect(leads('1.5')).toEqual([ends, ends]);
    expect(leads('{negative: 0.5, between: 0.4}')).toEqual([parts, parts]);
    expect(leads('[1.5, {negative: 0.5, between: 0.4}]')).toEqual([ends, parts]);
  });

  it('may differ in the bleed alone, key by key', () => {
    const bleed = (written: string) =>
      studyOf(studyWith({ candidates: `  a: {wiring: strings, ${MODULES}, bleed: ${written}}` })).candidates[0]?.bleed;
    expect(bleed('{rule: each}')).toEqual({ rule: 'each' });
    expect(bleed('{start_V: 3.5, stop_V: 3.4, current_mA: 100, delta_mV: 5, when: charging}')).toMatchObject({
      startV: 3.5,
      stopBelowStartV: expect.closeTo(0.1, 12),
      currentA: 0.1,
      deltaV: 0.005,
      when: 'charging',
    });
  });

  it('may be any bank from 1S1P to 4S8P, of modules of 4, 8 or 16 cells', () => {
    const ids = (prefix: string) => Array.from({ length: 32 }, (_, index) => `${prefix}${index}`);
    for (const cells of [4, 8, 16]) {
      const stock = [`modules: [${ids('M').join(', ')}]`, 'rated_Ah: 100', `cells_in_series: ${cells}`];
      const strings = Array.from(
        { length: 8 },
        (_, s) =>
          `[${ids('M')
            .slice(4 * s, 4 * s + 4)
            .join(', ')}]`,
      );
      const { candidates } = studyOf(`motleybank: 1
stock: {house: {${stock.join(', ')}}}
duty: {phases: [{rest_h: 1}]}
candidates:
  least: {wiring: strings, modules: [[M0]]}
  most: {wiring: cross-linked, modules: [${strings.join(', ')}]}
`);
      expect(candidates[1]?.strings).toHaveLength(8);
      expect(candidates[1]?.charger.absorptionV).toBeCloseTo(14.2 * cells, 9);
      expect(candidates[0]?.charger.absorptionV).toBeCloseTo((14.2 * cells) / 4, 9);
    }
  });
});

describe('acceptance lines', () => {
  it('take the statistic that judges a loss unless they name one', () => {
    const { acceptance } = studyOf(
      studyWith({
        more: `acceptance:
  - {measure: load_lost, at_most_percent: 6}
  - {measure: lost_capacity, at_most_percent: 10}
  - {measure: usable_capacity, at_least_Ah: 150}
  - {measure: drift_growth, statistic: mean, at_most_percent_per_month: 0.5}
`,
      }),
    );
    expect(acceptance).toEqual([
      { measure: 'load_lost', statistic: 'share_of_banks', bound: 'at-most', limit: 6 },
      { measure: 'lost_capacity', statistic: 'percentile_95', bound: 'at-most', limit: 10 },
      { measure: 'usable_capacity', statistic: 'percentile_5', bound: 'at-least', limit: 150 },
      { measure: 'drift_growth', statistic: 'mean', bound: 'at-most', limit: 0.5 },
    ]);
  });
});

describe('warnings', () => {
  const warningsOf = (text: string, files = {}): readonly string[] => {
    const result = read(text, files);
    return result.kind === 'read' ? result.warnings : ['refused'];
  };

  it('tell of a release at or below float plus 20 mV', () => {
    // 27.2 V over 8 cells is 3.400 V; a release of 3.42 V lies at 20 mV above it, one of 3.43 V beyond.
    const at = (release: number) =>
      warningsOf(studyWithStock(['rated_Ah: 100', `bms: {over_voltage: {release_V: ${release}}}`]));
    expect(at(3.42).join()).toMatch(
      /stock house: the over-voltage release, 3.42 V per cell, lies at or below float, 3.4 V/,
    );
    expect(at(3.43).join()).not.toMatch(/release/);
  });

  it('tell of an absorption above the sum of the thresholds', () => {
    const at = (volts: number) => warningsOf(studyWith({ more: `bank: {charger: {absorption_V: ${volts}}}\n` })).join();
    expect(at(29.3)).toMatch(
      /absorption, 29.3 V, lies above the sum of the over-voltage thresholds of a string, 29.2 V/,
    );
    expect(at(29.2)).not.toMatch(/above the sum/);
  });

  it('tell that a profile has no short peaks', () => {
    const files = { 'p.csv': 'time_h,load_W,charge_W\n0,100,0\n' };
    expect(warningsOf(studyWith({ duty: 'duty: {profile: p.csv}' }), files).join()).toMatch(
      /short peaks are not tested/,
    );
  });
});

describe('the top of a study', () => {
  it('takes 0 as a seed, and a number and its text as the same one', () => {
    const seed = (written: string) => studyOf(studyWith({ more: `seed: ${written}\n` })).seed;
    expect([seed('0'), seed('4711'), seed('"4711"'), seed('first try')]).toEqual(['0', '4711', '4711', 'first try']);
  });

  it('compares with the first candidate unless told otherwise', () => {
    const candidates = `  b: {wiring: strings, ${MODULES}}\n  a: {wiring: native, ${MODULES}}`;
    expect(studyOf(studyWith({ candidates })).reference).toBe('b');
    expect(studyOf(studyWith({ candidates, more: 'reference: a\n' })).reference).toBe('a');
  });
});
