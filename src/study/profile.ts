import { ambientOf } from './ambient.js';
import { readNumericTable } from './numeric-table.js';
import type { Problem } from './problem.js';
import type { DutySegment } from './study.js';
import { secondsFromHours } from './units.js';

const NO_PEAKS = 'short peaks are not modelled: a row is constant until the next';
const MOST_POWER_W = 1e6;
const MOST_HOURS = 100_000;

/** Times of rows are compared with cycle ends to a thousandth of a second: sums of decimal hours are not exact. */
const TIME_TOLERANCE_S = 1e-3;

/**
 * Reads a profile: powers that hold from their row's time to the next; the last row holds until the end of its cycle.
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
  const read = readNumericTable(
    text,
    file,
    [
      { name: 'time_h', atLeast: 0, atMost: MOST_HOURS },
      { name: 'load_W', atLeast: 0, atMost: MOST_POWER_W },
      { name: 'charge_W', atLeast: 0, atMost: MOST_POWER_W },
      { name: 'ambient_degC', atLeast: -60, atMost: 80, isOptional: true },
    ],
    { load_peak_W: NO_PEAKS, peak_s: NO_PEAKS },
  );
  if ('problems' in read) return read;
  const { columns, lines } = read.table;
  const timeH = columns.get('time_h') ?? [];
  const problems: Problem[] = [];
  for (const [index, time] of timeH.entries()) {
    const before = timeH[index - 1];
    if (before === undefined ? time === 0 : time > before) continue;
    const rule = before === undefined ? '0 in the first row' : `above ${before}, the time of the row before`;
    problems.push({
      file,
      line: lines[index] ?? null,
      column: 1,
      path: 'time_h',
      message: `must be ${rule}, got ${time}`,
    });
  }
  if (problems.length > 0) return { problems };
  return {
    cycles: cyclesOf(
      timeH,
      columns.get('load_W') ?? [],
      columns.get('charge_W') ?? [],
      secondsFromHours(cycleH),
      (row) => columns.get('ambient_degC')?.[row] ?? ambientDegC,
    ),
  };
}

function cyclesOf(
  timeH: readonly number[],
  loadW: readonly number[],
  chargeW: readonly number[],
  cycleS: number,
  ambientDegCOf: (row: number) => number | undefined,
): DutySegment[][] {
  const starts = timeH.map(secondsFromHours);
  const lastStart = starts.at(-1) ?? 0;
  const cycleCount = Math.floor((lastStart + TIME_TOLERANCE_S) / cycleS) + 1;
  const cycles: DutySegment[][] = Array.from({ length: cycleCount }, () => []);
  for (const [row, start] of starts.entries()) {
    const end = starts[row + 1] ?? cycleCount * cycleS;
    for (let from = start; end - from > TIME_TOLERANCE_S; ) {
      const cycle = Math.floor((from + TIME_TOLERANCE_S) / cycleS);
      const to = Math.min(end, (cycle + 1) * cycleS);
      cycles[cycle]?.push({
        durationS: to - from,
        loadW: loadW[row] ?? 0,
        loadA: 0,
        chargeW: chargeW[row] ?? 0,
        endsWhenCharged: false,
        ...ambientOf(ambientDegCOf(row)),
      });
      from = to;
    }
  }
  return cycles;
}
