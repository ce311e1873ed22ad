import { describe, expect, it } from 'vitest';
import { MEASURES } from '../../src/measures/registry.js';
import { prepareCandidate, simulateInstance } from '../../src/simulation/simulate-instance.js';
import { summariseMoments } from '../../src/statistics/moments.js';
import { repositoryText, studyOf } from '../study/study-under-test.js';
import { valuesByColumn } from './run-study.js';

/** Banks of each candidate; a share of 0.5 % is told from 0 by 512. */
const BANKS = Number(process.env.BANKS ?? 512);

const study = studyOf(repositoryText('studies/demo.yaml'), {
  'demo-week.csv': repositoryText('studies/demo-week.csv'),
});

/** Early cutoffs and lost load of the registry. */
const EVENTS = MEASURES.filter(({ kind, name }) => kind === 'event' && /^(early_cutoff|load_lost)/.test(name));

describe.each(study.candidates.map(({ key }) => key))('the demo, candidate %s, with every tolerance halved', (key) => {
  const [coarse, fine] = [1, 0.5].map((toleranceFactor) => {
    const prepared = prepareCandidate(study, key, toleranceFactor);
    const valuesOf = valuesByColumn(prepared);
    return Array.from({ length: BANKS }, (_, i) => valuesOf(simulateInstance(prepared, i + 1)));
  });
  const differences = (column: string) =>
    Float64Array.from(coarse ?? [], (bank, i) => (fine?.[i]?.(column) ?? Number.NaN) - bank(column));
  const shift = (column: string) => Math.abs(summariseMoments(differences(column)).mean);

  it.each(EVENTS.map(({ name }) => name))('%s changes in fewer than 0.5 % of banks', (name) => {
    expect(differences(name).filter((change) => change !== 0).length / BANKS).toBeLessThan(0.005);
  });

  it('moves lost capacity and drift by less than 0.1 points', () => {
    expect(shift('lost_capacity')).toBeLessThan(0.1);
    expect(
      shift(study.candidates.find((each) => each.key === key)?.wiring === 'native' ? 'cell_drift' : 'drift'),
    ).toBeLessThan(0.1);
  });

  it('moves trips by less than 2 %', () => {
    const trips = ['over_voltage_trips', 'under_voltage_trips', 'over_current_trips'];
    const total = trips.reduce(
      (sum, name) => sum + summariseMoments(Float64Array.from(coarse ?? [], (b) => b(name))).mean,
      0,
    );
    const moved = Math.abs(trips.reduce((sum, name) => sum + summariseMoments(differences(name)).mean, 0));
    expect(moved).toBeLessThanOrEqual(0.02 * total);
  });
});
