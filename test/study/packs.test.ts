import { describe, expect, it } from 'vitest';
import { simulationContent } from '../../src/study/simulation-key.js';
import { populationOf, read, studyOf } from './study-under-test.js';

/** Four modules of four cells, and two packs of eight cells that may share their cell draws. */
function studyOfPacks({
  shared = 'cells_drawn_as: {P1: [A1, A2], P2: [B1, B2]}',
  candidates = '',
  more = '',
} = {}): string {
  return `motleybank: 1
stock:
  house: {modules: [A1, A2, B1, B2], rated_Ah: 100}
  packs: {like: house, cells_in_series: 8, modules: [P1, P2]${shared === '' ? '' : `, ${shared}`}}
duty: {phases: [{discharge_W: 500, for_h: 4}, {charge: to-full, at_most_h: 10}]}
candidates:
  strings: {wiring: strings, modules: [[A1, A2], [B1, B2]]}
${candidates === '' ? '  packs: {wiring: native, modules: [[P1], [P2]], title: two packs of 25.6 V}' : candidates}
${more}`;
}

function warningsOf(text: string): string {
  const result = read(text);
  return result.kind === 'read' ? result.warnings.join('\n') : 'refused';
}

function titles(text: string): readonly string[] {
  return studyOf(text).candidates.map(({ title }) => title);
}

const REHOUSED = '  packs: {wiring: native, modules: [[A1, A2], [B1, B2]]}';

describe('packs bought as such', () => {
  it('take the draws of cell k of the modules named, in order', () => {
    const drawn = populationOf(studyOf(studyOfPacks()), 'packs').cellsDrawnAs;
    expect(drawn?.P2?.map(({ stock, module, cell }) => `${stock} ${module} ${cell}`)).toEqual([
      'house B1 1',
      'house B1 2',
      'house B1 3',
      'house B1 4',
      'house B2 1',
      'house B2 2',
      'house B2 3',
      'house B2 4',
    ]);
  });

  it('are a different purchase in title and check', () => {
    expect(titles(studyOfPacks())).toEqual(['strings', 'two packs of 25.6 V (different purchase)']);
    expect(warningsOf(studyOfPacks())).toMatch(/^packs of a different purchase, .*; state its spreads .* \(packs\)$/m);
    const result = read(studyOfPacks());
    expect(result.kind === 'read' && result.origins).toContainEqual({
      path: 'candidates.packs.title',
      value: 'two packs of 25.6 V (different purchase)',
      unit: '',
      source: 'study',
    });
  });

  it('may draw their cells themselves, and check tells how to share', () => {
    const text = studyOfPacks({ shared: '' });
    expect(populationOf(studyOf(text), 'packs')).not.toHaveProperty('cellsDrawnAs');
    expect(warningsOf(text)).toMatch(/its cells draw values of their own too; cells_drawn_as lets them share/);
  });

  it('are no different purchase where a candidate of modules has them too, or beside packs alone', () => {
    const packs = '  packs: {wiring: native, modules: [[P1], [P2]]}';
    const asModules = studyOfPacks({ candidates: `${packs}\n  tied: {wiring: cross-linked, modules: [[P1], [P2]]}` });
    expect(titles(asModules)).toEqual(['strings', 'packs', 'tied']);
    expect(warningsOf(asModules)).not.toMatch(/purchase/);
    const alone = studyOfPacks({ shared: '' }).replace(/ {2}strings: .*\n/, '');
    expect(titles(alone)).toEqual(['two packs of 25.6 V']);
  });

  it('do not pass the sharing on to a stock that is like theirs', () => {
    const text = studyOfPacks().replace('duty:', '  spare: {like: packs, modules: [Q1]}\nduty:');
    expect(populationOf(studyOf(text), 'spare')).not.toHaveProperty('cellsDrawnAs');
  });

  it('are part of the identity of the outcomes as far as they are used', () => {
    const contentOf = (text: string, key: string): string => {
      const study = studyOf(text);
      const candidate = study.candidates.find((one) => one.key === key);
      if (candidate === undefined) throw new Error(`no candidate ${key}`);
      return JSON.stringify(simulationContent(study, candidate));
    };
    const one = '  packs: {wiring: native, modules: [[P1]]}';
    const of = (shared: string): string => contentOf(studyOfPacks({ shared, candidates: one }), 'packs');
    expect(of('cells_drawn_as: {P1: [A1, A2]}')).toBe(of('cells_drawn_as: {P1: [A1, A2], P2: [B1, B2]}'));
    expect(of('cells_drawn_as: {P1: [A1, A2]}')).not.toBe(of('cells_drawn_as: {P1: [A2, A1]}'));
    expect(of('cells_drawn_as: {P2: [B1, B2]}')).toBe(of(''));
    expect(contentOf(studyOfPacks(), 'strings')).toBe(contentOf(studyOfPacks({ shared: '' }), 'strings'));
  });
});

describe('re-housed packs', () => {
  it('are marked as no product in title and check', () => {
    const text = studyOfPacks({ candidates: REHOUSED });
    expect(titles(text)).toEqual(['strings', 'packs (re-housed, not a product)']);
    expect(warningsOf(text)).toMatch(/^packs re-housed, not a product: .*give them a stock of their own \(packs\)$/m);
    expect(warningsOf(studyOfPacks())).not.toMatch(/re-housed/);
  });

  it('are not marked twice', () => {
    const candidates = REHOUSED.replace(']]}', ']], title: "two packs (re-housed, not a product)"}');
    expect(titles(studyOfPacks({ candidates }))[1]).toBe('two packs (re-housed, not a product)');
  });
});
