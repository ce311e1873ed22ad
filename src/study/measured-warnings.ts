import type { QuantityName } from './quantities.js';
import { QUANTITY_KEYS } from './quantity-keys.js';
import type { PopulationStock, Study } from './study.js';

/** @returns measured columns that nothing asks for, one sentence each */
export function measuredWarnings(study: Study): readonly string[] {
  return study.stocks.flatMap((stock) => {
    if (stock.kind !== 'population') return [];
    return (stock.measured?.quantities ?? []).flatMap((name) => {
      const reason = reasonOfNoEffect(name, stock, study);
      if (reason === undefined) return [];
      return [
        `stock ${stock.key}: the measured column ${QUANTITY_KEYS[name]} has no effect, since ${reason.since}; ` +
          `${reason.remedy}, or leave the column out`,
      ];
    });
  });
}

interface Reason {
  readonly since: string;
  readonly remedy: string;
}

function reasonOfNoEffect(name: QuantityName, { ageing, bms }: PopulationStock, study: Study): Reason | undefined {
  switch (name) {
    case 'ageingRate':
      if (ageing !== undefined) return undefined;
      return { since: 'its cells do not age', remedy: 'give the stock a law of ageing' };
    case 'refusalBelowK':
    case 'refusalReleaseK':
      if (bms.chargeRefusal !== undefined) return undefined;
      return { since: 'its BMS never refuses charge', remedy: 'set bms.charge_refusal.below_degC' };
    case 'bleedA':
    case 'bleedStartV':
      if (bms.bleed.rule !== 'none' || study.candidates.some(({ bleed }) => bleed?.rule !== undefined))
        return undefined;
      return { since: 'its cells do not bleed', remedy: 'set bms.bleed.rule' };
    default:
      return undefined;
  }
}
