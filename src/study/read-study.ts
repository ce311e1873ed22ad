import type { Origin } from './origin.js';
import type { Problem } from './problem.js';
import type { ReadStudyOptions } from './read-options.js';
import { type InputText, Reading } from './reading.js';
import { resolveStudy } from './resolve-study.js';
import type { SchemaFault } from './schema-faults.js';
import { parseSoundParts } from './set-aside.js';
import { showValue } from './show-value.js';
import type { Study } from './study.js';
import { FORMAT, PARTIAL_STUDY_FILE, STUDY_FILE, type StudyInput } from './study-file.js';
import { renderPath, valueAt } from './study-path.js';
import { MOST_PROBLEMS, readYaml, type YamlSource } from './yaml-source.js';

export type { InputText } from './reading.js';

/** A study that can be run, or everything that is wrong with its file. */
export type ReadStudy =
  | {
      readonly kind: 'read';
      readonly study: Study;
      readonly origins: readonly Origin[];
      readonly warnings: readonly string[];
      /** Files that the study names, in order of their first mention. */
      readonly inputs: readonly InputText[];
    }
  | { readonly kind: 'refused'; readonly problems: readonly Problem[] };

/**
 * Reads a study: syntax, schema, defaults, and what its parts must have to do with one another.
 *
 * Faults of all kinds are returned together, in the order of the file. Nothing that a file holds makes it throw.
 */
export function readStudy(text: string, options: ReadStudyOptions): ReadStudy {
  const { fileName } = options;
  const yaml = readYaml(text, fileName);
  if ('problems' in yaml) return { kind: 'refused', problems: yaml.problems };
  const { source } = yaml;
  const unknownFormat = formatProblem(source, fileName);
  if (unknownFormat !== undefined) return { kind: 'refused', problems: [unknownFormat] };
  const sound = parseSoundParts<StudyInput>(STUDY_FILE, PARTIAL_STUDY_FILE, source.data);
  const reading = new Reading(fileName, source, options.readText, sound.setAside);
  const study = sound.value && resolveStudy(sound.value, options, reading);
  const faults = sound.faults.slice(0, MOST_PROBLEMS).map((fault) => problemOf(fault, source, fileName));
  const problems = inFileOrder([...faults, ...reading.problems], fileName).slice(0, MOST_PROBLEMS);
  if (problems.length > 0) return { kind: 'refused', problems };
  if (study === undefined) throw new RangeError('a study without problems was not resolved');
  const { origins, warnings, inputs } = reading;
  return { kind: 'read', study, origins, warnings, inputs };
}

/** Another format may mean anything by its other keys, so nothing else is told of it. */
function formatProblem(source: YamlSource, file: string): Problem | undefined {
  const { data } = source;
  if (typeof data !== 'object' || data === null || Array.isArray(data)) {
    const message = `must be a mapping that begins with motleybank: ${FORMAT}, got ${showValue(data)}`;
    return { file, ...source.placeOf([]), path: '', message };
  }
  const format = valueAt(data, ['motleybank']);
  if (format === FORMAT) return undefined;
  const message = `must be ${FORMAT}, the study format that this program reads, got ${showValue(format)}`;
  return { file, ...source.placeOf(['motleybank']), path: 'motleybank', message };
}

function problemOf({ path, atKey, message }: SchemaFault, source: YamlSource, file: string): Problem {
  const place = atKey ? source.placeOfKey(path) : source.placeOf(path);
  return { file, ...place, path: renderPath(path), message };
}

/** The study file first, then the files it names, each from top to bottom. */
function inFileOrder(problems: readonly Problem[], studyFile: string): readonly Problem[] {
  const rank = ({ file }: Problem): number => (file === studyFile ? 0 : 1);
  return [...problems].sort(
    (a, b) => rank(a) - rank(b) || (a.line ?? 0) - (b.line ?? 0) || (a.column ?? 0) - (b.column ?? 0),
  );
}
