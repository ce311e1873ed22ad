import type { Answers } from '../questions/answers.js';
import type { Study } from '../study/study.js';
import { byCycleColumns } from './by-cycle-csv.js';
import { comparisonColumns } from './comparisons-csv.js';
import { resultFields } from './data-field.js';
import { type DataResource, type ResourceWords, renderDataPackage, tableResource } from './data-package.js';
import { contentsOf } from './file-contents.js';
import { type KeptFiles, keptResources, type ReadableFolder } from './kept-resources.js';
import type { Provenance } from './provenance.js';
import { type ResultColumn, renderColumns } from './result-column.js';
import { summaryColumns } from './summary-csv.js';

/** The folder of a run as far as results need it. */
export interface ResultFolder extends ReadableFolder {
  /** Leaves the file there whole or not at all. */
  readonly write: (name: string, text: string) => Promise<void>;
}

/** Names of the files that hold the results. */
export const RESULT_FILES = {
  summary: 'summary.csv',
  byCycle: 'by-cycle.csv',
  comparisons: 'comparisons.csv',
  dataPackage: 'datapackage.json',
} as const;

/**
 * Writes the results of a run into its folder: the CSV files, and last the data package that describes them and what was
 * there before: the study, its inputs and the outcomes.
 *
 * @throws Error if a file that should be there is not
 */
export async function writeResults(
  folder: ResultFolder,
  study: Study,
  answers: Answers,
  provenance: Provenance,
  kept: KeptFiles,
): Promise<void> {
  const { confidencePercent } = answers;
  const resources = [
    await writeTable(folder, RESULT_FILES.summary, SUMMARY, summaryColumns(confidencePercent), answers.summary),
    await writeTable(folder, RESULT_FILES.byCycle, BY_CYCLE, byCycleColumns(confidencePercent), answers.byCycle),
    await writeTable(
      folder,
      RESULT_FILES.comparisons,
      COMPARISONS,
      comparisonColumns(confidencePercent),
      answers.comparisons,
    ),
    ...(await keptResources(folder, study, kept)),
  ];
  const text = renderDataPackage(study, answers, provenance, resources);
  await folder.write(RESULT_FILES.dataPackage, text);
}

const SUMMARY: ResourceWords = {
  name: 'summary',
  title: 'Summary',
  description: 'Every measure of every candidate over the sampled banks: one row per candidate, measure and statistic.',
};
const BY_CYCLE: ResourceWords = {
  name: 'by-cycle',
  title: 'By cycle',
  description:
    'How drift, trips and losses come about: one row per candidate, measure, checkpoint cycle and statistic.',
};
const COMPARISONS: ResourceWords = {
  name: 'comparisons',
  title: 'Comparisons',
  description: 'Each candidate against the reference on the same sampled banks.',
};

async function writeTable<Row>(
  folder: ResultFolder,
  name: string,
  words: ResourceWords,
  columns: readonly ResultColumn<Row>[],
  rows: readonly Row[],
): Promise<DataResource> {
  const text = await renderColumns(columns, rows);
  await folder.write(name, text);
  return tableResource(words, contentsOf(name, text), resultFields(columns));
}
