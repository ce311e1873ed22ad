import type { Answers } from '../questions/answers.js';
import type { Study } from '../study/study.js';
import type { DataField } from './data-field.js';
import type { FileContents, JoinedContents } from './file-contents.js';
import { CONVENTIONS, METHOD_WORDS } from './method-words.js';
import { namedEnough } from './named-enough.js';
import type { Provenance } from './provenance.js';

/** What people are told of a resource. */
export interface ResourceWords {
  /** Lower case, unique in the package. */
  readonly name: string;
  readonly title: string;
  readonly description: string;
}

/** A file of the folder, or several of one kind, as the package describes it. */
export interface DataResource extends ResourceWords {
  readonly path: string | readonly string[];
  readonly type?: 'table';
  readonly format: string;
  readonly mediatype: string;
  readonly encoding: 'utf-8';
  readonly bytes: number;
  readonly hash: string;
  /** Of several files, each by itself. */
  readonly parts?: readonly FileContents[];
  readonly dialect?: typeof DIALECT;
  readonly schema?: { readonly fields: readonly DataField[]; readonly missingValues: readonly string[] };
}

const DIALECT = { header: true, delimiter: ',', lineTerminator: '\r\n', quoteChar: '"', doubleQuote: true } as const;
const CSV = { format: 'csv', mediatype: 'text/csv', encoding: 'utf-8' } as const;

/** Describes a CSV file of this program's making. */
export function tableResource(
  words: ResourceWords,
  contents: FileContents,
  fields: readonly DataField[],
): DataResource {
  return { ...words, ...contents, type: 'table', ...CSV, dialect: DIALECT, schema: schemaOf(fields) };
}

/** Describes CSV files of one kind, each with its own head, that together are one table; the hash is of all joined. */
export function joinedTableResource(
  words: ResourceWords,
  { parts, bytes, hash }: JoinedContents,
  fields: readonly DataField[],
): DataResource {
  const path = parts.map((part) => part.path);
  return { ...words, path, bytes, hash, type: 'table', ...CSV, dialect: DIALECT, schema: schemaOf(fields), parts };
}

/** Describes a file that is kept as it was read, or that is no table. */
export function documentResource(
  words: ResourceWords,
  contents: FileContents,
  mediatype: 'application/yaml' | 'application/json' | 'text/csv',
): DataResource {
  const format = mediatype.slice(mediatype.indexOf('/') + 1);
  return { ...words, ...contents, format, mediatype, encoding: 'utf-8' };
}

/**
 * The text of `datapackage.json`: the folder described for other programs. Holds only what every run of the same study
 * with the same engine leaves alike: no dates, no host.
 *
 * @see Data Package standard, version 2
 */
export function renderDataPackage(
  study: Study,
  answers: Answers,
  provenance: Provenance,
  resources: readonly DataResource[],
): string {
  const described = {
    $schema: 'https://datapackage.org/profiles/2.0/datapackage.json',
    name: 'motleybank-run',
    title: study.title,
    description: 'Results of a motleybank study and the outcomes of every sampled bank behind them.',
    motleybank: {
      engine: provenance.engine,
      study_format: study.format,
      seed: study.seed,
      plan: study.plan,
      block: study.blockSize,
      instances: answers.instances,
      node_major: provenance.nodeMajor,
      architecture: provenance.architecture,
      confidence_percent: answers.confidencePercent,
      verdict_confidence_percent: answers.verdictConfidencePercent,
      enough: namedEnough(answers),
      methods: METHOD_WORDS,
      conventions: CONVENTIONS,
    },
    resources,
  };
  return `${JSON.stringify(described, null, 1)}\n`;
}

function schemaOf(fields: readonly DataField[]) {
  return { fields, missingValues: [''] };
}
