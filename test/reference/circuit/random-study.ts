import { uniformsOf } from '../../../src/sampling/streams.js';

/** A study of one small bank, drawn by its number, and what of it goes through the circuit simulator. All invented. */
export interface RandomStudy {
  readonly name: string;
  readonly wiring: string;
  readonly course: string;
  readonly text: string;
  /** Files beside the study, by name. */
  readonly files: Readonly<Record<string, string>>;
  readonly fromCycle: number;
  readonly toCycle: number;
}

/** Every course with every wiring once. */
export const RANDOM_STUDIES = 36;

interface Draw {
  readonly between: (what: string, low: number, high: number) => number;
  readonly one: <T>(what: string, ...choices: readonly T[]) => T;
}

interface Sketch {
  readonly positions: number;
  readonly strings: number;
  readonly ratedAh: number;
  readonly draw: Draw;
}

/** What is done to a bank, as keys of a study; amounts go by its size. */
interface Course {
  readonly name: string;
  readonly cycles: number;
  readonly write: (sketch: Sketch) => {
    readonly duty: string;
    readonly arrivalPercent: number;
    readonly charger?: string;
    readonly load?: string;
    readonly files?: Readonly<Record<string, string>>;
  };
}

const SIZES = [
  [1, 2],
  [2, 2],
  [3, 2],
  [2, 3],
  [1, 3],
  [2, 2],
  [4, 2],
  [3, 3],
  [4, 3],
] as const;
const WIRINGS = ['strings', 'cross-linked', 'native', 'custom', 'strings, same end', 'cross-linked, diagonal'] as const;

/** Amperes of the bank at a share of its rated capacity per hour, as a study says them. */
function amperes({ strings, ratedAh }: Sketch, perHour: number): string {
  return (perHour * ratedAh * strings).toFixed(2);
}

/** Watts of the bank at that rate and a middling voltage. */
function watts(sketch: Sketch, perHour: number): string {
  return (perHour * sketch.ratedAh * sketch.strings * 12.9 * sketch.positions).toFixed(1);
}

function phases(...list: readonly string[]): string {
  return `  phases:\n${list.map((phase) => `    - {${phase}}`).join('\n')}\n`;
}

const COURSES: readonly Course[] = [
  {
    name: 'constant current to the end',
    cycles: 1,
    write: (sketch) => {
      const rate = sketch.draw.between('rate', 0.3, 0.5);
      return {
        arrivalPercent: 70,
        duty: phases(`discharge_A: ${amperes(sketch, rate)}, for_h: ${(0.85 / rate).toFixed(3)}`, 'rest_h: 0.25'),
        load: '{disconnect_V: null}',
      };
    },
  },
  {
    name: 'constant power to the end',
    cycles: 1,
    write: (sketch) => {
      const rate = sketch.draw.between('rate', 0.3, 0.5);
      return {
        arrivalPercent: 65,
        duty: phases(`discharge_W: ${watts(sketch, rate)}, for_h: ${(0.8 / rate).toFixed(3)}`, 'rest_h: 0.25'),
        ...(sketch.draw.one('disconnect', true, false) ? {} : { load: '{disconnect_V: null}' }),
      };
    },
  },
  {
    name: 'full charge, float and back',
    cycles: 1,
    write: (sketch) => ({
      arrivalPercent: 55,
      duty: phases(
        'charge_for_h: 2.5',
        'rest_h: 0.5',
        `discharge_A: ${amperes(sketch, sketch.draw.between('rate', 0.2, 0.5))}, for_h: 1`,
      ),
      charger: `limit_A: ${amperes(sketch, 0.3)}, absorption_V: ${(14.1 * sketch.positions).toFixed(2)}`,
    }),
  },
  {
    name: 'over-voltage and discharge through it',
    cycles: 1,
    write: (sketch) => ({
      arrivalPercent: 70,
      duty: phases(
        'charge_for_h: 1.75',
        'rest_h: 0.25',
        `discharge_A: ${amperes(sketch, sketch.draw.between('rate', 0.2, 0.4))}, for_h: 0.75`,
        'charge_for_h: 1',
      ),
      charger: `limit_A: ${amperes(sketch, 0.3)}, absorption_V: ${(14.8 * sketch.positions).toFixed(2)}, until: {tail_A: 0, or_after_h: null}, float_V: null`,
    }),
  },
  {
    name: 'under-voltage and charge through it',
    cycles: 1,
    write: (sketch) => ({
      arrivalPercent: 35,
      duty: phases(
        `discharge_W: ${watts(sketch, sketch.draw.between('rate', 0.3, 0.5))}, for_h: 1.5`,
        'charge_for_h: 1',
        `discharge_W: ${watts(sketch, sketch.draw.between('second rate', 0.1, 0.3))}, for_h: 1`,
      ),
      charger: `limit_A: ${amperes(sketch, 0.25)}`,
      load: '{disconnect_V: null}',
    }),
  },
  {
    name: 'load and sun, second day',
    cycles: 2,
    write: (sketch) => {
      const row = (timeH: number, load: number, charge: number, peak: number): string =>
        `${timeH},${watts(sketch, load)},${watts(sketch, charge)},${watts(sketch, Math.max(peak, load))},30`;
      return {
        arrivalPercent: 60,
        charger: `limit_A: ${amperes(sketch, 0.5)}`,
        duty: '  profile: day.csv\n  cycle_h: 6\n',
        files: {
          'day.csv': [
            'time_h,load_W,charge_W,load_peak_W,peak_s',
            row(0, 0.06, 0, 0),
            row(1, 0.05, sketch.draw.between('morning', 0.2, 0.4), 0.4),
            row(2, 0.1, sketch.draw.between('noon', 0.3, 0.6), 0),
            row(4, sketch.draw.between('evening', 0.15, 0.3), 0, 0.5),
            '',
          ].join('\n'),
        },
      };
    },
  },
];

