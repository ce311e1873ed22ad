import { createHash } from 'node:crypto';
import { readdirSync, readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { blockCount, blockInstances, outcomeLayout, TWIN_BLOCK } from '../../src/outcomes/block.js';
import { encodeBlock } from '../../src/outcomes/block-csv.js';
import { outcomeColumns } from '../../src/outcomes/columns.js';
import { prepareCandidate, simulateInstance, simulateTwin } from '../../src/simulation/simulate-instance.js';
import { ENGINE } from '../../src/study/engine.js';
import type { Candidate, Study } from '../../src/study/study.js';
import { studyOf } from '../study/study-under-test.js';

const FOLDER = fileURLToPath(new URL('frozen/', import.meta.url));
const names = readdirSync(FOLDER);
const text = (name: string): string => readFileSync(`${FOLDER}${name}`, 'utf8').replaceAll('\r\n', '\n');
const files = Object.fromEntries(names.filter((name) => name.endsWith('.csv')).map((name) => [name, text(name)]));
const studies = names.filter((name) => name.endsWith('.yaml')).map((name) => name.replace('.yaml', ''));

/** What the engine of a number made of the studies: a digest for each candidate. */
interface Frozen {
  readonly engine: number;
  readonly mathematics: string;
  readonly digests: Readonly<Record<string, Readonly<Record<string, string>>>>;
}

const FROZEN: Frozen = JSON.parse(text('digests.json'));

const sha256 = (part: string): string => createHash('sha256').update(part).digest('hex');

/** Digest of all columns of all sampled banks and of the twin of a candidate, as they are kept. */
function digestOf(study: Study, candidate: Candidate): string {
  const prepared = prepareCandidate(study, candidate.key);
  const columns = outcomeColumns(outcomeLayout(study, candidate));
  const blocks = Array.from({ length: 1 + blockCount(study) }, (_, block) => {
    const range = blockInstances(block, study);
    const instances = Array.from({ length: range.last - range.first + 1 }, (__, k) => range.first + k);
    const rows = instances.map((i) => (block === TWIN_BLOCK ? simulateTwin(prepared) : simulateInstance(prepared, i)));
    return encodeBlock(columns, range, rows);
  });
  return sha256(blocks.join('\n'));
}

/**
 * Digest of what the functions of `Math` give whose last digit is left to each V8 and processor: where it is another, as
 * it may be with another major version of Node or another architecture, outcomes are other ones too, by right.
 */
function digestOfMathematics(): string {
  const values: number[] = [];
  for (let k = 1; k <= 2000; k++) {
    const x = k * 0.0137;
    values.push(Math.exp(-x), Math.exp(x), Math.log(x), Math.log1p(x), Math.expm1(-x), Math.tanh(x / 9), Math.cbrt(x));
    values.push(x ** 1.3198, Math.sin(x), Math.cos(x), Math.atan(x), Math.log10(x), Math.log2(x));
  }
  return sha256(values.join(' '));
}

/**
 * Six small studies that have the options of the study language between them. Their outcomes are no reference values: they were taken from the
 * engine as it was. Any change of them, of a digit or a column, is a new engine, since outcomes of the old one would
 * otherwise be taken up by runs of the new one. To raise it: the number in src/study/engine.ts, then the new digests,
 * which the failing test prints, in frozen/digests.json.
 */
describe('the outcomes of the frozen studies', () => {
  const isSame = digestOfMathematics() === FROZEN.mathematics;

  it('are six, each with the candidates that the table has', () => {
    const table = studies.map((name) => [name, studyOf(text(`${name}.yaml`), files).candidates.map(({ key }) => key)]);
    expect(studies).toHaveLength(6);
    expect(Object.entries(FROZEN.digests).map(([name, digests]) => [name, Object.keys(digests)])).toEqual(table);
  });

  it.runIf(process.versions.node.startsWith('20.') && process.arch === 'x64')(
    'are compared where the functions of Math are those of the table',
    () => {
      expect(digestOfMathematics()).toBe(FROZEN.mathematics);
    },
  );

  it.runIf(isSame)('are those of the engine that has this number', () => {
    const digests = Object.fromEntries(
      studies.map((name) => {
        const study = studyOf(text(`${name}.yaml`), files);
        return [name, Object.fromEntries(study.candidates.map((one) => [one.key, digestOf(study, one)]))];
      }),
    );
    const isKnown = FROZEN.engine === ENGINE;
    const advice = isKnown
      ? `outcomes differ while ENGINE is still ${ENGINE}: raise it in src/study/engine.ts`
      : `the digests are those of engine ${FROZEN.engine}, ENGINE is ${ENGINE}`;
    const table = JSON.stringify({ engine: ENGINE, mathematics: FROZEN.mathematics, digests }, null, 2);
    expect(
      { engine: ENGINE, digests },
      `${advice}, and take over test/simulation/frozen/digests.json:\n${table}\n`,
    ).toEqual({ engine: FROZEN.engine, digests: FROZEN.digests });
  });
});
