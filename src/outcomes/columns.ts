import { CYCLE_MEASURES, MEASURES } from '../measures/registry.js';

/** A column of the outcomes of one candidate. */
export interface OutcomeColumn {
  readonly name: string;
  readonly role: 'drawn' | 'measure' | 'by-cycle';
  readonly unit: string;
  readonly definition: string;
  /** The measure, without the checkpoint. */
  readonly measure: string | null;
  /** Checkpoint cycle of a by-cycle column. */
  readonly cycle: number | null;
}

/** What fixes the columns of a candidate's outcomes. */
export interface OutcomeLayout {
  readonly strings: number;
  readonly positions: number;
  /** Cycles at whose end the by-cycle measures are recorded, ascending, at most 64. */
  readonly checkpoints: readonly number[];
}

/** One instance of one candidate: values in the order of the layout's columns, null where a measure does not apply. */
export interface OutcomeRow {
  /** From 1. */
  readonly instance: number;
  readonly values: readonly (number | null)[];
}

/** The outcomes of one block: instances in ascending order. */
export interface OutcomeBlock {
  /** From 1. */
  readonly block: number;
  readonly rows: readonly OutcomeRow[];
}

/** Features of a module that are kept beside the outcomes, in column order. */
export const DRAWN_FEATURES = [
  { name: 'capacity_Ah', unit: 'Ah', definition: 'Capacity of the module: its smallest cell.' },
  { name: 'resistance_mOhm', unit: 'mOhm', definition: 'Series resistance of the module: cells, joints and BMS path.' },
  { name: 'standby_mA', unit: 'mA', definition: 'Standby current of the BMS.' },
  { name: 'leakage_mA', unit: 'mA', definition: 'Mean leakage current of the cells.' },
  { name: 'efficiency', unit: '', definition: 'Mean coulombic efficiency of the cells.' },
  { name: 'arrival_charge_percent', unit: '%', definition: 'Capacity-weighted mean charge of the cells as received.' },
  { name: 'over_voltage_V', unit: 'V', definition: 'Over-voltage threshold.' },
  { name: 'under_voltage_V', unit: 'V', definition: 'Under-voltage threshold.' },
] as const;

/** Columns in order: bank factors, drawn features slot by slot, measures, by-cycle values. */
export function outcomeColumns(layout: OutcomeLayout): readonly OutcomeColumn[] {
  const drawn = (name: string, unit: string, definition: string): OutcomeColumn => ({
    name,
    role: 'drawn',
    unit,
    definition,
    measure: null,
    cycle: null,
  });
  const columns: OutcomeColumn[] = [
    drawn('load_factor', '', 'Factor on every load of this bank.'),
    drawn('charge_factor', '', 'Factor on the charging power of this bank.'),
  ];
  for (let string = 1; string <= layout.strings; string++) {
    for (let position = 1; position <= layout.positions; position++) {
      for (const feature of DRAWN_FEATURES) {
        columns.push(
          drawn(
            `s${string}p${position}_${feature.name}`,
            feature.unit,
            `${feature.definition} String ${string}, position ${position} from the negative end.`,
          ),
        );
      }
    }
  }
  for (const { name, unit, definition } of MEASURES) {
    columns.push({ name, role: 'measure', unit, definition, measure: name, cycle: null });
  }
  for (const cycle of layout.checkpoints) {
    for (const { name, unit, definition } of CYCLE_MEASURES) {
      columns.push({
        name: `${name}_at_cycle_${cycle}`,
        role: 'by-cycle',
        unit,
        definition: `${definition} At the end of cycle ${cycle}.`,
        measure: name,
        cycle,
      });
    }
  }
  return columns;
}

/**
 * Checkpoint cycles of a horizon: the first and last cycle and evenly spaced ones between, at most `most`.
 * Spacing is the smallest whole number that fits, so that a longer horizon only thins them.
 */
export function checkpointCycles(cycles: number, most = 31): readonly number[] {
  if (cycles <= most) return Array.from({ length: cycles }, (_, index) => index + 1);
  const spacing = Math.ceil(cycles / (most - 1));
  const checkpoints = [1];
  for (let cycle = spacing; cycle < cycles; cycle += spacing) if (cycle > 1) checkpoints.push(cycle);
  checkpoints.push(cycles);
  return checkpoints;
}
