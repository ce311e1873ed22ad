import type { SummaryRow } from '../questions/answers.js';
import type { ResultColumn } from './result-column.js';

/** What every row of an answer has. */
type EstimateRow = Pick<SummaryRow, 'estimate' | 'lower' | 'upper' | 'instances' | 'method' | 'note' | 'unit'> & {
  readonly candidate: string;
  readonly measure: string;
  readonly statistic: string;
};

type WindowRow = Pick<SummaryRow, 'fromCycle' | 'toCycle'>;

export const CANDIDATE_COLUMN: ResultColumn<EstimateRow> = {
  name: 'candidate',
  type: 'string',
  title: 'candidate',
  description: 'Key of the candidate in the study.',
  ucum: null,
  required: true,
  value: (row) => row.candidate,
};

export const MEASURE_COLUMN: ResultColumn<EstimateRow> = {
  name: 'measure',
  type: 'string',
  title: 'measure',
  description: 'Name of the measure; its definition is that of the column of this name in the outcomes.',
  ucum: null,
  required: true,
  value: (row) => row.measure,
};

export const WINDOW_COLUMNS: readonly ResultColumn<WindowRow>[] = [
  {
    name: 'from_cycle',
    type: 'integer',
    title: 'from cycle',
    description: 'First cycle that the measure speaks of, counted from 1.',
    ucum: '{cycle}',
    required: true,
    value: (row) => row.fromCycle,
  },
  {
    name: 'to_cycle',
    type: 'integer',
    title: 'to cycle',
    description: 'Last cycle that the measure speaks of.',
    ucum: '{cycle}',
    required: true,
    value: (row) => row.toCycle,
  },
];

/**
 * The columns from `statistic` on.
 *
 * @param statistics what the statistics of the file mean
 */
export function estimateColumns(statistics: string, confidencePercent: number): readonly ResultColumn<EstimateRow>[] {
  return [
    {
      name: 'statistic',
      type: 'string',
      title: 'statistic',
      description: statistics,
      ucum: null,
      required: true,
      value: (row) => row.statistic,
    },
    {
      name: 'unit',
      type: 'string',
      title: 'unit',
      description:
        'Unit of estimate, lower and upper in this row; points are differences of percentages; empty for a pure number.',
      ucum: null,
      required: false,
      value: (row) => row.unit,
    },
    {
      name: 'estimate',
      type: 'number',
      title: 'estimate',
      description: 'Estimate from the sampled banks; empty if there is none, the note says why.',
      ucum: null,
      required: false,
      value: (row) => row.estimate,
    },
    {
      name: 'lower',
      type: 'number',
      title: 'lower end',
      description: 'Lower end of the two-sided interval of the estimate.',
      ucum: null,
      required: false,
      value: (row) => row.lower,
    },
    {
      name: 'upper',
      type: 'number',
      title: 'upper end',
      description: 'Upper end of the two-sided interval of the estimate.',
      ucum: null,
      required: false,
      value: (row) => row.upper,
    },
    {
      name: 'confidence_percent',
      type: 'number',
      title: 'confidence',
      description: 'Two-sided confidence of the interval; empty for the twin, which is not sampled.',
      ucum: '%',
      required: false,
      value: (row) => (row.statistic === 'twin' ? null : confidencePercent),
    },
    {
      name: 'instances',
      type: 'integer',
      title: 'sampled banks',
      description: 'Sampled banks behind the estimate; where there is no estimate, those looked at.',
      ucum: '{bank}',
      required: true,
      value: (row) => row.instances,
    },
    {
      name: 'method',
      type: 'string',
      title: 'method',
      description: 'Method of the interval; empty if there is none.',
      ucum: null,
      required: false,
      value: (row) => row.method,
    },
    {
      name: 'note',
      type: 'string',
      title: 'note',
      description: 'Remarks on this row.',
      ucum: null,
      required: false,
      value: (row) => row.note,
    },
  ];
}
