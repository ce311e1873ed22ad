import type { ModuleParameters } from '../../src/study/study.js';
import { bankOf } from './bank-of.js';
import { profileDays, referenceDuty, repeated, segmentOf } from './duties.js';
import { PLAIN_BMS, plainModule } from './plain-module.js';
import type { ReferenceBank } from './reference-bank.js';

/** Two newer and two older modules, mixed in each string. */
function fourUnlike(): ModuleParameters[][] {
  return [
    [
      plainModule('new-1', { capacityAh: [102, 101.6, 102.3, 101.9], arrivalCharge: [0.62, 0.622, 0.618, 0.621] }),
      plainModule('old-1', {
        capacityAh: [93, 92.4, 93.3, 91.8],
        resistanceOhm: [0.0012, 0.00124, 0.00118, 0.00122],
        arrivalCharge: [0.55, 0.555, 0.548, 0.56],
        leakageA: [0.0006, 0.0008, 0.0005, 0.0007],
        rest: { standbyA: 0.015 },
      }),
    ],
    [
      plainModule('old-2', {
        capacityAh: [90, 91, 90.6, 89.7],
        resistanceOhm: [0.00125, 0.0012, 0.00128, 0.00126],
        arrivalCharge: [0.5, 0.49, 0.505, 0.498],
        efficiency: 0.9995,
        rest: { standbyA: 0.014, overVoltageV: 3.63, underVoltageV: 2.55 },
      }),
      plainModule('new-2', { capacityAh: [101.8, 102.2, 102, 101.5], arrivalCharge: [0.6, 0.598, 0.603, 0.601] }),
    ],
  ];
}

/** Equal strings of plain modules that arrive as listed: [string][position] of one charge fraction. */
function plainStrings(arrival: readonly (readonly number[])[], rest: Partial<ModuleParameters> = {}) {
  return arrival.map((string, s) =>
    string.map((z, p) =>
      plainModule(`m${s + 1}-${p + 1}`, { arrivalCharge: [z, z + 0.004, z - 0.003, z + 0.001], rest }),
    ),
  );
}

/** A pair under heavy load, then heavy charge: either string cuts off, the other carries too much, both lock. */
function cascade(): ReferenceBank {
  return bankOf('1s2p-cascade', {
    // Unlike retry times, so that a retry and a trip never fall on one instant.
    modules: [
      { id: 'short', z: 0.16, retryS: 60 },
      { id: 'long', z: 0.45, retryS: 47 },
    ].map(({ id, z, retryS }) => [
      plainModule(id, {
        arrivalCharge: [z, z + 0.004, z - 0.003, z + 0.001],
        rest: { overCurrentDischargeA: 60, overCurrentChargeA: 36 },
        bms: { overCurrent: { ...PLAIN_BMS.overCurrent, retryS } },
      }),
    ]),
    cycles: [
      [
        segmentOf(0.75, { loadA: 72 }),
        segmentOf(0.5),
        segmentOf(4, { chargeW: null, endsWhenCharged: true }),
        segmentOf(0.25, { loadA: 20 }),
        segmentOf(4, { chargeW: 400, endsWhenCharged: true }),
      ],
    ],
  });
}

/**
 * Banks to hold two simulators against each other, invented data. Between them: the three wirings, one to four strings
 * and positions, unlike modules, each bleed rule and both its conditions, both charger ends, float and restart,
 * simultaneous load and charge, under- and over-voltage, over-current with retry, lock and release, the low-voltage
 * disconnect, an overload, sleep.
 */