/** @param number from 1 to `RANDOM_STUDIES` */
export function randomStudy(number: number): RandomStudy {
  const uniform = uniformsOf({
    seed: 'circuit',
    block: 0,
    index: number,
    stock: null,
    module: null,
    level: 'bank',
    cell: null,
  });
  const draw: Draw = {
    between: (what, low, high) => low + (high - low) * uniform(what),
    one: (what, ...choices) => choices[Math.floor(choices.length * uniform(what))],
  };
  const i = number - 1;
  const course = COURSES[i % COURSES.length];
  const wiring = WIRINGS[Math.floor(i / COURSES.length)];
  const [fewest, strings] = SIZES[(2 * i) % SIZES.length];
  // One position alone has nothing to tie.
  const positions = wiring.startsWith('cross-linked') ? Math.max(2, fewest) : fewest;
  const sketch: Sketch = { positions, strings, ratedAh: draw.one('rated', 100, 100, 280), draw };
  const { duty, arrivalPercent, charger, load, files = {} } = course.write(sketch);
  const slots = Array.from({ length: strings }, (_, s) =>
    Array.from({ length: positions }, (_, p) => `m${s + 1}-${p + 1}`),
  );
  const text = `motleybank: 1
title: ${wiring}, ${course.name}
seed: ${number}
instances: 1
cycles: ${course.cycles}
stock:
  drawn:
    grade: ${draw.one('grade', 'new-same-make', 'mixed-purchase', 'older', 'older')}
    modules: [${slots.flat().join(', ')}]
    rated_Ah: ${sketch.ratedAh}
    arrival_charge_percent: {nominal: ${arrivalPercent}, module_sd: ${draw.between('arrival', 1, 5).toFixed(1)}, cell_sd: 0.5}
    hysteresis_mV: ${draw.one('hysteresis', 0, 7.5, 7.5, 20)}
    bms: {over_current: {charge_A: 5000, discharge_A: 5000}, forward_drop_V: ${draw.one('drop', 0, 0.35, 0.7)}, reclose_A: ${draw.one('reclose', 'null', '1')}}
duty:
${duty}  ambient_degC: ${draw.one('ambient', 25, 25, 5, 40)}
candidates:
  bank:
    modules: [${slots.map((string) => `[${string.join(', ')}]`).join(', ')}]
${wiringKeys(wiring, slots, draw)}${charger === undefined ? '' : `    charger: {${charger}}\n`}${load === undefined ? '' : `    load: ${load}\n`}`;
  return {
    name: `${String(number).padStart(2, '0')}-${positions}S${strings}P`,
    wiring,
    course: course.name,
    text,
    files,
    fromCycle: course.cycles,
    toCycle: course.cycles,
  };
}

function wiringKeys(wiring: (typeof WIRINGS)[number], slots: readonly string[][], draw: Draw): string {
  if (wiring === 'custom') return `    wiring: custom\n${network(slots, draw)}`;
  const [kind, takeOff] = wiring.split(', ');
  const mOhm = (what: string, low: number, high: number): string => draw.between(what, low, high).toFixed(3);
  const leads = draw.one('equal leads', true, false)
    ? mOhm('leads', 0.8, 3)
    : `[${slots
        .map(
          (_, s) =>
            `{negative: ${mOhm(`negative ${s}`, 0.2, 2)}, between: ${mOhm(`between ${s}`, 0.1, 1)}, positive: ${mOhm(`positive ${s}`, 0.2, 2)}}`,
        )
        .join(', ')}]`;
  const lines = [
    `wiring: ${kind}`,
    `string_lead_mOhm: ${leads}`,
    ...(kind === 'cross-linked' ? [`link_mOhm: ${mOhm('link', 0.3, 5)}`] : []),
    ...(takeOff === undefined
      ? []
      : [`take_off: ${takeOff.replace(' ', '-')}`, `bus_segment_mOhm: ${mOhm('segment', 0.05, 0.5)}`]),
  ];
  return lines.map((line) => `    ${line}\n`).join('');
}

/** Strings of unlike leads, with one tie between the first two where there is something to tie. */
function network(slots: readonly string[][], draw: Draw): string {
  const post = (s: number, p: number, end: string): string => `s${s + 1}p${p + 1}${end}`;
  const copper = (from: string, to: string): string =>
    `{from: ${from}, to: ${to}, mOhm: ${draw.between(`${from} ${to}`, 0.2, 2).toFixed(3)}}`;
  const branches = slots.flatMap((string, s) => [
    copper('minus', post(s, 0, 'n')),
    ...string.flatMap((module, p) => [
      `{module: ${module}, minus: ${post(s, p, 'n')}, plus: ${post(s, p, 'p')}}`,
      copper(post(s, p, 'p'), p + 1 < string.length ? post(s, p + 1, 'n') : 'plus'),
    ]),
  ]);
  if (slots[0].length > 1) branches.push(copper(post(0, 0, 'p'), post(1, 0, 'p')));
  const nodes = slots.flatMap((string, s) => string.flatMap((_, p) => [post(s, p, 'n'), post(s, p, 'p')]));
  return `    network:
      nodes: [minus, plus, ${nodes.join(', ')}]
      bus_minus: minus
      bus_plus: plus
      branches:
${branches.map((branch) => `        - ${branch}\n`).join('')}`;
}
