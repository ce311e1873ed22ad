import { describe, expect, it } from 'vitest';
import { studyOf, studyWith } from './study-under-test.js';

describe('a duty of phases', () => {
  it('is one cycle whose length is the sum of the longest durations', () => {
    const { duty } = studyOf(
      studyWith({
        duty: `duty:
  phases:
    - {discharge_W: 1000, for_h: 3.2}
    - {discharge_A: 50, for_h: 1}
    - {rest_h: 0.5}
    - {charge: to-full, at_most_h: 6, charge_W: 800}
    - {charge_for_h: 2}`,
      }),
    );
    const idle = { loadW: 0, loadA: 0, chargeW: 0, endsWhenCharged: false };
    expect(duty.kind).toBe('phases');
    expect(duty.cycleS).toBeCloseTo(12.7 * 3600, 6);
    expect(duty.parts).toEqual([
      {
        name: 'duty',
        repeat: 1,
        cycles: [
          [
            { ...idle, durationS: 11520, loadW: 1000 },
            { ...idle, durationS: 3600, loadA: 50 },
            { ...idle, durationS: 1800 },
            { ...idle, durationS: 21600, chargeW: 800, endsWhenCharged: true },
            { ...idle, durationS: 7200, chargeW: null },
          ],
        ],
      },
    ]);
  });
});

describe('a duty of a profile', () => {
  const profile = (csv: string, more = '') =>
    studyOf(studyWith({ duty: `duty: {profile: p.csv${more}}` }), { 'p.csv': csv }).duty;

  it('holds its last row to the end of the cycle', () => {
    const duty = profile('time_h,load_W,charge_W\n0,100,0\n6,0,500\n');
    expect(duty.cycleS).toBe(86_400);
    expect(duty.parts[0]?.cycles.map((cycle) => cycle.map(({ durationS }) => durationS))).toEqual([[21_600, 64_800]]);
    expect(duty.parts[0]?.cycles[0]?.[1]).toEqual({
      durationS: 64_800,
      loadW: 0,
      loadA: 0,
      chargeW: 500,
      endsWhenCharged: false,
    });
  });

  it('splits a row at the end of a cycle and counts whole cycles only', () => {
    const duty = profile('time_h,load_W,charge_W\n0,100,0\n20,40,0\n30,0,500\n');
    expect(
      duty.parts[0]?.cycles.map((cycle) => cycle.map(({ durationS, loadW }) => [durationS / 3600, loadW])),
    ).toEqual([
      [
        [20, 100],
        [4, 40],
      ],
      [
        [6, 40],
        [18, 0],
      ],
    ]);
  });

  it('begins a cycle with a row that stands at its boundary', () => {
    const duty = profile('time_h,load_W,charge_W\n0,100,0\n24,50,0\n', ', cycle_h: 24');
    expect(duty.parts[0]?.cycles.map((cycle) => cycle.length)).toEqual([1, 1]);
  });

  it('adds up to whole cycles with times that are no exact binary fractions', () => {
    const rows = Array.from({ length: 240 }, (_, index) => `${(index / 10).toFixed(1)},10,0`);
    const duty = profile(`time_h,load_W,charge_W\n${rows.join('\n')}\n`, ', cycle_h: 2.4');
    const lengths =
      duty.parts[0]?.cycles.map((cycle) => cycle.reduce((sum, { durationS }) => sum + durationS, 0)) ?? [];
    expect(lengths).toHaveLength(10);
    for (const length of lengths) expect(length).toBeCloseTo(2.4 * 3600, 6);
  });

  it('reads a table as a spreadsheet may write it: byte order mark, CRLF, quotes, columns in any order', () => {
    const duty = profile('\ufeff"load_W","time_h","charge_W"\r\n"100","0","0"\r\n50,12,"0"\r\n\r\n');
    expect(duty.parts[0]?.cycles[0]?.map(({ loadW }) => loadW)).toEqual([100, 50]);
  });

  it('keeps the texts of the files it names, each once', () => {
    const csv = 'time_h,load_W,charge_W\n0,100,0\n';
    const { duty } = studyOf(
      studyWith({
        duty: 'duty: {parts: [{name: summer, repeat: 26, profile: p.csv}, {name: dark, repeat: 8, profile: p.csv}], load_factor: {nominal: 1, bank_sd_percent: 5}}',
      }),
      { 'p.csv': csv },
    );
    expect(duty.parts.map(({ name, repeat }) => [name, repeat])).toEqual([
      ['summer', 26],
      ['dark', 8],
    ]);
    expect(duty.loadFactor).toEqual({ nominal: 1, relative: true, bank: { law: 'normal', sd: 0.05 } });
    expect(duty.chargeFactor).toEqual({ nominal: 1, relative: false, bank: { law: 'fixed' } });
  });
});
