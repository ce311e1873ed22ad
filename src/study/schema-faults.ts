import type { z } from 'zod';
import { didYouMean, nearestName } from './nearest-name.js';
import { showValue } from './show-value.js';
import { type StudyPath, valueAt } from './study-path.js';

type Issue = z.core.$ZodIssue;

/** A value that breaks the schema. */
export interface SchemaFault {
  readonly path: StudyPath;
  /** The key itself is at fault, not its value. */
  readonly atKey: boolean;
  readonly message: string;
}

/** @returns the faults behind the issues of a failed parse of `data`, one per wrong value or unknown key */
export function schemaFaults(issues: readonly Issue[], data: unknown): SchemaFault[] {
  return issues.flatMap((issue) => faultsOf(issue, [], data));
}

function faultsOf(issue: Issue, above: StudyPath, data: unknown): SchemaFault[] {
  const path = [...above, ...issue.path.map((step) => (typeof step === 'number' ? step : String(step)))];
  switch (issue.code) {
    case 'unrecognized_keys':
      return issue.keys.map((key) => ({ path: [...path, key], atKey: true, message: unknownKey(key, issue.message) }));
    case 'invalid_key':
      return [{ path, atKey: true, message: wrong(issue.issues[0]?.message ?? issue.message, path.at(-1)) }];
    case 'invalid_value':
      return [{ path, atKey: false, message: wrong(issue.message, valueAt(data, path), issue.values) }];
    case 'invalid_union':
      return unionFaults(issue, path, data);
    default:
      return [{ path, atKey: false, message: wrong(issue.message, valueAt(data, path)) }];
  }
}

/** Faults of the alternative that was probably meant; if none takes this kind of value, the rule of the union. */
function unionFaults(issue: z.core.$ZodIssueInvalidUnion, path: StudyPath, data: unknown): SchemaFault[] {
  const meant = issue.errors
    .filter((issues) => !issues.some((inner) => inner.code === 'invalid_type' && inner.path.length === 0))
    .map((issues) => ({ issues, misfit: misfit(issues) }))
    .sort((a, b) => a.misfit - b.misfit)[0];
  if (meant) return meant.issues.flatMap((inner) => faultsOf(inner, path, data));
  const words = 'options' in issue && Array.isArray(issue.options) ? issue.options.map(String) : [];
  const rule = words.length > 0 ? `one of ${words.join(', ')}` : issue.message;
  return [{ path, atKey: false, message: wrong(rule, valueAt(data, path), words) }];
}

/**
 * How badly an alternative fits: wrong or missing keys of its own first, then all other faults. An unknown key that is the
 * end of one that is not given (for_h of charge_for_h) counts half.
 */
function misfit(issues: readonly Issue[]): number {
  const absent = issues.map(({ code, path }) => (code === 'invalid_type' && path.length === 1 ? String(path[0]) : ''));
  const weight = (key: string): number => (absent.some((name) => name.endsWith(`_${key}`)) ? 0.5 : 1);
  let sum = 0;
  for (const issue of issues) {
    if (issue.code === 'unrecognized_keys') sum += issue.keys.reduce((total, key) => total + weight(key), 0);
    else sum += issue.code === 'invalid_type' && issue.path.length === 1 ? 100 : 1;
  }
  return sum;
}

function wrong(rule: string, value: unknown, words: readonly unknown[] = []): string {
  const hint = typeof value === 'string' ? didYouMean(value, words.map(String)) : '';
  return `must be ${rule}, got ${showValue(value)}${hint}`;
}

function unknownKey(key: string, known: string): string {
  const names = known.split(', ');
  // What is told of percentages is told in points in places, and no edit distance knows.
  const inPoints = key.replace('percent', 'points');
  const near = names.includes(inPoints) ? inPoints : nearestName(key, names);
  const hint = near === undefined ? `known here: ${known}` : `did you mean ${near}?`;
  return `must be a known key, got ${showValue(key)} (${hint})`;
}
