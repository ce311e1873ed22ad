import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { measureChoices } from '../../src/commands/measure-choices.js';
import { renderProblem } from '../../src/study/problem.js';
import { type ReadStudy, readStudy } from '../../src/study/read-study.js';
import type { TextOrProblem } from '../../src/study/read-text.js';
import type { ExplicitStock, PopulationStock, Study } from '../../src/study/study.js';

/** @returns text of a file beside the repository's top, e.g. `studies/demo.yaml` */
export function repositoryText(path: string): string {
  return readFileSync(fileURLToPath(new URL(`../../${path}`, import.meta.url)), 'utf8');
}

/** Reads a study whose named files are given in memory. */
export function read(text: string, files: Readonly<Record<string, string>> = {}, fileName = 'study.yaml'): ReadStudy {
  const readText = (path: string): TextOrProblem => {
    const found = Object.hasOwn(files, path) ? files[path] : undefined;
    return found === undefined ? { problem: 'no such file' } : { text: found };
  };
  return readStudy(text, { fileName, readText, measures: measureChoices() });
}

/** @returns the study; fails with its problems if it is refused */
export function studyOf(text: string, files: Readonly<Record<string, string>> = {}): Study {
  const result = read(text, files);
  if (result.kind === 'refused') throw new Error(result.problems.map(renderProblem).join('\n'));
  return result.study;
}

export function populationOf(study: Study, key: string): PopulationStock {
  const stock = study.stocks.find((candidate) => candidate.key === key);
  if (stock?.kind !== 'population') throw new Error(`no population ${key}`);
  return stock;
}

export function explicitOf(study: Study, key: string): ExplicitStock {
  const stock = study.stocks.find((candidate) => candidate.key === key);
  if (stock?.kind !== 'explicit') throw new Error(`no explicit stock ${key}`);
  return stock;
}

/** Smallest study around a stock `house` of four modules A1 to A4 with these lines. */
export function studyWithStock(lines: readonly string[], more = ''): string {
  return `motleybank: 1
stock:
  house:
    modules: [A1, A2, A3, A4]
${lines.map((line) => `    ${line}\n`).join('')}${more}duty: {phases: [{discharge_W: 500, for_h: 4}, {charge: to-full, at_most_h: 10}]}
candidates:
  strings: {wiring: strings, modules: [[A1, A2], [A3, A4]]}
`;
}

/** Smallest study around a duty and candidates of four modules A1 to A4 rated 100 Ah. */
export function studyWith(rest: {
  readonly duty?: string;
  readonly candidates?: string;
  readonly more?: string;
}): string {
  const duty = rest.duty ?? 'duty: {phases: [{discharge_W: 500, for_h: 4}, {charge: to-full, at_most_h: 10}]}';
  const candidates = rest.candidates ?? '  strings: {wiring: strings, modules: [[A1, A2], [A3, A4]]}';
  return `motleybank: 1
stock:
  house: {modules: [A1, A2, A3, A4], rated_Ah: 100}
${duty}
candidates:
${candidates}
${rest.more ?? ''}`;
}
