import type { ModuleWaveform } from '../contract.js';
import type { Agreement } from './agreement.js';
import type { OracleResult } from './oracle-bank.js';

/** A figure of a bank; null where there is none. */
export interface OracleColumn {
  /** In CSV. */
  readonly name: string;
  /** On the screen, by lines; the last is the unit. */
  readonly head: readonly string[];
  readonly value: (result: OracleResult) => number | null;
  readonly digits: number;
}

/** How far two simulations are apart. */
export function agreementColumns(of: (result: OracleResult) => Agreement | null, prefix = ''): OracleColumn[] {
  const column = (
    name: string,
    head: readonly string[],
    digits: number,
    value: (agreement: Agreement) => number,
  ): OracleColumn => ({
    name: prefix + name,
    head,
    digits,
    value: (result) => {
      const agreement = of(result);
      return agreement === null ? null : value(agreement);
    },
  });
  return [
    column('current_mA', ['module current', 'mA'], 1, ({ waveform }) => 1000 * waveform.currentA),
    column('current_limit_mA', ['its limit', 'mA'], 0, ({ limits }) => 1000 * limits.currentA),
    column('charge_points', ['charge', 'points'], 4, ({ waveform }) => 100 * waveform.charge),
    column('cell_mV', ['cell voltage', 'mV'], 2, ({ waveform }) => 1000 * waveform.plateauCellV),
    column('cell_at_knee_mV', ['at knees', 'mV'], 2, ({ waveform }) => 1000 * waveform.kneeCellV),
    column('terminal_mV_per_cell', ['bus, terminals', 'mV/cell'], 2, ({ waveform }) => 1000 * waveform.terminalV),
    column('events', ['events', '-'], 0, ({ eventCount }) => eventCount),
    column('event_s', ['event time', 's'], 3, ({ events }) => events.timeS),
    column('of_limits_percent', ['most of a limit', '%'], 1, ({ ofLimits }) => 100 * ofLimits),
    column('faults', ['faults', '-'], 0, ({ faults }) => faults.length),
  ];
}

/** What happened in the trace, so that it is seen what was compared. */
export const HAPPENED: readonly OracleColumn[] = [
  counted('over_voltage_trips', 'over-voltage trips', (result) => eventsOf(result, 'over-voltage-trip')),
  counted('under_voltage_trips', 'under-voltage trips', (result) => eventsOf(result, 'under-voltage-trip')),
  counted(
    'reclosings',
    'reclosings',
    (result) => eventsOf(result, 'over-voltage-release') + eventsOf(result, 'under-voltage-release'),
  ),
  counted('minutes_through_diode', 'through a diode', diodeMinutes, 'module-min'),
];

function counted(name: string, head: string, value: (result: OracleResult) => number, unit = '-'): OracleColumn {
  return { name, head: [head, unit], digits: 0, value };
}

function eventsOf({ engineAndDeck }: OracleResult, kind: string): number {
  return engineAndDeck.traced.events.filter((event) => event.kind === kind).length;
}

/** Current from which a path is taken to conduct, A: far above what a blocked path leaks. */
const CONDUCTS_A = 0.1;

/** Module samples, a minute each, in which current flows past an open path. */
function diodeMinutes({ engineAndDeck }: OracleResult): number {
  const conducts = ({ currentA, chargeOpen, dischargeOpen }: ModuleWaveform): number =>
    currentA.filter((a, i) => (chargeOpen[i] && a < -CONDUCTS_A) || (dischargeOpen[i] && a > CONDUCTS_A)).length;
  return engineAndDeck.traced.waveform.modules.reduce((sum, module) => sum + conducts(module), 0);
}

/** Processor times, and how far the loose run they are about is off. */
export const SPEED: readonly OracleColumn[] = [
  {
    name: 'attempts',
    head: ['attempts of the simulator', '-'],
    digits: 0,
    value: ({ engineAndDeck: { simulated } }) => simulated.attempts,
  },
  {
    name: 'engine_ms',
    head: ['engine', 'ms'],
    digits: 2,
    value: ({ engineAndDeck: { speed } }) => 1000 * speed.engineCpuS,
  },
  {
    name: 'simulator_loose_ms',
    head: ['simulator, loose', 'ms'],
    digits: 0,
    value: ({ engineAndDeck: { speed } }) => 1000 * speed.looseCpuS,
  },
  {
    name: 'simulator_over_engine',
    head: ['simulator / engine', '-'],
    digits: 0,
    value: ({ engineAndDeck: { speed } }) => speed.looseCpuS / speed.engineCpuS,
  },
  {
    name: 'loose_current_mA',
    head: ['loose run: current', 'mA'],
    digits: 1,
    value: ({ engineAndDeck: { speed } }) => 1000 * speed.loose.waveform.currentA,
  },
  {
    name: 'loose_event_s',
    head: ['loose run: event', 's'],
    digits: 2,
    value: ({ engineAndDeck: { speed } }) => speed.loose.events.timeS,
  },
];
