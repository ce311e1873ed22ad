import { describe, expect, it } from 'vitest';
import { read, studyWith, studyWithStock } from './study-under-test.js';

// Limits are common practice without source, or our own choice; sums are by hand beside each check.

const MODULES = 'modules: [[A1, A2], [A3, A4]]';

function warningsOf(text: string, files: Readonly<Record<string, string>> = {}): string {
  const result = read(text, files);
  if (result.kind === 'refused') throw new Error(result.problems.map(({ message }) => message).join('\n'));
  return result.warnings.join('\n');
}

describe('the warning of a release near float', () => {
  it('tells how low float must be', () => {
    // 8 x (3.41 V - 0.02 V) = 27.12 V; float is 27.2 V.
    const at = (release: number) =>
      warningsOf(studyWithStock(['rated_Ah: 100', `bms: {over_voltage: {release_V: ${release}}}`]));
    expect(at(3.41)).toMatch(/lower float_V to less than 27\.12 V, or let it end \(float_V: null\) \(strings\)$/m);
    expect(at(3.45)).not.toMatch(/float/);
  });
});

describe('the warning of little room above absorption', () => {
  it('comes below 50 mV per cell and tells the absorption that leaves it', () => {
    // Thresholds 3.65 V: 8 cells 29.2 V. 28.9 V leaves 0.3 V / 8 = 37.5 mV; 28.8 V leaves 50 mV.
    const at = (volts: number) => warningsOf(studyWith({ more: `bank: {charger: {absorption_V: ${volts}}}\n` }));
    expect(at(28.9)).toMatch(/lies only 37\.5 mV per cell below .* lower absorption_V to at most 28\.8 V \(strings\)/);
    expect(at(28.8)).not.toMatch(/absorption/);
    expect(at(29.3)).toMatch(/lies above the sum .*: every charge ends in a trip; lower absorption_V/);
    expect(at(29.3)).not.toMatch(/mV per cell below/);
  });
});

describe('the note on short peaks', () => {
  const csv = (rows: string) => ({ 'p.csv': `time_h,load_W,charge_W,load_peak_W,peak_s\n${rows}\n` });
  const note = /short peaks are not tested/;

  it('comes with a profile of long rows, and not with one that has a peak', () => {
    const study = studyWith({ duty: 'duty: {profile: p.csv}' });
    expect(warningsOf(study, csv('0,100,0,,'))).toMatch(/add them in the columns load_peak_W and peak_s/);
    expect(warningsOf(study, csv('0,100,0,2000,30'))).not.toMatch(note);
  });

  it('comes with long phases, and not with a peak or a short phase', () => {
    const at = (phases: string) => warningsOf(studyWith({ duty: `duty: {phases: [${phases}, {charge_for_h: 4}]}` }));
    expect(at('{discharge_W: 500, for_h: 4}')).toMatch(/add them in load_peak_W and peak_s of a discharge phase/);
    expect(at('{discharge_W: 500, for_h: 4, load_peak_W: 2000, peak_s: 20}')).not.toMatch(note);
    expect(at('{discharge_W: 500, for_h: 4}, {discharge_A: 90, for_h: 0.01}')).not.toMatch(note);
  });

  it('is left out where there is no load', () => {
    expect(warningsOf(studyWith({ duty: 'duty: {phases: [{rest_h: 24}]}' }))).not.toMatch(note);
  });
});

describe('the warning of parts that never run', () => {
  it('names them and the cycles that all parts take', () => {
    // 26 x 7 = 182 cycles of summer, 8 x 7 = 56 of the dark weeks, 238 together; the horizon is 180 unless said.
    const days = Array.from({ length: 7 }, (_, day) => `${24 * day},100,0`).join('\n');
    const files = { 'p.csv': `time_h,load_W,charge_W\n${days}\n` };
    const parts = '[{name: summer, repeat: 26, profile: p.csv}, {name: dark, repeat: 8, profile: p.csv}]';
    const at = (cycles: number) =>
      warningsOf(studyWith({ duty: `duty: {parts: ${parts}}`, more: `cycles: ${cycles}\n` }), files);
    expect(at(182)).toMatch(/^182 cycles end before these parts of the duty begin: dark; all parts take 238 cycles$/m);
    expect(at(183)).not.toMatch(/end before/);
  });
});

describe('the warning of parts before the window', () => {
  it('names the parts that the last 30 cycles see, and those that they do not', () => {
    // 40 cycles of summer, 5 dark: of 80 cycles the last 30 are 51 to 80, summer; of 90 they hold the dark 86 to 90.
    const parts =
      '[{name: summer, repeat: 40, phases: [{rest_h: 24}]}, {name: dark, repeat: 5, phases: [{rest_h: 24}]}]';
    const at = (cycles: number) =>
      warningsOf(studyWith({ duty: `duty: {parts: ${parts}}`, more: `cycles: ${cycles}\n` }));
    expect(at(80)).toMatch(/^measures of the last 30 cycles see summer only, not dark; .* end with it$/m);
    // The dark cycles 41 to 45 are the first five of the last thirty of 70, and 41 to 44 are lost to 75.
    for (const cycles of [70, 74, 90]) expect(at(cycles)).not.toMatch(/measures of the last/);
    expect(at(75)).toMatch(/measures of the last/);
    // A part that never runs is told elsewhere.
    expect(at(30)).not.toMatch(/measures of the last/);
  });
});

