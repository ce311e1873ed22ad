import { ambientOf } from './ambient.js';
import { type NumericTable, readNumericTable } from './numeric-table.js';
import type { Problem } from './problem.js';
import type { DutySegment } from './study.js';
import { MOST_PROBLEMS } from './table-lines.js';
import { secondsFromHours } from './units.js';

const MOST_POWER_W = 1e6;
const MOST_HOURS = 100_000;
/** Shorter than any BMS reacts to, and not to be told from the rounding of times. */
const SHORTEST_PEAK_S = 0.1;

/** Times of rows are compared with cycle ends to a thousandth of a second: sums of decimal hours are not exact. */
const TIME_TOLERANCE_S = 1e-3;

/**
 * Reads a profile: powers that hold from their row's time to the next; the last row holds until the end of its cycle. A
 * row may end with a peak of load, `load_peak_W` for its last `peak_s` seconds.
 *
 * @param ambientDegC where the table has no column of that name
 * @returns the segments of each cycle, rows that straddle the end of a cycle split there; or every fault of the table
 */
export function readProfile(
  text: string,
  file: string,
  cycleH: number,
  ambientDegC?: number,
): { readonly cycles: readonly (readonly DutySegment[])[] } | { readonly problems: Problem[] } {
  const read = readNumericTable(text, file, [
    { name: 'time_h', atLeast: 0, atMost: MOST_HOURS },
    { name: 'load_W', atLeast: 0, atMost: MOST_POWER_W },
    { name: 'charge_W', atLeast: 0, atMost: MOST_POWER_W },
    { name: 'load_peak_W', atLeast: 0, atMost: MOST_POWER_W, isOptional: true, emptyIsZero: true },
    { name: 'peak_s', atLeast: 0, atMost: MOST_HOURS * 3600, isOptional: true, emptyIsZero: true },
    { name: 'ambient_degC', atLeast: -60, atMost: 80, isOptional: true },
  ]);
  if ('problems' in read) return read;
  const { columns, problemAt } = read.table;
  const timeH = columns.get('time_h') ?? [];
  const problems: Problem[] = [];
  for (const [index, time] of timeH.entries()) {
    const before = timeH[index - 1];
    if (before === undefined ? time === 0 : time > before) continue;
    const rule = before === undefined ? '0 in the first row' : `above ${before}, the time of the row before`;
    problems.push(problemAt(index, 'time_h', `must be ${rule}, got ${time}`));
  }
  if (problems.length > 0) return { problems: problems.slice(0, MOST_PROBLEMS) };
  const cycleS = secondsFromHours(cycleH);
  const rows = rowsOf(columns, timeH, cycleS, ambientDegC);
  const peaks = peakProblems(read.table, rows, file).slice(0, MOST_PROBLEMS);
  return peaks.length > 0 ? { problems: peaks } : { cycles: cyclesOf(rows, cycleS) };
}

/** A row with the time it holds. */
interface ProfileRow {
  readonly fromS: number;
  readonly toS: number;
  readonly loadW: number;
  readonly chargeW: number;
  /** Load over the last `peakS` seconds of the row. */
  readonly peakW: number;
  readonly peakS: number;
  readonly ambientDegC: number | undefined;
}

function rowsOf(
  columns: ReadonlyMap<string, readonly number[]>,
  timeH: readonly number[],
  cycleS: number,
  ambientDegC: number | undefined,
): readonly ProfileRow[] {
  const starts = timeH.map(secondsFromHours);
  const endS = cycleCountOf(starts.at(-1) ?? 0, cycleS) * cycleS;
  const cellOf = (column: string, row: number): number => columns.get(column)?.[row] ?? 0;
  return starts.map((fromS, row) => ({
    fromS,
    toS: starts[row + 1] ?? endS,
    loadW: cellOf('load_W', row),
    chargeW: cellOf('charge_W', row),
    peakW: cellOf('load_peak_W', row),
    peakS: cellOf('peak_s', row),
    ambientDegC: columns.get('ambient_degC')?.[row] ?? ambientDegC,
  }));
}

function cycleCountOf(lastStartS: number, cycleS: number): number {
  return Math.floor((lastStartS + TIME_TOLERANCE_S) / cycleS) + 1;
}

/** The two columns of peaks go together, and a peak is no trough and lies within its row. */
function peakProblems({ columns, problemAt }: NumericTable, rows: readonly ProfileRow[], file: string): Problem[] {
  const has = (name: string): boolean => columns.has(name);
  if (has('load_peak_W') !== has('peak_s')) {
    const path = has('peak_s') ? 'load_peak_W' : 'peak_s';
    return [
      {
        file,
        line: 1,
        column: 1,
        path,
        message: `must be a column beside ${has('peak_s') ? 'peak_s' : 'load_peak_W'}, got none`,
      },
    ];
  }
  return rows.flatMap(({ fromS, toS, loadW, peakW, peakS }, row) => {
    const problem = (name: string, message: string): Problem => problemAt(row, name, message);
    if (peakS === 0) {
      return peakW === 0 ? [] : [problem('peak_s', `must be above 0 beside load_peak_W ${peakW}, got ${peakS}`)];
    }
    if (peakS < SHORTEST_PEAK_S) return [problem('peak_s', `must be 0 or at least ${SHORTEST_PEAK_S}, got ${peakS}`)];
    const lengthS = Number((toS - fromS).toFixed(3));
    return [
      ...(peakS > toS - fromS + TIME_TOLERANCE_S
        ? [problem('peak_s', `must be at most ${lengthS}, the length of its row, got ${peakS}`)]
        : []),
      ...(peakW < loadW ? [problem('load_peak_W', `must be at least load_W, ${loadW}, got ${peakW}`)] : []),
    ];
  });
}

function cyclesOf(rows: readonly ProfileRow[], cycleS: number): DutySegment[][] {
  const cycles: DutySegment[][] = Array.from({ length: cycleCountOf(rows.at(-1)?.fromS ?? 0, cycleS) }, () => []);
  for (const { fromS, toS, loadW, chargeW, peakW, peakS, ambientDegC } of rows) {
    const peakFromS = toS - peakS;
    addStretch(cycles, cycleS, fromS, peakFromS, { loadW, chargeW, ambientDegC });
    addStretch(cycles, cycleS, Math.max(fromS, peakFromS), toS, { loadW: peakW, chargeW, ambientDegC });
  }
  return cycles;
}

/** Adds a stretch of constant demand to the cycles that it lies in. */
function addStretch(
  cycles: readonly DutySegment[][],
  cycleS: number,
  fromS: number,
  toS: number,
  { loadW, chargeW, ambientDegC }: Pick<ProfileRow, 'loadW' | 'chargeW' | 'ambientDegC'>,
): void {
  for (let from = fromS; toS - from > TIME_TOLERANCE_S; ) {
    const cycle = Math.floor((from + TIME_TOLERANCE_S) / cycleS);
    const to = Math.min(toS, (cycle + 1) * cycleS);
    cycles[cycle]?.push({
      durationS: to - from,
      loadW,
      loadA: 0,
      chargeW,
      endsWhenCharged: false,
      ...ambientOf(ambientDegC),
    });
    from = to;
  }
}
