import { windowCycles } from '../measures/measure.js';
import { measureNamed } from '../measures/registry.js';
import type { OutcomeColumn } from '../outcomes/columns.js';
import type { ResultColumn } from './result-column.js';
import { ucumCode } from './ucum.js';

/** A column as the data package describes it. */
export interface DataField {
  readonly name: string;
  readonly type: 'string' | 'integer' | 'number';
  readonly title: string;
  readonly description: string;
  /** UCUM code; absent for text and where the unit differs from row to row. */
  readonly unit?: string;
  /** Column that holds the unit of each row. */
  readonly unitColumn?: string;
  readonly constraints?: {
    readonly required?: boolean;
    readonly unique?: boolean;
    readonly enum?: readonly number[];
    readonly minimum?: number;
  };
}

/** Fields of a results file. */
export function resultFields<Row>(columns: readonly ResultColumn<Row>[]): readonly DataField[] {
  return columns.map(({ name, type, title, description, ucum, required }) => ({
    name,
    type,
    title,
    description,
    ...(ucum !== null ? { unit: ucum } : type === 'string' ? {} : { unitColumn: 'unit' }),
    ...(required ? { constraints: { required } } : {}),
  }));
}

/**
 * Fields of the outcomes of a candidate.
 *
 * @param cycles horizon of the study
 */
export function outcomeFields(columns: readonly OutcomeColumn[], cycles: number): readonly DataField[] {
  const instance: DataField = {
    name: 'instance',
    type: 'integer',
    title: 'sampled bank',
    description:
      'Number of the sampled bank, from 1, the same modules in every candidate of the same stock; 0 is the twin.',
    unit: '1',
    constraints: { required: true, unique: true, minimum: 0 },
  };
  return [instance, ...columns.map((column) => outcomeField(column, cycles))];
}

function outcomeField({ name, role, unit, definition }: OutcomeColumn, cycles: number): DataField {
  const measure = role === 'measure' ? measureNamed(name) : undefined;
  if (measure === undefined) {
    return { name, type: 'number', title: name.replaceAll('_', ' '), description: definition, unit: ucumCode(unit) };
  }
  const { from, to } = windowCycles(measure.window, cycles);
  const description = `${definition} Cycles ${from} to ${to}.`;
  if (measure.kind === 'amount')
    return { name, type: 'number', title: measure.title, description, unit: ucumCode(unit) };
  return {
    name,
    type: 'integer',
    title: measure.title,
    description: `${description} 1 if it happened, else 0.`,
    unit: '1',
    constraints: { enum: [0, 1] },
  };
}