describe('the warning of candidates of unlike voltage', () => {
  it('groups them by nominal voltage, 3.2 V a cell', () => {
    const short = '  short: {wiring: strings, modules: [[A1], [A2]]}\n';
    const long = `  strings: {wiring: strings, ${MODULES}}\n`;
    expect(warningsOf(studyWith({ candidates: long + short }))).toMatch(
      /^candidates of unlike nominal voltage \(25\.6 V: strings; 12\.8 V: short\): .*; give them equal numbers of cells/m,
    );
    expect(warningsOf(studyWith({ candidates: long }))).not.toMatch(/unlike nominal/);
  });
});

describe('the warning of a resistance in the wrong unit', () => {
  it('comes beyond 0.05 to 10 mOhm at 100 Ah, scaled with capacity', () => {
    const at = (rated: number, mOhm: number) =>
      warningsOf(studyWithStock([`rated_Ah: ${rated}`, `cell_resistance_mOhm: ${mOhm}`]));
    expect(at(100, 10.1)).toMatch(
      /^stock house: 10\.1 mOhm is much for a cell of 100 Ah .*: check the figure \(strings\)$/m,
    );
    expect(at(100, 10)).not.toMatch(/check the figure/);
    // 30 mOhm of a cell of 20 Ah are 6 mOhm at 100 Ah, 4 mOhm of one of 300 Ah are 12.
    expect(at(20, 30)).not.toMatch(/check the figure/);
    expect(at(300, 4)).toMatch(/is much for a cell of 300 Ah/);
    expect(at(100, 0.0008)).toMatch(/0\.0008 mOhm is little for a cell of 100 Ah/);
    expect(at(100, 0.05)).not.toMatch(/check the figure/);
  });
});

describe('the warning of a first demand beyond the charge on arrival', () => {
  const at = (hours: number, more = '', before = '') =>
    warningsOf(
      studyWith({
        duty: `duty: {phases: [${before}{discharge_W: 512, for_h: ${hours}}, {charge: to-full, at_most_h: 10}]}`,
        more,
      }),
    );

  it('compares ampere-hours at 3.2 V a cell', () => {
    // Arrival: 2 strings x 0.5 x 102 Ah = 102 Ah (grade new-same-make: 1.02 of rated). 512 W / 25.6 V = 20 A.
    expect(at(5.2)).toMatch(/asks for about 104 Ah before it can charge, and the bank arrives with 102 Ah/);
    expect(at(5)).not.toMatch(/arrives with/);
  });

  it('does not come after a charge, or with modules charged first', () => {
    expect(at(8, '', '{charge: to-full, at_most_h: 1}, ')).not.toMatch(/arrives with/);
    expect(at(8, 'bank: {commissioning: each-module-full}\n')).not.toMatch(/arrives with/);
  });

  it('counts what charging leaves of the load', () => {
    // 512 W of load less 256 W of charging: 10 A. 11 h are 110 Ah, 10 h are 100 Ah.
    const files = (hours: number) => ({ 'p.csv': `time_h,load_W,charge_W\n0,512,256\n${hours},0,900\n` });
    const study = studyWith({ duty: 'duty: {profile: p.csv}' });
    expect(warningsOf(study, files(11))).toMatch(/about 110 Ah/);
    expect(warningsOf(study, files(10))).not.toMatch(/arrives with/);
  });
});

describe('the note on long strings', () => {
  it('comes above 16 cells in series', () => {
    const at = (cells: number) => warningsOf(studyWithStock(['rated_Ah: 100', `cells_in_series: ${cells}`]));
    expect(at(16)).toMatch(
      /^32 cells in series, 102\.4 V, are more than 4 modules of 12\.8 V.*\(common practice, no source\)/m,
    );
    expect(at(8)).not.toMatch(/cells in series/);
  });
});

