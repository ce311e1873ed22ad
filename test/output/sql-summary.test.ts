import { spawnSync } from 'node:child_process';
import { mkdtempSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { DuckDBInstance } from '@duckdb/node-api';
import { beforeAll, describe, expect, it } from 'vitest';

// The outcomes of a run summarised once more by an independent SQL engine, from the files as they lie in its folder.

const CLI = fileURLToPath(new URL('../../dist/src/cli.js', import.meta.url));
const STUDY = `motleybank: 1
title: Two strings for a test (invented)
seed: 77
instances: 96
block: 8
plan: latin-hypercube
cycles: 6
stock:
  new: {grade: new-same-make, modules: [A1, A2], rated_Ah: 100}
  old: {grade: older, modules: [B1, B2], rated_Ah: 100}
duty:
  phases: [{discharge_W: 800, for_h: 4.3}, {charge: to-full, at_most_h: 8}]
  load_factor: {nominal: 1, bank_sd_percent: 15}
candidates:
  apart: {wiring: strings, modules: [[A1, A2], [B1, B2]]}
  packs: {wiring: native, modules: [[A1, A2], [B1, B2]]}
`;

type Row = Readonly<Record<string, unknown>>;

let folder = '';
let query: (sql: string) => Promise<readonly Row[]>;

/** SQL for a table of one value per candidate, column and instance; absent values have no row. */
const tableOf = (candidate: string): string => `create table "${candidate}" as
  select '${candidate}' as candidate, instance::int as instance, measure, v::double as v from (
    unpivot read_csv('${folder}/outcomes/${candidate}/block-*.csv', header = true, all_varchar = true)
    on columns(* exclude (instance)) into name measure value v)`;
const results = (name: string): string => `read_csv('${folder}/${name}', header = true, all_varchar = true)`;
/** Results have seven significant digits; beyond half of the last one, sums in another order leave 1e-13 of a value. */
const isSame = `abs(said - found) <= 1e-13 + (0.5 + 1e-6) * if(abs(found) < 1e-13, 0, pow(10, floor(log10(abs(found))) - 6))`;

beforeAll(async () => {
  const place = mkdtempSync(join(tmpdir(), 'motleybank-sql-'));
  writeFileSync(join(place, 'study.yaml'), STUDY);
  const { stderr, status } = spawnSync(process.execPath, [CLI, 'run', 'study.yaml', '--out', 'out', '--quiet'], {
    cwd: place,
    encoding: 'utf8',
  });
  expect([stderr, status]).toEqual(['', 0]);
  folder = join(place, 'out').replaceAll('\\', '/');
  const connection = await (await DuckDBInstance.create(':memory:')).connect();
  for (const candidate of ['apart', 'packs']) await connection.run(tableOf(candidate));
  await connection.run('create view sampled as from apart union all from packs');
  query = async (sql) => (await connection.runAndReadAll(sql)).getRowObjectsJson();
}, 120_000);

/** Figures that are said in a file, beside those found by SQL from the outcomes. */
async function expectSame(saidAndFound: string, least: number): Promise<void> {
  const [{ total }] = (await query(`select count(*)::int as total from (${saidAndFound})`)) as [{ total: number }];
  expect(total).toBeGreaterThan(least);
  expect(
    await query(`select * from (${saidAndFound}) where found is null or not (${isSame}) or n <> instances limit 5`),
  ).toEqual([]);
}

describe('an SQL engine', () => {
  it('finds the same counts, means, shares and quantiles in the outcomes as the summary has', async () => {
    const found = `select candidate, measure, count(v) as n, avg(v) as mean, quantile_cont(v, [0.05, 0.5, 0.95]) as q
      from sampled group by all`;
    await expectSame(
      `select s.candidate, s.measure, s.statistic, s.estimate::double as said, s.instances::int as instances, n,
        case s.statistic when 'mean' then mean when 'share_of_banks' then 100 * mean
          when 'percentile_5' then q[1] when 'median' then q[2] when 'percentile_95' then q[3] end as found
        from ${results('summary.csv')} s left join (${found}) f using (candidate, measure)
        where s.statistic <> 'twin' and s.estimate is not null`,
      100,
    );
  });

  it('finds the same over the cycles', async () => {
    const found = `select candidate, measure as column_name, count(v) as n, avg(v) as mean,
      quantile_cont(v, [0.05, 0.5, 0.95]) as q from sampled group by all`;
    await expectSame(
      `select s.candidate, s.measure, s.cycle, s.estimate::double as said, s.instances::int as instances, n,
        case s.statistic when 'mean' then mean when 'percentile_5' then q[1] when 'median' then q[2]
          when 'percentile_95' then q[3] end as found
        from ${results('by-cycle.csv')} s left join (${found}) f
          on f.candidate = s.candidate and f.column_name = s.measure || '_at_cycle_' || s.cycle
        where s.estimate is not null and s.statistic <> 'share_without'`,
      100,
    );
  });

  it('finds the same shares without a first cutoff', async () => {
    await expectSame(
      `select s.candidate, s.measure, s.cycle, any_value(s.estimate)::double as said,
        any_value(s.instances)::int as instances, 96 as n, 100 - 100 * count(f.v) / 96 as found
        from ${results('by-cycle.csv')} s left join sampled f
          on f.candidate = s.candidate and f.measure = s.measure and f.v <= s.cycle::int
        where s.statistic = 'share_without' group by s.candidate, s.measure, s.cycle`,
      3,
    );
  });

  it('finds the same differences bank by bank', async () => {
    const found = `select p.measure, count(*) as n, avg(p.v - a.v) as mean, avg((p.v - a.v < -1e-6)::int) as less,
      avg((p.v - a.v > 1e-6)::int) as more
      from packs p join apart a using (instance, measure) group by all`;
    await expectSame(
      `select s.measure, s.statistic, s.estimate::double as said, s.instances::int as instances, n,
        case s.statistic when 'mean_difference' then mean when 'difference_of_shares' then 100 * mean
          when 'difference_of_shares_by_score' then 100 * mean
          when 'share_lower' then 100 * less when 'share_higher' then 100 * more
          when 'share_equal' then 100 * (1 - less - more) end as found
        from ${results('comparisons.csv')} s left join (${found}) f using (measure) where s.estimate is not null`,
      50,
    );
  });

  it('counts every sampled bank once in every candidate', async () => {
    const sql = `select candidate, count(*)::int as n, count(distinct instance)::int as banks, max(instance) as last
      from sampled where measure = 'load_factor' group by all order by all`;
    const counts = { n: 96, banks: 96, last: 96 };
    expect(await query(sql)).toEqual([
      { candidate: 'apart', ...counts },
      { candidate: 'packs', ...counts },
    ]);
  });
});
