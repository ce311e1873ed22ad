import { describe, expect, it } from 'vitest';
import { prepareCandidate, simulateInstance, simulateTwin } from '../../src/simulation/simulate-instance.js';
import { studyOf } from '../study/study-under-test.js';

/** Invented: two strings of two unlike modules, a load and a charger. */
const study = (candidates: string): string => `motleybank: 1
cycles: 6
stock:
  newer: {modules: [A1, A2], rated_Ah: 100}
  older: {modules: [B1, B2], rated_Ah: 100, grade: older}
duty: {phases: [{discharge_W: 900, for_h: 4}, {charge: to-full, at_most_h: 8}, {rest_h: 2}]}
candidates:
${candidates}`;

const MODULES = 'modules: [[A1, B1], [A2, B2]]';

/** The branches of the named wirings, node by node as the generator numbers them. Leads are 0.75 mOhm at either end. */
const written = (link: string, nodes = 'n, p, a0, a1, a2, a3, b0, b1, b2, b3'): string => `  own:
    wiring: custom
    ${MODULES}
    network:
      nodes: [${nodes}]
      bus_minus: n
      bus_plus: p
      branches:
        - {from: n, to: a0, mOhm: 0.75, joints: 0}
        - {module: A1, minus: a0, plus: a1}
        - {from: a1, to: a2, mOhm: 0.001, joints: 0}
        - {module: B1, minus: a2, plus: a3}
        - {from: a3, to: p, mOhm: 0.75, joints: 0}
        - {from: n, to: b0, mOhm: 0.75, joints: 0}
        - {module: A2, minus: b0, plus: b1}
        - {from: b1, to: b2, mOhm: 0.001, joints: 0}
        - {module: B2, minus: b2, plus: b3}
        - {from: b3, to: p, mOhm: 0.75, joints: 0}
${link}`;
const LEADS = 'string_lead_mOhm: {negative: 0.75, between: 0.001, positive: 0.75}';
const LINK = '        - {from: a1, to: b1, mOhm: 2, joints: 0}\n';

function outcomes(text: string, key: string): (number | null)[][] {
  const prepared = prepareCandidate(studyOf(text), key);
  return [simulateTwin(prepared), simulateInstance(prepared, 1), simulateInstance(prepared, 2)].map((row) => [
    ...row.values,
  ]);
}

describe('a custom wiring that writes out a named one', () => {
  it('has the same outcomes to the last bit: strings', () => {
    const text = study(`  named: {wiring: strings, ${MODULES}, ${LEADS}}\n${written('')}`);
    expect(outcomes(text, 'own')).toEqual(outcomes(text, 'named'));
  });

  it('has the same outcomes to the last bit: cross-linked', () => {
    const text = study(`  named: {wiring: cross-linked, ${MODULES}, ${LEADS}, link_mOhm: 2}\n${written(LINK)}`);
    expect(outcomes(text, 'own')).toEqual(outcomes(text, 'named'));
  });

  it('has the same outcomes but for rounding with its nodes in another order', () => {
    const turned = written(LINK, 'b3, b2, p, b1, b0, a3, a2, n, a1, a0');
    const text = study(`  named: {wiring: cross-linked, ${MODULES}, ${LEADS}, link_mOhm: 2}\n${turned}`);
    const named = outcomes(text, 'named');
    outcomes(text, 'own').forEach((row, index) => {
      row.forEach((value, column) => {
        const other = named[index][column];
        if (value === null || other === null) expect(value).toBe(other);
        else expect(Math.abs(value - other)).toBeLessThanOrEqual(1e-6 * Math.max(1, Math.abs(other)));
      });
    });
  });

  it('works on rails written out as on those of a take-off', () => {
    const rails = written(LINK)
      .replace('{from: n, to: b0, mOhm: 0.75', '{from: nn, to: b0, mOhm: 0.75')
      .replace('{from: b3, to: p, mOhm: 0.75', '{from: b3, to: pp, mOhm: 0.75')
      .replace('b3]', 'b3, nn, pp]');
    const segments = ['n, to: nn', 'p, to: pp']
      .map((ends) => `        - {from: ${ends}, mOhm: 0.5, joints: 0}\n`)
      .join('');
    const named = `  named: {wiring: cross-linked, ${MODULES}, ${LEADS}, link_mOhm: 2, take_off: same-end, bus_segment_mOhm: 0.5}`;
    const text = study(`${named}\n${rails}${segments}`);
    const expected = outcomes(text, 'named');
    outcomes(text, 'own').forEach((row, index) => {
      row.forEach((value, column) => {
        const other = expected[index][column];
        if (value === null || other === null) expect(value).toBe(other);
        else expect(Math.abs(value - other)).toBeLessThanOrEqual(1e-6 * Math.max(1, Math.abs(other)));
      });
    });
  });
});

describe('the take-off', () => {
  it('at one end loads the near string more than a star does, and is in the simulation key', () => {
    const one = (options: string): string =>
      study(`  named: {wiring: strings, modules: [[A1, A2], [B1, B2]], ${options}}`).replace(', grade: older', '');
    const sharing = (options: string): number => {
      const prepared = prepareCandidate(studyOf(one(options)), 'named');
      return prepared.twin.sharing.peakModuleA / (prepared.twin.sharing.peakBankA / 2);
    };
    expect(sharing('take_off: equal-leads')).toBeCloseTo(1, 9);
    expect(sharing('take_off: same-end, bus_segment_mOhm: 2')).toBeGreaterThan(1.05);
    expect(sharing('take_off: diagonal, bus_segment_mOhm: 2')).toBeCloseTo(1, 9);
  });
});
