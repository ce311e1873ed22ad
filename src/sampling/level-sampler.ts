import type { QuantityName } from '../study/quantities.js';
import type { PopulationStock } from '../study/study.js';
import { copulaOf } from './copula.js';
import { type Deviation, deviationOf } from './deviation.js';
import { type PerQuantity, perQuantity, QUANTITY_ORDER } from './quantity-order.js';
import type { UniformOf } from './streams.js';

export type Level = 'lot' | 'module' | 'cell';

/** Draws the deviations of one level of a stock, in the units of their laws. */
export type LevelSampler = (uniformOf: UniformOf) => PerQuantity<number>;

/** Deviations of a stock at one level, made ready once and drawn for every lot, module or cell. */
export function levelSampler(stock: PopulationStock, level: Level): LevelSampler {
  const deviations = levelDeviations(stock, level);
  const copula = copulaOf(stock.correlations.filter((correlation) => correlation.level === level));
  const alone = QUANTITY_ORDER.filter((name) => deviations[name].spreads && !copula.members.includes(name));
  const unspread = perQuantity(() => 0);
  return (uniformOf) => {
    const drawn: Record<QuantityName, number> = { ...unspread };
    for (const name of alone) drawn[name] = deviations[name].quantile(uniformOf(name));
    if (copula.members.length > 0) {
      const together = copula.uniforms(uniformOf);
      copula.members.forEach((name, member) => {
        drawn[name] = deviations[name].quantile(together[member] ?? Number.NaN);
      });
    }
    return drawn;
  };
}

/** Mean deviations of a level: 0 but for normals truncated at unequal distances. */
export function meanDeviations(stock: PopulationStock, level: Level): PerQuantity<number> {
  const deviations = levelDeviations(stock, level);
  return perQuantity((name) => deviations[name].mean);
}

function levelDeviations(stock: PopulationStock, level: Level): PerQuantity<Deviation> {
  return perQuantity((name) => {
    const spread = stock.quantities[name];
    return deviationOf(spread[level], spread.relative ? 1 : spread.nominal);
  });
}
