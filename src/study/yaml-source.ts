import { type Document, isAlias, isMap, isNode, isPair, isScalar, LineCounter, parseDocument, visit } from 'yaml';
import type { Problem } from './problem.js';
import type { StudyPath } from './study-path.js';

/** Far above any study, far below what would slow the reader down. */
const LONGEST_TEXT = 2_000_000;
const MOST_ALIASES = 100;
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
 * @returns the source, or every fault of the text: syntax, duplicate keys, tags, reserved names, alias bombs, size
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
  const lines = new LineCounter();
  const place = (offset: number): Place => {
    const { line, col } = lines.linePos(offset);
    return { line: Math.max(1, line), column: Math.max(1, col) };
  };
  try {
    const document = parseDocument(text, { lineCounter: lines, prettyErrors: false, version: '1.2' });
    const problems = syntaxProblems(document, text, file, place);
    if (problems.length > 0) return { problems };
    const data: unknown = document.toJS({ maxAliasCount: MOST_ALIASES });
    return {
      source: {
        data,
        placeOf: (path) => place(offsetOf(document, path)),
        placeOfKey: (path) => place(keyOffsetOf(document, path)),
      },
    };
  } catch (error) {
    // The parser throws on what it cannot hold: too many aliases, or nesting deeper than the stack.
    const reason = error instanceof Error ? error.message.split('\n')[0] : 'it cannot be read';
    return whole(`must be YAML of moderate depth and few aliases, got: ${reason}`);
  }
}

function syntaxProblems(
  document: Document.Parsed,
  text: string,
  file: string,
  place: (offset: number) => Place,
): Problem[] {
  const keyAt = (offset: number): string => /^[^\s:]*/.exec(text.slice(offset, offset + 80))?.[0] ?? '';
  const problems: Problem[] = [];
  const add = (offset: number, path: string, message: string): void => {
    problems.push({ file, ...place(offset), path, message });
  };
  for (const { code, message, pos } of [...document.errors, ...document.warnings]) {
    if (code === 'DUPLICATE_KEY') add(pos[0], keyAt(pos[0]), 'must be given once, got it again');
    else if (code === 'MULTIPLE_DOCS') add(pos[0], '', 'must be one YAML document, got several');
    else add(pos[0], '', `must be well-formed YAML 1.2, got: ${message.split('\n')[0]}`);
  }
  visit(document, (_, node) => {
    if (isPair(node) && isScalar(node.key) && RESERVED_KEYS.has(String(node.key.value))) {
      const name = String(node.key.value);
      add(node.key.range?.[0] ?? 0, name, `must be another name, got ${JSON.stringify(name)}, which is reserved`);
    }
  });
  return problems;
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
