import type { Candidate } from '../../src/study/study.js';
import { DEFAULT_TABLE } from './default-table.js';
import type { ReferenceBank } from './reference-bank.js';

/** What is said of a bank beside its modules and cycles instead of the common values. */
export type BankSketch = Partial<Candidate> & Pick<ReferenceBank, 'modules' | 'cycles'> & Partial<ReferenceBank>;

/** A bank with common leads and charger settings of 14.2 V and 20 A scaled to it, where a sketch says nothing else. */
export function bankOf(name: string, sketch: BankSketch): ReferenceBank {
  const { modules, cycles, loadFactor, chargeFactor, ocvTables, ...candidate } = sketch;
  const strings = modules.length;
  const foursInSeries = modules[0].reduce((cells, module) => cells + module.capacityAh.length, 0) / 4;
  return {
    name,
    modules,
    cycles,
    ocvTables: ocvTables ?? [DEFAULT_TABLE],
    loadFactor: loadFactor ?? 1,
    chargeFactor: chargeFactor ?? 1,
    candidate: {
      key: name,
      title: name,
      wiring: 'strings',
      strings: modules.map((string) => string.map((module) => module.id)),
      leads: modules.map((_, s) => ({ negativeOhm: 0.0005 + 0.0002 * s, betweenOhm: 0.0005, positiveOhm: 0.0006 })),
      linkOhm: 0.001,
      charger: {
        limitA: 20 * strings,
        absorptionV: 14.2 * foursInSeries,
        tailA: 2 * strings,
        tailHoldS: 120,
        absorptionS: null,
        floatV: null,
        restart: 'each-cycle',
        restartV: 13.2 * foursInSeries,
      },
      load: { disconnectV: null, disconnectDelayS: 10, reconnectV: 13 * foursInSeries },
      commissioning: 'as-received',
      bleed: null,
      ...candidate,
    },
  };
}
