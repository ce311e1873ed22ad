import { DRAWN_FEATURES } from '../measures/drawn-features.js';
import { CYCLE_MEASURES, MEASURES } from '../measures/registry.js';

export type { OutcomeRow } from '../measures/outcome-row.js';

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
