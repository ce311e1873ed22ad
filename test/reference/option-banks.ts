import type { ModuleParameters } from '../../src/study/study.js';
import { bankOf } from './bank-of.js';
import { referenceDuty, repeated, segmentOf } from './duties.js';
import { type ModuleSketch, PLAIN_BMS, plainModule } from './plain-module.js';
import type { ReferenceBank } from './reference-bank.js';

/** Four unlike modules as strings of two; `more` is said of all of them. Invented. */
function unlikePairs(more: Partial<ModuleParameters> = {}, bms: ModuleSketch['bms'] = {}): ModuleParameters[][] {
  const module = (id: string, sketch: ModuleSketch): ModuleParameters =>
    plainModule(id, { ...sketch, rest: { ...sketch.rest, ...more }, bms });
  return [
    [
      module('a', { capacityAh: [102, 101.6, 102.3, 101.9], arrivalCharge: [0.62, 0.622, 0.618, 0.621] }),
      module('b', {
        capacityAh: [93, 92.4, 93.3, 91.8],
        resistanceOhm: [0.0012, 0.00124, 0.00118, 0.00122],
        arrivalCharge: [0.55, 0.555, 0.548, 0.56],
        rest: { standbyA: 0.015 },
      }),
    ],
    [
      module('c', {
        capacityAh: [90, 91, 90.6, 89.7],
        resistanceOhm: [0.00125, 0.0012, 0.00128, 0.00126],
        arrivalCharge: [0.5, 0.49, 0.505, 0.498],
        rest: { overVoltageV: 3.63 },
      }),
      module('d', { capacityAh: [101.8, 102.2, 102, 101.5], arrivalCharge: [0.6, 0.598, 0.603, 0.601] }),
    ],
  ];
}

const kelvin = (celsius: number): number => celsius + 273.15;
const ACTIVATION = { resistanceJPerMol: 20_000, leakageJPerMol: 39_000 };

/** Frost, in which charge is refused, a thaw in which the warmer modules may charge, a mild and a hot spell. */
function winter(): ReferenceBank {
  const chargeRefusal = { belowK: kelvin(0), releaseK: kelvin(4) };
  const at = (celsius: number, segment: ReturnType<typeof segmentOf>) => ({ ...segment, ambientK: kelvin(celsius) });
  return bankOf('winter', {
    modules: unlikePairs({ activation: ACTIVATION }, { chargeRefusal }).map((string, s) =>
      string.map((module) => ({ ...module, temperatureOffsetK: s })),
    ),
    slotOffsetK: [
      [0, 2],
      [-1, 1.5],
    ],
    cycles: [
      [
        at(-12, segmentOf(1.51, { loadW: 700 })),
        at(-8, segmentOf(0.97, { loadW: 100, chargeW: 600 })),
        at(2.5, segmentOf(1.5, { chargeW: 600 })),
        at(8, segmentOf(4, { chargeW: null, endsWhenCharged: true })),
        at(8, segmentOf(1)),
        at(-20, segmentOf(2, { loadW: 1200 })),
        at(35, segmentOf(2, { chargeW: 500, loadW: 50 })),
      ],
    ],
  });
}

/** A law of ageing hurried a few hundred times, so that a few cycles cost what years would. */
function ageing(law: 'wang-2011' | 'naumann', rate: number): ReferenceBank {
  const settings = { law, rate, initialFadeFraction: 0.04, resistanceGrowth: 2 };
  const day = (celsius: number) => referenceDuty(4).map((segment) => ({ ...segment, ambientK: kelvin(celsius) }));
  return bankOf(law, {
    modules: unlikePairs({ ageing: settings, activation: ACTIVATION }).map((string, s) =>
      // One module does not age.
      string.map(({ ageing: _, ...module }, p) => (s + p === 2 ? module : { ...module, ageing: settings })),
    ),
    slotOffsetK: [
      [0, 3],
      [0, 5],
    ],
    cycles: [day(35), day(15), day(28)],
  });
}

const EQUALISER = { currentA: 5, startV: 0.02, fullV: 0.1, efficiency: 0.9, standbyA: 0.005, enableV: 27.2 };
const LOCK_BY_HAND = { ...PLAIN_BMS.overCurrent, opens: 'both', lockAfterTrips: 2, lock: 'manual' } as const;

