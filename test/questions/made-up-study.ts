import { outcomeLayout } from '../../src/outcomes/block.js';
import { type OutcomeColumn, type OutcomeRow, outcomeColumns } from '../../src/outcomes/columns.js';
import { type CandidateOutcomes, MemoryOutcomes } from '../../src/outcomes/memory-outcomes.js';
import type { Candidate, Study } from '../../src/study/study.js';

/** A candidate of four modules in two strings; invented. */
export function madeUpCandidate(key: string, more: Partial<Candidate> = {}): Candidate {
  const leads = { negativeOhm: 0.0015, betweenOhm: 0.0015, positiveOhm: 0.0015 };
  return {
    key,
    title: `${key} (invented)`,
    wiring: 'strings',
    strings: [
      ['A1', 'A2'],
      ['B1', 'B2'],
    ],
    leads: [leads, leads],
    linkOhm: 0.001,
    charger: {
      limitA: 60,
      absorptionV: 28.4,
      tailA: 4,
      tailHoldS: 60,
      absorptionS: 7200,
      floatV: 27.2,
      restart: 'each-cycle',
      restartV: 26,
    },
    load: { disconnectV: 24, disconnectDelayS: 10, reconnectV: 25.8 },
    commissioning: 'as-received',
    bleed: null,
    ...more,
  };
}

/** A study without stocks: questions and tables never look at them. Invented. */
export function madeUpStudy(more: Partial<Study> = {}): Study {
  const candidates = more.candidates ?? [
    madeUpCandidate('strings'),
    madeUpCandidate('cross', { wiring: 'cross-linked' }),
  ];
  const noSpread = { nominal: 1, relative: true, bank: { law: 'fixed' } } as const;
  return {
    format: 1,
    title: 'Made-up bank',
    seed: '7',
    instances: 4,
    blockSize: 32,
    plan: 'independent',
    cycles: 180,
    confidenceFraction: 0.95,
    driftLimitFraction: 0.2,
    ocvTables: [],
    stocks: [],
    duty: { kind: 'profile', cycleS: 86_400, parts: [], loadFactor: noSpread, chargeFactor: noSpread },
    candidates,
    reference: candidates[0].key,
    acceptance: [],
    ...more,
  };
}

/** Values by column and instance, the twin's first; columns that are not named have none. */
export type MadeUpValues = Readonly<Record<string, readonly (number | null)[]>>;

/**
 * Outcomes of a candidate in memory.
 *
 * @throws Error if there is no column of a name
 */
export function madeUpOutcomes(study: Study, candidate: Candidate, values: MadeUpValues): CandidateOutcomes {
  const columns = outcomeColumns(outcomeLayout(study, candidate));
  const byName = new Map(Object.entries(values));
  for (const name of byName.keys()) {
    if (!columns.some((column) => column.name === name)) throw new Error(`no column ${name}`);
  }
  const count = Math.max(1, ...[...byName.values()].map((list) => list.length));
  const rows = Array.from({ length: count }, (_, instance) => rowOf(columns, byName, instance));
  return { columns, twin: rows[0], rows: rows.slice(1) };
}

function rowOf(
  columns: readonly OutcomeColumn[],
  values: ReadonlyMap<string, readonly (number | null)[]>,
  instance: number,
): OutcomeRow {
  return { instance, values: columns.map((column) => values.get(column.name)?.[instance] ?? null) };
}

/** A store of made-up outcomes, candidate by candidate in the order of the study. */
export function madeUpStore(study: Study, values: readonly MadeUpValues[]): MemoryOutcomes {
  return new MemoryOutcomes(
    new Map(study.candidates.map((candidate, at) => [candidate.key, madeUpOutcomes(study, candidate, values[at])])),
  );
}
