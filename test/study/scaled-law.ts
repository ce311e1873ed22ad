import type { Law } from '../../src/study/study.js';
import { withScaledSpread } from '../../src/study/variants.js';
import { populationOf, studyOf, studyWith } from './study-under-test.js';

const study = studyOf(studyWith({}));

/** A law `factor` times as wide, by way of a variant of a study in which one relative quantity has it. */
export function scaledLawOf(law: Law, factor: number): Law {
  const stock = populationOf(study, 'house');
  const capacityAh = { ...stock.quantities.capacityAh, relative: true, module: law };
  const changed = { ...study, stocks: [{ ...stock, quantities: { ...stock.quantities, capacityAh } }] };
  const chosen = { quantity: 'capacityAh', level: 'module' } as const;
  return populationOf(withScaledSpread(changed, chosen, factor), 'house').quantities.capacityAh.module;
}
