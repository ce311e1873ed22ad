import { type Document, isAlias, isMap, isNode, isScalar, LineCounter, parseDocument, visit, type YAMLMap } from 'yaml';
import type { Problem } from './problem.js';
import type { StudyPath } from './study-path.js';
import { firstDeeperThan } from './yaml-depth.js';

/** Far above any study, far below what would slow the reader down. */
const LONGEST_TEXT = 1_000_000;
const DEEPEST_NESTING = 50;
const MOST_ALIASES = 100;
/** As many as a stock may have modules. */
const MOST_KEYS = 1000;
/** More faults than anyone reads at once. */
export const MOST_PROBLEMS = 100;
const RESERVED_KEYS: ReadonlySet<string> = new Set(['__proto__', 'constructor', 'prototype']);

/** Place in a file, both from 1. */
interface Place {
  readonly line: number;
  readonly column: number;
}

/** A YAML file as plain data, with the place of every value. */
export interface YamlSource {
  readonly data: unknown;
  /** Place of the value at a path, or of the nearest enclosing one that exists. */
  readonly placeOf: (path: StudyPath) => Place;
  /** Place of the last key of a path, or of the nearest enclosing value. */
  readonly placeOfKey: (path: StudyPath) => Place;
}

/**
 * Reads YAML 1.2 text into plain data.
 *
 * @returns the source, or every fault of the text: syntax, duplicate keys, tags, reserved names, alias bombs, size, depth
 */
export function readYaml(
  text: string,
  file: string,
): { readonly source: YamlSource } | { readonly problems: Problem[] } {
  const whole = (message: string): { problems: Problem[] } => ({
    problems: [{ file, line: null, column: null, path: '', message }],
  });
  if (text.length > LONGEST_TEXT) {
    return whole(`must be a file of at most ${LONGEST_TEXT} characters, got ${text.length}`);
  }
  if (text.trim() === '') return whole('must be a study, got an empty file');
  // A line may end in CR alone, which the parser does not know; places stay as they are.
  const normal = text.replace(/\r(?!\n)/g, '\n');
  const lines = new LineCounter();
  const place = (offset: number): Place => {
    const { line, col } = lines.linePos(offset);
    return { line: Math.max(1, line), column: Math.max(1, col) };
  };
  const tooDeep = firstDeeperThan(DEEPEST_NESTING, normal, lines.addNewLine);
  if (tooDeep !== undefined) {
    const message = `must be nested at most ${DEEPEST_NESTING} levels deep, got more`;
    return { problems: [{ file, ...place(tooDeep), path: '', message }] };
  }
  try {
    // Keys are compared below: the parser compares each with every other, which takes minutes for a long mapping.
    const document = parseDocument(normal, { prettyErrors: false, version: '1.2', uniqueKeys: false });
    const problems = [...syntaxProblems(document, normal), ...keyProblems(document)];
    if (problems.length > 0) {
      return {
        problems: problems.slice(0, MOST_PROBLEMS).map(({ offset, ...rest }) => ({ file, ...place(offset), ...rest })),
      };
    }
    const data: unknown = document.toJS({ maxAliasCount: MOST_ALIASES });
    return {
      source: {
        data,
        placeOf: (path) => place(offsetOf(document, path)),
        placeOfKey: (path) => place(keyOffsetOf(document, path)),
      },
    };
  } catch (error) {
    // The parser throws on too many aliases.
    const reason = error instanceof Error ? error.message.split('\n')[0] : 'it cannot be read';
    return whole(`must be YAML with few aliases, got: ${reason}`);
  }
}

/** A problem before its place is looked up. */
interface ProblemAt extends Pick<Problem, 'path' | 'message'> {
  readonly offset: number;
}

/** Blanks that YAML does not take for blanks, as they come from web pages and word processors. */
const FALSE_BLANK = /[\u00a0\u2000-\u200b\u202f\u205f\u3000]|(?!^)\ufeff/;

function syntaxProblems(document: Document.Parsed, text: string): ProblemAt[] {
  const problems = [...document.errors, ...document.warnings].map(({ code, message, pos }): ProblemAt => {
    const rule =
      code === 'MULTIPLE_DOCS'
        ? 'must be one YAML document, got several'
        : `must be well-formed YAML 1.2, got: ${message.split('\n')[0]}`;
    return { offset: pos[0], path: '', message: rule };
  });
  const blank = problems.length > 0 ? FALSE_BLANK.exec(text) : null;
  if (blank === null) return problems;
  const code = blank[0].charCodeAt(0).toString(16).toUpperCase().padStart(4, '0');
  const message = `must be indented and set apart with plain spaces, got the character U+${code} that looks like one`;
  return [{ offset: blank.index, path: '', message }];
}

/** Keys that are no plain words, that are reserved or that a mapping has twice. */
function keyProblems(document: Document.Parsed): ProblemAt[] {
  const problems: ProblemAt[] = [];
  visit(document, {
    Map: (_, map) => {
      problems.push(...keyProblemsOf(map));
    },
  });
  return problems;
}

function keyProblemsOf({ items, range }: YAMLMap): ProblemAt[] {
  if (items.length > MOST_KEYS) {
    const message = `must be a mapping of at most ${MOST_KEYS} keys, got ${items.length}`;
    return [{ offset: range?.[0] ?? 0, path: '', message }];
  }
  const known = new Set<string>();
  return items.flatMap(({ key }): ProblemAt[] => {
    if (!isScalar(key)) {
      const offset = (isNode(key) ? key.range?.[0] : undefined) ?? range?.[0] ?? 0;
      return [{ offset, path: '', message: 'must be a mapping whose keys are plain words, got another key' }];
    }
    const name = String(key.value);
    const offset = key.range?.[0] ?? 0;
    if (RESERVED_KEYS.has(name)) {
      return [{ offset, path: name, message: `must be another name, got ${JSON.stringify(name)}, which is reserved` }];
    }
    if (known.has(name)) return [{ offset, path: name, message: 'must be given once, got it again' }];
    known.add(name);
    return [];
  });
}

/** Offset of the value at a path; aliases are followed, the alias being the place that is reported. */
function offsetOf(document: Document.Parsed, path: StudyPath): number {
  for (let length = path.length; length >= 0; length--) {
    const node = length === 0 ? document.contents : document.getIn(path.slice(0, length), true);
    if (isNode(node) && node.range) return node.range[0];
  }
  return 0;
}

function keyOffsetOf(document: Document.Parsed, path: StudyPath): number {
  const parentPath = path.slice(0, -1);
  const found = parentPath.length === 0 ? document.contents : document.getIn(parentPath, true);
  const parent = isAlias(found) ? found.resolve(document) : found;
  const last = String(path.at(-1));
  if (isMap(parent)) {
    for (const { key } of parent.items) {
      if (isScalar(key) && String(key.value) === last && key.range) return key.range[0];
    }
  }
  return offsetOf(document, path);
}