/**
 * Banks for what may be said of a bank beside modules, leads, charger and load: temperature, ageing, equalisers, visits,
 * commissioning, rails, networks, peaks, packs that are bought as such. Invented, and short.
 */
export function optionBanks(): ReferenceBank[] {
  return [
    winter(),
    ageing('wang-2011', 20),
    ageing('naumann', 10),
    bankOf('equalised', { modules: unlikePairs(), equaliser: EQUALISER, cycles: repeated(referenceDuty(4), 3) }),
    bankOf('equalised-always', {
      modules: [[...unlikePairs().flat().slice(0, 3)]],
      equaliser: { ...EQUALISER, startV: 0.005, fullV: 0.03, currentA: 3, enableV: null },
      cycles: [referenceDuty(3)],
    }),
    bankOf('equalised-cross-linked', {
      modules: unlikePairs(),
      wiring: 'cross-linked',
      equaliser: { ...EQUALISER, startV: 0, currentA: 10 },
      cycles: [referenceDuty(4)],
    }),
    bankOf('visited', {
      // The visit finds the guards of both strings locked.
      modules: unlikePairs({ overCurrentDischargeA: 30 }, { overCurrent: LOCK_BY_HAND }),
      upkeep: { everyCycles: 1 },
      commissioning: 'each-module-full',
      cycles: repeated([segmentOf(0.5, { loadW: 1800 }), segmentOf(1, { loadW: 900 })], 2),
    }),
    bankOf('visited-by-drift', {
      modules: unlikePairs(),
      wiring: 'cross-linked',
      upkeep: { driftFraction: 0.05 },
      cycles: repeated(referenceDuty(4), 2),
    }),
    bankOf('packs-visited', {
      modules: ['p', 'q'].map((id, s) => [
        plainModule(id, {
          capacityAh: [100, 101, 99, 100.5, 99.5, 100, 100.2, 99.8].map((ah) => ah - 4 * s),
          arrivalCharge: [0.85, 0.84, 0.86, 0.855, 0.845, 0.85, 0.85, 0.852].map((z) => z - 0.2 * s),
        }),
      ]),
      wiring: 'native',
      upkeep: { everyS: 12 * 3600 },
      cycles: repeated([segmentOf(1, { loadW: 900 }), segmentOf(11, { chargeW: 500 })], 2),
    }),
    bankOf('rails-diagonal', {
      modules: [...unlikePairs(), [plainModule('e', { arrivalCharge: [0.55, 0.56, 0.55, 0.55] }), plainModule('f')]],
      wiring: 'cross-linked',
      takeOff: { kind: 'diagonal', segmentOhm: [0.0006, 0.0009] },
      cycles: [referenceDuty(6)],
    }),
    bankOf('rails-same-end', {
      modules: unlikePairs()
        .flat()
        .map((module) => [module]),
      takeOff: { kind: 'same-end', segmentOhm: [0.0005, 0.0007, 0.0004] },
      cycles: [referenceDuty(4)],
    }),
    bankOf('custom', {
      modules: unlikePairs(),
      wiring: 'custom',
      // Two strings that share their last lead, tied between their modules at unlike places.
      network: {
        nodes: 6,
        branches: [
          { kind: 'module', module: 0, from: 0, to: 2 },
          { kind: 'module', module: 1, from: 2, to: 4 },
          { kind: 'module', module: 2, from: 0, to: 3 },
          { kind: 'module', module: 3, from: 3, to: 5 },
          { kind: 'link', ohm: 0.0012, from: 2, to: 3 },
          { kind: 'rail', ohm: 0.0007, from: 4, to: 5 },
          { kind: 'rail', ohm: 0.0011, from: 4, to: 1 },
        ],
      },
      cycles: [referenceDuty(4)],
    }),
    bankOf('peaks', {
      modules: unlikePairs({ overCurrentDischargeA: 48 }),
      load: { disconnectV: 24.6, disconnectDelayS: 10, reconnectV: 25.5 },
      cycles: [
        [0.3, 0.2, 1].flatMap((hours) => [
          segmentOf(hours, { loadW: 600 }),
          segmentOf(8 / 3600, { loadW: 3200 }),
          segmentOf(0.2, { loadW: 200, chargeW: 300 }),
          segmentOf(25 / 3600, { loadW: 2600 }),
        ]),
      ],
    }),
  ];
}
