import { readFileSync } from 'node:fs';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { CYCLE_MEASURES, MEASURES } from '../../src/measures/registry.js';
import { CAUTIONS } from '../../src/output/caution.js';
import { renderTable } from '../../src/output/table.js';
import { answerStudy } from '../../src/questions/answer-study.js';
import type { Study } from '../../src/study/study.js';
import { type MadeUpValues, madeUpCandidate, madeUpStore, madeUpStudy } from '../questions/made-up-study.js';

async function table(study: Study, values: readonly MadeUpValues[], folder = 'results/made-up'): Promise<string> {
  return renderTable(await answerStudy(study, madeUpStore(study, values)), study, folder);
}

/** The twin's value, then `count` values by number of the bank. */
function banks(count: number, twin: number, ofBank: (bank: number) => number): readonly number[] {
  return [twin, ...Array.from({ length: count }, (_, index) => ofBank(index + 1))];
}

const first = (count: number) => (bank: number) => (bank <= count ? 1 : 0);

/** A hundred banks whose figures can be checked by hand. */
const hundred = madeUpStudy({
  title: 'Made-up bank, 24 V (invented data)',
  instances: 100,
  candidates: [
    madeUpCandidate('strings'),
    madeUpCandidate('cross-linked', { wiring: 'cross-linked' }),
    madeUpCandidate('native', { wiring: 'native' }),
  ],
  acceptance: [
    { measure: 'load_lost', statistic: 'share_of_banks', bound: 'at-most', limit: 6 },
    { measure: 'drift', statistic: 'percentile_95', bound: 'at-most', limit: 12.5 },
  ],
});
const hundredValues: readonly MadeUpValues[] = [
  {
    early_cutoff_on_charge: banks(100, 0, first(46)),
    load_lost: banks(100, 0, first(20)),
    load_lost_days: banks(100, 0, (bank) => (bank <= 20 ? bank : 0)),
    lost_capacity: banks(100, 0.3, (bank) => bank * 0.1),
    drift: banks(100, 0, (bank) => bank * 0.2),
    drift_growth: banks(100, 0, (bank) => bank * 0.01),
  },
  {
    early_cutoff_on_charge: banks(100, 0, first(1)),
    load_lost: banks(100, 0, first(6)),
    load_lost_days: banks(100, 0, first(6)),
    lost_capacity: banks(100, 0.3, (bank) => bank * 0.05),
    drift: banks(100, 0, (bank) => bank * 0.02),
    drift_growth: banks(100, 0, (bank) => bank * 0.002 - 0.1),
  },
  {
    early_cutoff_on_charge: banks(100, 0, first(0)),
    load_lost: banks(100, 0, first(0)),
    load_lost_days: banks(100, 0, first(0)),
    lost_capacity: banks(100, 0.3, (bank) => bank * 0.02),
  },
];

