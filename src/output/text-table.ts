import { SCREEN_COLUMNS, wrapText } from './plain-text.js';

/** A column of figures. */
export interface TextColumn {
  /** Each begins a line of its own and is broken at blanks where the figures are narrower; the last is the unit. */
  readonly head: readonly string[];
}

/** A row: a name and, for every column, one or more lines. */
export interface TextRow {
  readonly name: string;
  readonly cells: readonly (readonly string[])[];
}

/** Rows under a line of their own, which is left out if it is empty. */
interface TextSection {
  readonly title: string;
  readonly rows: readonly TextRow[];
}

const GAP = '  ';
const LEAST_WIDTH = 9;

/**
 * Lays out a table of figures in plain text, numbers to the right. Columns that do not fit side by side go on below
 * each other, the names repeated.
 *
 * @param nameHead head of the names
 * @param width most characters in a line
 * @returns lines without line ends
 */
export function renderTextTable(
  nameHead: string,
  columns: readonly TextColumn[],
  sections: readonly TextSection[],
  width: number = SCREEN_COLUMNS,
): readonly string[] {
  // Rows under a title are set in by a blank, no more: names may have 32 characters.
  const indent = sections.some((section) => section.title !== '') ? ' ' : '';
  const rows = sections.flatMap((section) => section.rows);
  const nameWidth = Math.max(nameHead.length, ...rows.map((row) => indent.length + row.name.length));
  const widths = columns.map(({ head }, index) => {
    const texts = [...head.flatMap((phrase) => phrase.split(' ')), ...rows.flatMap((row) => row.cells[index])];
    return Math.max(LEAST_WIDTH, ...texts.map((text) => text.length));
  });
  const panels = panelsOf(widths, width - nameWidth).map((panel) => {
    const line = (name: string, texts: readonly string[]) =>
      [name.padEnd(nameWidth), ...texts.map((text, at) => text.padStart(widths[panel[at]]))].join(GAP).trimEnd();
    const heads = panel.map((index) => columns[index].head.flatMap((phrase) => wrapText(phrase, widths[index])));
    const headLines = alignedBelow(heads);
    return [
      ...headLines.map((texts, at) => line(at === headLines.length - 1 ? nameHead : '', texts)),
      '-'.repeat(nameWidth + widthOf(panel, widths)),
      ...sections.flatMap((section) => [
        ...(section.title === '' ? [] : [section.title]),
        ...section.rows.flatMap(({ name, cells }) =>
          alignedAbove(panel.map((index) => cells[index])).map((texts, at) =>
            line(at === 0 ? indent + name : '', texts),
          ),
        ),
      ]),
    ];
  });
  return panels.flatMap((lines, at) => (at === 0 ? lines : ['', ...lines]));
}

/** Shares columns out to the fewest panels that fit, as evenly as can be; a column too wide by itself stands alone. */
function panelsOf(widths: readonly number[], room: number): readonly (readonly number[])[] {
  const indices = [...widths.keys()];
  for (let count = 1; ; count++) {
    const size = Math.ceil(widths.length / count);
    const panels: number[][] = [];
    for (let start = 0; start < widths.length; start += size) panels.push(indices.slice(start, start + size));
    if (size <= 1 || panels.every((panel) => widthOf(panel, widths) <= room)) return panels;
  }
}

/** Characters that the columns of a panel take beside the names. */
function widthOf(panel: readonly number[], widths: readonly number[]): number {
  return panel.reduce((sum, index) => sum + GAP.length + widths[index], 0);
}

/** Lines of texts side by side from columns of lines, short columns filled up at their top. */
function alignedBelow(columns: readonly (readonly string[])[]): readonly (readonly string[])[] {
  return alignedAbove(columns.map((lines) => lines.toReversed())).toReversed();
}

/** The same, short columns filled up at their bottom. */
function alignedAbove(columns: readonly (readonly string[])[]): readonly (readonly string[])[] {
  const height = Math.max(...columns.map((lines) => lines.length));
  return Array.from({ length: height }, (_, at) => columns.map((lines) => lines[at] ?? ''));
}
