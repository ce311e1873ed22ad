import { createHash } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { canonicalJson } from '../../src/study/canonical-json.js';
import { simulationContent, simulationKey } from '../../src/study/simulation-key.js';
import type { Study } from '../../src/study/study.js';
import { studyOf, studyWith } from './study-under-test.js';

const CANDIDATES = `  strings: {wiring: strings, modules: [[A1, A2]]}
  linked: {wiring: cross-linked, modules: [[A1, A2], [A3, A4]]}`;

function keyOf(study: Study, name = 'strings'): string {
  const candidate = study.candidates.find(({ key }) => key === name);
  if (candidate === undefined) throw new Error(`no candidate ${name}`);
  return simulationKey(study, candidate);
}

const base = studyWith({ candidates: CANDIDATES });
const key = keyOf(studyOf(base));

describe('the simulation key', () => {
  it.each([
    ['a title', `${base}title: another\n`],
    ['more instances', `${base}instances: 2048\n`],
    ['another confidence', `${base}confidence_percent: 90\n`],
    ['an acceptance line', `${base}acceptance: [{measure: load_lost, at_most_percent: 1}]\n`],
    ['another candidate less', studyWith({ candidates: '  strings: {wiring: strings, modules: [[A1, A2]]}' })],
    ['a title of the candidate', base.replace('modules: [[A1, A2]]}', 'modules: [[A1, A2]], title: plain}')],
    ['a table that is not used', `${base}ocv: {other: {charge_percent: [0, 100], V: [2.5, 3.6]}}\n`],
    ['another module in the stock', base.replace('A3, A4]', 'A3, A4, A5]')],
    ['a default written out', `${base}block: 32\n`],
  ])('stays the same with %s', (_, text) => {
    expect(keyOf(studyOf(text))).toBe(key);
  });

  it.each([
    ['seed', `${base}seed: 2\n`],
    ['block size', `${base}block: 64\n`],
    ['horizon', `${base}cycles: 181\n`],
    ['drift limit', `${base}drift_limit_percent: 4\n`],
    ['spread of a stock', base.replace('rated_Ah: 100', 'rated_Ah: 100, standby_mA: 6')],
    ['duty', base.replace('for_h: 4', 'for_h: 4.5')],
    ['option of the candidate', base.replace('modules: [[A1, A2]]}', 'modules: [[A1, A2]], string_lead_mOhm: 2}')],
    ['module in the candidate', base.replace('modules: [[A1, A2]]}', 'modules: [[A1, A3]]}')],
    [
      'table in use',
      `${base.replace('rated_Ah', 'ocv: other, rated_Ah')}ocv: {other: {charge_percent: [0, 100], V: [2.5, 3.6]}}\n`,
    ],
  ])('changes with the %s', (_, text) => {
    expect(keyOf(studyOf(text))).not.toBe(key);
  });

  it('is the SHA-256 of the canonical JSON of what it stands for', () => {
    const study = studyOf(base);
    const [candidate] = study.candidates;
    if (candidate === undefined) throw new Error('no candidate');
    const text = canonicalJson(simulationContent(study, candidate));
    expect(createHash('sha256').update(text).digest('hex')).toBe(key);
    expect(JSON.parse(text)).toMatchObject({ engine: 6, seed: '1', stocks: { house: { moduleIds: ['A1', 'A2'] } } });
  });
});

describe('canonical JSON', () => {
  it('orders keys by code unit at every depth and leaves lists as they are', () => {
    expect(canonicalJson({ b: [3, 1], a: { z: null, B: 'x', absent: undefined } })).toBe(
      '{"a":{"B":"x","z":null},"b":[3,1]}',
    );
  });

  it('writes the shortest number that reads back, and refuses what JSON cannot hold', () => {
    expect(canonicalJson([0.1, 1e21, -0, 5e-324])).toBe('[0.1,1e+21,0,5e-324]');
    expect(() => canonicalJson([Number.NaN])).toThrow(RangeError);
    expect(() => canonicalJson(() => 1)).toThrow(RangeError);
  });
});