describe('decision table', () => {
  it('is as it was looked at', async () => {
    // Frozen on 2026-12-01. By hand: 95th percentile of 0.1..10.0 is 9.505, Wilson of 46 % of 100 is 36.6 to 55.7.
    const frozen = readFileSync(new URL('decision-table.txt', import.meta.url), 'utf8');
    expect(await table(hundred, hundredValues)).toBe(frozen);
  });

  it('tells below it which packs are no like-for-like purchase, and nothing where there are none', async () => {
    const candidates = [
      madeUpCandidate('strings'),
      madeUpCandidate('packs', { wiring: 'native', strings: [['P1'], ['P2']] }),
    ];
    const bought = await table(madeUpStudy({ candidates }), [{}, {}]);
    expect(bought).toMatch(/^packs: different purchase \(packs bought as such, of a lot of their own\)$/m);
    expect(bought).not.toMatch(/re-housed/);
    expect(await table(madeUpStudy(), [{}, {}])).not.toMatch(/re-housed|different purchase/);
  });

  it('shows early cutoffs on discharge only where there are some', async () => {
    expect(await table(hundred, hundredValues)).not.toContain('discharge');
    const [strings, ...others] = hundredValues;
    const some = { ...strings, early_cutoff_on_discharge: banks(100, 0, first(3)) };
    const text = await table(hundred, [some, ...others]);
    expect(text.replaceAll(/\s+/g, ' ')).toContain('discharge');
  });

  it('gives every twin a row of its own where they differ', async () => {
    const [strings, ...others] = hundredValues;
    const text = await table(hundred, [{ ...strings, load_lost: banks(100, 1, first(20)) }, ...others]);
    expect(text).toMatch(/twin.*\n strings +no +yes .*\n cross-linked +no +no .*\n native +no +no /);
  });

  it('says that a run is unfinished', async () => {
    expect(await table({ ...hundred, instances: 512 }, hundredValues)).toContain(
      '100 of 512 sampled banks (unfinished)',
    );
  });

  it('claims the same modules only where they are the same', async () => {
    const own = madeUpCandidate('own', {
      strings: [
        ['C1', 'C2'],
        ['C3', 'C4'],
      ],
    });
    const study = { ...hundred, candidates: [...hundred.candidates.slice(0, 2), own] };
    expect(await table(study, hundredValues)).not.toContain('same modules');
    expect(await table(hundred, hundredValues)).toContain('same modules in every candidate');
  });

  it('leaves out what there is none of: acceptance lines, other candidates, a hardest case', async () => {
    const study = madeUpStudy({ candidates: [madeUpCandidate('only')], instances: 1 });
    const text = await table(study, [{ load_lost: [0, 0] }]);
    expect(text).toContain('1 sampled bank,');
    expect(text).not.toMatch(/acceptance|Against|Hardest|undefined|NaN|null/i);
  });

  it('prints the command that replays the hardest case, quoted where a shell would need it', async () => {
    const command = '--candidate strings --instance 100';
    expect(await table(hundred, hundredValues)).toContain(`  motleybank trace results/made-up ${command}\n`);
    expect(await table(hundred, hundredValues, 'my results')).toContain(`trace "my results" ${command}`);
    expect(await table(hundred, hundredValues, "it's $(x)")).toContain(`trace 'it'\\''s $(x)' ${command}`);
    expect(await table(hundred, hundredValues, 'a\u001b[2Jb')).toContain(`trace "a[2Jb" ${command}`);
  });

  it('ends with every caution', async () => {
    const text = (await table(hundred, hundredValues)).replaceAll(/\s+/g, ' ');
    for (const caution of CAUTIONS) expect(text).toContain(caution);
  });

  it('shows a hostile title and seed as harmless text', async () => {
    const text = await table(
      { ...hundred, title: '\u001b]0;x\u0007Title\r\n\u202eend', seed: '\u001b[31m7' },
      hundredValues,
    );
    expect(text).toMatch(/^[\n -~]+$/);
    expect(text).toContain(']0;xTitle end');
    expect(text).toContain('seed [31m7');
  });

  it('calls nothing safe', async () => {
    const words = [
      await table(hundred, hundredValues),
      ...CAUTIONS,
      ...[...MEASURES, ...CYCLE_MEASURES].flatMap(({ title, definition }) => [title, definition]),
    ];
    for (const text of words) expect(text).not.toMatch(/safe/i);
  });
});

describe('width of the table', () => {
  const long = (name: string) => `${name}${'-wide'.repeat(7)}`.slice(0, 32);
  const wide = madeUpStudy({
    title: 'T'.repeat(250),
    seed: 's'.repeat(150),
    instances: 80,
    candidates: [madeUpCandidate(long('a')), madeUpCandidate(long('b')), madeUpCandidate(long('c'))],
    acceptance: [
      { measure: 'lost_capacity', statistic: 'mean', bound: 'at-least', limit: 1e12 },
      { measure: 'early_cutoff_on_charge', statistic: 'share_of_banks', bound: 'at-most', limit: 0.0001 },
    ],
  });

  it('keeps to 100 columns for the longest keys and any figures', async () => {
    const magnitude = fc.constantFrom(1e-9, 1e-3, 1, 1e3, 1e5, 999_999, 1e9, 1e300);
    const share = fc.constantFrom(0, 1, 40, 79, 80);
    await fc.assert(
      fc.asyncProperty(fc.array(fc.tuple(magnitude, share), { minLength: 3, maxLength: 3 }), async (candidates) => {
        const values = candidates.map(([scale, count]) => ({
          early_cutoff_on_charge: banks(80, 1, first(count)),
          early_cutoff_on_discharge: banks(80, 1, first(80 - count)),
          load_lost: banks(80, 0, first(count)),
          load_lost_days: banks(80, 0, first(count)),
          lost_capacity: banks(80, -scale, (bank) => scale * (bank - 40)),
          drift: banks(80, scale, (bank) => scale * bank),
          drift_growth: banks(80, -scale, (bank) => -scale * bank),
        }));
        for (const line of (await table(wide, values)).split('\n')) {
          expect(line.length, line).toBeLessThanOrEqual(100);
          expect(line).toMatch(/^[ -~]*$/);
        }
      }),
      { seed: 4, numRuns: 12 },
    );
  });

  it('keeps to 100 columns when nothing is known', async () => {
    const nothing = wide.candidates.map(() => ({ load_lost: [null, null] }));
    const text = await table({ ...wide, instances: 1 }, nothing);
    for (const line of text.split('\n')) expect(line.length, line).toBeLessThanOrEqual(100);
    expect(text).toContain('absent');
  });
});
