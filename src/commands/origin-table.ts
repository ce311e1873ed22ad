import { asciiText, SCREEN_COLUMNS, wrapText } from '../output/plain-text.js';
import type { Origin } from '../study/origin.js';

const INDENT = '  ';
const GAP = '  ';
const LEAST_VALUE_WIDTH = 12;

interface Row {
  readonly section: string;
  readonly key: string;
  readonly value: string;
  readonly source: string;
}

/**
 * Table of values and where they come from, under a line for every section (`stock.newer`, `candidates.strings`). What
 * all candidates, or all modules of a stock, have in common stands once, under `every candidate`.
 *
 * @returns lines of at most 100 ASCII characters, without line ends
 */
export function renderOrigins(origins: readonly Origin[]): readonly string[] {
  const rows = withCommonOnce(origins.map(rowOf));
  const keyWidth = Math.max(0, ...rows.map(({ key }) => key.length));
  const sourceWidth = Math.max(0, ...rows.map(({ source }) => source.length));
  const room = SCREEN_COLUMNS - INDENT.length - keyWidth - sourceWidth - 2 * GAP.length;
  const valueWidth = Math.max(LEAST_VALUE_WIDTH, room);
  const lines: string[] = [];
  for (const section of new Set(rows.map((row) => row.section))) {
    if (section !== '') lines.push('', section);
    for (const { key, value, source } of rows.filter((row) => row.section === section)) {
      for (const [index, part] of wrapText(value, valueWidth).entries()) {
        const [left, right] = index === 0 ? [key, source] : ['', ''];
        lines.push(`${INDENT}${left.padEnd(keyWidth)}${GAP}${part.padEnd(valueWidth)}${GAP}${right}`.trimEnd());
      }
    }
  }
  return lines;
}

function rowOf({ path, value, unit, source }: Origin): Row {
  const steps = path.split('.');
  const depth = sectionDepth(steps);
  return {
    section: steps.slice(0, depth).join('.'),
    key: steps.slice(depth).join('.'),
    value: asciiText(`${value} ${unit}`),
    source,
  };
}

function sectionDepth(steps: readonly string[]): number {
  if (steps.length === 1) return 0;
  if (steps[0] === 'candidates') return 2;
  if (steps[0] === 'stock') return steps[2] === 'modules' ? 4 : 2;
  return 1;
}

/** Heading of what all sections beside this one have in common, undefined for a section of its own. */
function commonHeading(section: string): string | undefined {
  const steps = section.split('.');
  if (steps[0] === 'candidates') return 'every candidate';
  return steps.length === 4 ? `every module of ${steps[0]}.${steps[1]}` : undefined;
}

/** Takes rows that are equal in all sections of a kind together into one, in the place of the first. */
function withCommonOnce(rows: readonly Row[]): readonly Row[] {
  const sections = new Map<string, Set<string>>();
  const counts = new Map<string, number>();
  const identity = ({ section, key, value, source }: Row): string =>
    JSON.stringify([commonHeading(section), key, value, source]);
  for (const row of rows) {
    const heading = commonHeading(row.section);
    if (heading === undefined) continue;
    sections.set(heading, (sections.get(heading) ?? new Set()).add(row.section));
    counts.set(identity(row), (counts.get(identity(row)) ?? 0) + 1);
  }
  const told = new Set<string>();
  return rows.flatMap((row) => {
    const heading = commonHeading(row.section);
    const siblings = heading === undefined ? 0 : (sections.get(heading)?.size ?? 0);
    if (heading === undefined || siblings < 2 || counts.get(identity(row)) !== siblings) return [row];
    if (told.has(identity(row))) return [];
    told.add(identity(row));
    return [{ ...row, section: heading }];
  });
}
