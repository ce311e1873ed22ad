import { describe, expect, it } from 'vitest';
import { studyOf, studyWith } from './study-under-test.js';

/** Length and load of the segments, cycle by cycle; the course is by hand. */
function loads(duty: string, csv = ''): readonly (readonly (readonly number[])[])[] {
  const { parts } = studyOf(studyWith({ duty }), { 'p.csv': csv }).duty;
  return parts.flatMap(({ cycles }) => cycles.map((cycle) => cycle.map(({ durationS, loadW }) => [durationS, loadW])));
}

const table = (rows: string): string => `time_h,load_W,charge_W,load_peak_W,peak_s\n${rows}\n`;
const PROFILE = 'duty: {profile: p.csv}';

describe('a peak of a profile', () => {
  it('stands at the end of its row, within it, charging as before; an empty cell is no peak', () => {
    const { parts } = studyOf(studyWith({ duty: PROFILE }), {
      'p.csv': table('0,100,20,2000,30\n6,50,500,,\n12,0,0,0,0'),
    }).duty;
    const idle = { loadA: 0, endsWhenCharged: false };
    expect(parts[0]?.cycles).toEqual([
      [
        { ...idle, durationS: 21_570, loadW: 100, chargeW: 20 },
        { ...idle, durationS: 30, loadW: 2000, chargeW: 20 },
        { ...idle, durationS: 21_600, loadW: 50, chargeW: 500 },
        { ...idle, durationS: 43_200, loadW: 0, chargeW: 0 },
      ],
    ]);
  });

  it('may take the whole row', () => {
    expect(loads(PROFILE, table('0,100,0,2000,3600\n1,50,0,,'))).toEqual([
      [
        [3600, 2000],
        [82_800, 50],
      ],
    ]);
  });

  it('of the last row ends with the last cycle, and is split where it spans the end of a cycle', () => {
    // Two cycles of 24 h: the row from 20 h to 30 h peaks over its last 8 h, from 22 h; the last over its last 60 s.
    expect(loads(PROFILE, table('0,10,0,,\n20,100,0,900,28800\n30,50,0,60,60'))).toEqual([
      [
        [72_000, 10],
        [7200, 100],
        [7200, 900],
      ],
      [
        [21_600, 900],
        [64_740, 50],
        [60, 60],
      ],
    ]);
  });

  it('leaves a table without these columns as it was', () => {
    expect(loads(PROFILE, 'time_h,load_W,charge_W\n0,100,0\n6,50,500\n')).toEqual(
      loads(PROFILE, table('0,100,0,,\n6,50,500,,')),
    );
  });
});

describe('a peak of a phase', () => {
  it('stands at its end', () => {
    const phases = '[{discharge_W: 400, for_h: 2, load_peak_W: 1500, peak_s: 20}, {rest_h: 1}]';
    expect(loads(`duty: {phases: ${phases}}`)).toEqual([
      [
        [7180, 400],
        [20, 1500],
        [3600, 0],
      ],
    ]);
  });

  it('may take the whole phase', () => {
    const phases = '[{discharge_W: 400, for_h: 0.1, load_peak_W: 400, peak_s: 360}]';
    expect(loads(`duty: {phases: ${phases}}`)).toEqual([[[360, 400]]]);
  });
});
