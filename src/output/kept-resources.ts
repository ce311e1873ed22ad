import { outcomeLayout } from '../outcomes/block.js';
import { outcomeColumns } from '../outcomes/columns.js';
import type { Study } from '../study/study.js';
import { outcomeFields } from './data-field.js';
import { type DataResource, documentResource, joinedTableResource, tableResource } from './data-package.js';
import { contentsOf, joinedContents } from './file-contents.js';

/** Names of the copies of the study in the folder of a run. */
const STUDY_FILES = { study: 'study.yaml', resolved: 'study.resolved.json' } as const;

/** The folder of a run as far as it is read here. Names are paths within it, with `/`. */
export interface ReadableFolder {
  /** @returns undefined if there is no such file */
  readonly read: (name: string) => Promise<string | undefined>;
}

/** Names of the files that hold the outcomes of one candidate. */
export interface OutcomeFiles {
  readonly candidate: string;
  readonly twin: string;
  /** In the order of blocks. */
  readonly blocks: readonly string[];
}

/** What the folder of a run holds already, to be described along with the results. */
export interface KeptFiles {
  readonly outcomes: readonly OutcomeFiles[];
  /** Names of copies of the CSV files that the study names, in its order. */
  readonly inputs: readonly string[];
}

/**
 * Describes what the folder of a run holds before its results: the study, its inputs and the outcomes.
 *
 * @throws Error if a file that should be there is not
 */
export async function keptResources(
  folder: ReadableFolder,
  study: Study,
  kept: KeptFiles,
): Promise<readonly DataResource[]> {
  const resources = [...(await studyResources(folder, kept.inputs))];
  for (const files of kept.outcomes) resources.push(...(await outcomeResources(folder, study, files)));
  return resources;
}

async function studyResources(folder: ReadableFolder, inputs: readonly string[]): Promise<readonly DataResource[]> {
  const resources = [
    documentResource(
      { name: 'study', title: 'Study', description: 'The study file as it was read.' },
      contentsOf(STUDY_FILES.study, await existing(folder, STUDY_FILES.study)),
      'application/yaml',
    ),
    documentResource(
      {
        name: 'study-resolved',
        title: 'Resolved study',
        description: 'The study with every default filled in, in SI.',
      },
      contentsOf(STUDY_FILES.resolved, await existing(folder, STUDY_FILES.resolved)),
      'application/json',
    ),
  ];
  for (const [index, input] of inputs.entries()) {
    const words = {
      name: `input-${index + 1}`,
      title: `Input ${index + 1}`,
      description: 'A file that the study names, as it was read.',
    };
    resources.push(documentResource(words, contentsOf(input, await existing(folder, input)), 'text/csv'));
  }
  return resources;
}

async function outcomeResources(
  folder: ReadableFolder,
  study: Study,
  files: OutcomeFiles,
): Promise<readonly DataResource[]> {
  const candidate = study.candidates.find(({ key }) => key === files.candidate);
  if (candidate === undefined) throw new RangeError(`no candidate ${files.candidate} in the study`);
  const fields = outcomeFields(outcomeColumns(outcomeLayout(study, candidate)), study.cycles);
  const { key } = candidate;
  const banks = {
    name: `outcomes-${key}`,
    title: `Outcomes of ${key}`,
    description:
      'What was drawn and every measure, one row per sampled bank. Each file is a block and has its own head.',
  };
  const twin = {
    name: `outcomes-${key}-twin`,
    title: `Twin of ${key}`,
    description: 'The same for the bank with every value at its mean.',
  };
  return [
    joinedTableResource(banks, await joinedContents(files.blocks, (path) => existing(folder, path)), fields),
    tableResource(twin, contentsOf(files.twin, await existing(folder, files.twin)), fields),
  ];
}

async function existing(folder: ReadableFolder, name: string): Promise<string> {
  const text = await folder.read(name);
  if (text === undefined) throw new Error(`${name} is not in the folder of the run`);
  return text;
}
