import type { BankSpread, Study } from '../study/study.js';
import { blockAddress } from './block-address.js';
import { type Deviation, deviationOf } from './deviation.js';
import { plannedUniforms } from './planned-uniforms.js';
import { spreadValue } from './spread-value.js';

/** What is common to a whole bank. */
export interface BankFactors {
  /** Factor on every load. */
  readonly loadFactor: number;
  /** Factor on the charging power. */
  readonly chargeFactor: number;
}

/**
 * The factors of one instance, the same in every candidate.
 *
 * @param instance from 1
 * @throws RangeError if the instance is not a whole number from 1, or a law cannot be
 */
export function sampleBankFactors(study: Study, instance: number): BankFactors {
  const { block, index } = blockAddress(instance, study.blockSize);
  const scope = { seed: study.seed, block, index, stock: null, module: null, level: 'bank', cell: null } as const;
  const uniformOf = plannedUniforms(study)(scope);
  const { loadFactor, chargeFactor } = study.duty;
  return {
    loadFactor: spreadValue(loadFactor, bankDeviation(loadFactor).quantile(uniformOf('loadFactor'))),
    chargeFactor: spreadValue(chargeFactor, bankDeviation(chargeFactor).quantile(uniformOf('chargeFactor'))),
  };
}

/** The factors of the twin: both at their means. */
export function meanBankFactors(study: Study): BankFactors {
  const { loadFactor, chargeFactor } = study.duty;
  return {
    loadFactor: spreadValue(loadFactor, bankDeviation(loadFactor).mean),
    chargeFactor: spreadValue(chargeFactor, bankDeviation(chargeFactor).mean),
  };
}

function bankDeviation(spread: BankSpread): Deviation {
  return deviationOf(spread.bank, spread.relative ? 1 : spread.nominal);
}