export function referenceBanks(): ReferenceBank[] {
  const noBleed = { rule: 'none' } as const;
  const bleedEach = { rule: 'each' } as const;
  return [
    bankOf('1s2p', {
      modules: [
        [plainModule('a', { capacityAh: [101, 100.5, 101.2, 100.8], arrivalCharge: [0.6, 0.605, 0.598, 0.602] })],
        [
          plainModule('b', {
            capacityAh: [95, 95.5, 94.8, 95.1],
            resistanceOhm: [0.001, 0.0011, 0.00105, 0.001],
            arrivalCharge: [0.7, 0.71, 0.695, 0.702],
          }),
        ],
      ],
      cycles: repeated(referenceDuty(2), 3),
    }),
    bankOf('2s2p-strings', { modules: fourUnlike(), bleed: bleedEach, cycles: repeated(referenceDuty(4), 3) }),
    bankOf('2s2p-cross-linked', {
      modules: fourUnlike(),
      wiring: 'cross-linked',
      cycles: repeated(referenceDuty(4), 3),
    }),
    bankOf('2p-native', { modules: fourUnlike(), wiring: 'native', cycles: repeated(referenceDuty(4), 3) }),
    bankOf('4s1p-no-bleed', {
      modules: plainStrings([[0.62, 0.6, 0.65, 0.58]]),
      bleed: noBleed,
      cycles: repeated(referenceDuty(4), 3),
    }),
    bankOf('3s2p-profile', {
      modules: plainStrings([
        [0.7, 0.72, 0.66],
        [0.6, 0.64, 0.67],
      ]),
      wiring: 'cross-linked',
      cycles: profileDays(6, ['clear', 'dull', 'clear']),
      loadFactor: 1.07,
      chargeFactor: 0.94,
    }),
    bankOf('2s4p-profile', {
      modules: [0.002, 0.005, 0.009, 0.015].map((standbyA, s) =>
        [0.85, 0.8].map((z, p) =>
          plainModule(`m${s + 1}-${p + 1}`, {
            arrivalCharge: [z, z - 0.01, z + 0.01, z].map((each) => each - 0.05 * s),
            rest: { standbyA: standbyA + 0.001 * p },
          }),
        ),
      ),
      bleed: { rule: 'above-lowest', when: 'charging', currentA: 0.1, startV: 3.4 },
      charger: {
        limitA: 60,
        absorptionV: 28.4,
        tailA: 0,
        tailHoldS: 120,
        absorptionS: 3600,
        floatV: 27,
        restart: 'below-voltage',
        restartV: 26.4,
      },
      cycles: profileDays(8, ['clear', 'dull', 'clear']),
    }),
    cascade(),
    bankOf('2s2p-disconnect', {
      modules: fourUnlike(),
      load: { disconnectV: 23.8, disconnectDelayS: 10, reconnectV: 26.4 },
      cycles: [
        [segmentOf(8, { loadW: 900 }), segmentOf(4, { loadW: 150, chargeW: 700 }), segmentOf(2, { loadW: 1000 })],
        [segmentOf(5, { loadW: 900 }), segmentOf(5, { chargeW: 1200 })],
      ],
    }),
    bankOf('2s2p-deep', {
      modules: fourUnlike().map((string) =>
        string.map((module) => ({
          ...module,
          bms: { ...module.bms, underVoltageReleaseOnCharge: true, asleepAfterS: 7200 },
        })),
      ),
      cycles: [
        [
          segmentOf(5, { loadW: 700 }),
          segmentOf(1, { loadW: 200, chargeW: 50 }),
          segmentOf(3),
          segmentOf(7, { chargeW: 900, loadW: 100 }),
        ],
        [segmentOf(3, { loadW: 800 }), segmentOf(4, { chargeW: 1500 })],
      ],
    }),
    bankOf('1s2p-overload', {
      modules: plainStrings([[0.3], [0.34]], { pathResistanceOhm: 0.06, overCurrentDischargeA: 500 }),
      cycles: [
        [
          segmentOf(0.1, { loadW: 1340 }),
          segmentOf(0.2, { loadW: 1200 }),
          segmentOf(0.1, { loadW: 1500 }),
          segmentOf(1),
        ],
      ],
    }),
    bankOf('1s1p-eight-cells', {
      modules: [
        [
          plainModule('eight', {
            capacityAh: [100, 101, 99, 100.5, 99.5, 100, 100.2, 99.8],
            arrivalCharge: [0.95, 0.94, 0.96, 0.955, 0.945, 0.95, 0.95, 0.952],
          }),
        ],
      ],
      bleed: { rule: 'each', currentA: 0.2 },
      cycles: repeated(
        [segmentOf(4, { chargeW: null, endsWhenCharged: true }), segmentOf(2), segmentOf(2, { loadA: 30 })],
        3,
      ),
    }),
  ];
}
