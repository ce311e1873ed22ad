/** A line of what a calibration found. */
export interface Coverage {
  readonly method: string;
  readonly setting: string;
  readonly coverage: string;
}

/** 3.89 standard errors of a share of repetitions: one chance in 10,000 to fall outside, once and for all by the seed. */
export function bandOf(share: number, repetitions: number): number {
  return 3.89 * Math.sqrt((share * (1 - share)) / repetitions);
}

/** What was found, as the table that DEVELOPERS.md holds. */
export function renderCoverage(rows: readonly Coverage[]): string {
  const head = ['| method | setting | coverage |', '| --- | --- | --- |'];
  return [...head, ...rows.map(({ method, setting, coverage }) => `| ${method} | ${setting} | ${coverage} |`)].join(
    '\n',
  );
}

/** A share as it is printed: 0.9512. */
export function shareText(share: number): string {
  return share.toFixed(4);
}

/** Whether an interval holds a value. */
export function holds(
  interval: { readonly lower: number | null; readonly upper: number | null },
  truth: number,
): boolean {
  return interval.lower !== null && interval.upper !== null && interval.lower <= truth && truth <= interval.upper;
}