describe('the warning of a measured column without effect', () => {
  const at = (keys: readonly string[], column: string) =>
    warningsOf(studyWithStock(['rated_Ah: 100', ...keys, 'measured: {file: m.csv}']), {
      'm.csv': `module,${column}\nA1,1\nA2,1.1\nA3,1.2\nA4,0.9\n`,
    });

  it.each([
    ['ageing.rate', 'ageing: {law: naumann}', 'its cells do not age; give the stock a law of ageing'],
    [
      'bms.charge_refusal.below_degC',
      'bms: {charge_refusal: {below_degC: 0}}',
      'its BMS never refuses charge; set bms.charge_refusal.below_degC',
    ],
  ])('comes with %s, and not once the stock has %s', (column, remedy, words) => {
    expect(at([], column)).toContain(
      `stock house: the measured column ${column} has no effect, since ${words}, or leave the column out`,
    );
    expect(at([remedy], column)).not.toMatch(/no effect/);
  });

  it('comes with bleed where nothing bleeds, in no candidate either', () => {
    const none = ['bms: {bleed: {rule: none}}'];
    expect(at(none, 'bms.bleed.current_mA')).toMatch(/since its cells do not bleed; set bms\.bleed\.rule/);
    expect(at([], 'bms.bleed.current_mA')).not.toMatch(/no effect/);
    const text = studyWithStock(['rated_Ah: 100', ...none, 'measured: {file: m.csv}']);
    const bled = text.replace(MODULES, `${MODULES}, bleed: {rule: each}`);
    expect(bled).not.toBe(text);
    expect(warningsOf(bled, { 'm.csv': 'module,bms.bleed.current_mA\nA1,1\nA2,1\nA3,1\nA4,1\n' })).not.toMatch(
      /no effect/,
    );
  });
});

describe('the warning of a disconnect for another voltage', () => {
  it('comes outside 2 to 3.4 V a cell, of a reconnection outside 2 to 3.65 V', () => {
    // 8 cells: 16 to 27.2 V, and 16 to 29.2 V.
    const at = (load: string) => warningsOf(studyWith({ more: `bank: {load: {${load}}}\n` }));
    expect(at('disconnect_V: 11.6, reconnect_V: 13')).toMatch(
      /^load: disconnect_V, 11\.6 V, lies outside 16 to 27\.2 V, where 8 cells in series .*\(strings\)\nload: reconnect_V, 13 V, lies outside 16 to 29\.2 V/m,
    );
    expect(at('disconnect_V: 16, reconnect_V: 29.2')).not.toMatch(/other voltage/);
    expect(at('disconnect_V: 27.3, reconnect_V: 29.3')).toMatch(/27\.3 V, lies.*\n.*29\.3 V, lies/);
    expect(at('disconnect_V: null, reconnect_V: 13')).not.toMatch(/other voltage/);
  });
});

describe('the warning of charging in the cold', () => {
  const at = (degC: number, phase = '{charge_for_h: 8}', lines: readonly string[] = [], more = '') =>
    warningsOf(
      studyWithStock(['rated_Ah: 100', ...lines], more).replace(
        /^duty:.*$/m,
        `duty: {phases: [{discharge_W: 500, for_h: 4, ambient_degC: -30}, {rest_h: 1, ambient_degC: -30}, ${phase}], ambient_degC: ${degC}}`,
      ),
    );

  it('comes below 0 degC where no BMS refuses', () => {
    expect(at(-15)).toMatch(
      /^stock house: modules are charged down to -15 degC, .* lithium may plate .* the maker decide/m,
    );
    expect(at(0)).not.toMatch(/lithium/);
    expect(at(-15, '{rest_h: 8}')).not.toMatch(/lithium/);
    expect(at(-15, '{charge_for_h: 8}', ['bms: {charge_refusal: {below_degC: 0}}'])).not.toMatch(/lithium/);
  });

  it('counts how much warmer or colder slots and modules are', () => {
    expect(at(-2, '{charge_for_h: 8}', ['temperature_offset_K: 3'])).not.toMatch(/lithium/);
    expect(at(1, '{charge_for_h: 8}', [], 'bank: {slot_temperature_offset_K: [0, -2]}\n')).toMatch(/down to -1 degC/);
  });
});

describe('the warning of a charger beyond the BMSs', () => {
  const at = (limitA: number, wiring = 'strings', charge = '{charge_for_h: 4}') =>
    warningsOf(
      studyWith({
        candidates: `  a: {wiring: ${wiring}, ${MODULES}}`,
        duty: `duty: {phases: [${charge}, {discharge_W: 500, for_h: 4}]}`,
        more: `bank: {charger: {limit_A: ${limitA}}}\n`,
      }),
    );

  it('comes above the sum of the over-current limits of the strings, 100 A each', () => {
    expect(at(250)).toMatch(
      /^the charger may give 250 A, more than the 200 A .*; lower limit_A of the charger \(a\)$/m,
    );
    expect(at(200)).not.toMatch(/limit_A/);
    expect(at(201, 'cross-linked')).toMatch(/may give 201 A/);
  });

  it('goes by the power that the duty lets the charger give', () => {
    // 8 x 3.2 V = 25.6 V: 5120 W are 200 A, 5376 W are 210 A.
    expect(at(250, 'strings', '{charge_for_h: 4, charge_W: 5120}')).not.toMatch(/limit_A/);
    expect(at(250, 'strings', '{charge_for_h: 4, charge_W: 5376}')).toMatch(/may give 210 A/);
  });
});
