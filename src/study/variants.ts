import type { QuantityName } from './quantities.js';
import type { BankSpread, Law, PopulationStock, Spread, Study } from './study.js';

/** Which spreads of a study a variant changes; a key left out stands for all. */
export interface SpreadChoice {
  readonly stock?: string;
  readonly quantity?: QuantityName;
  readonly level?: 'lot' | 'module' | 'cell';
}

/**
 * Study in which the chosen spreads are `factor` times as wide about the same means.
 *
 *   Q_f(u) = mean + f (Q(u) - mean);   lognormal: sigma of the logarithm times f at a fixed mean
 *
 * @param factor 0 or more; 0 makes the chosen quantities the same in every module
 * @throws RangeError if `factor` is negative or not finite
 */
export function withScaledSpread(study: Study, chosen: SpreadChoice, factor: number): Study {
  if (!(factor >= 0 && Number.isFinite(factor))) throw new RangeError(`factor must be 0 or more, got ${factor}`);
  const stocks = study.stocks.map((stock) => {
    const isChosen = stock.kind === 'population' && (chosen.stock ?? stock.key) === stock.key;
    return isChosen ? scaledStock(stock, chosen, factor) : stock;
  });
  return { ...study, stocks };
}

/** Study without the chosen spreads: what they cost is the difference. */
export function withoutSpread(study: Study, chosen: SpreadChoice): Study {
  return withScaledSpread(study, chosen, 0);
}

/** The twin of a study: every module and factor at its mean, so that what remains is the duty's doing. */
export function twinStudy(study: Study): Study {
  const mean = (spread: BankSpread): BankSpread => ({ ...spread, bank: { law: 'fixed' } });
  const duty = { ...study.duty, loadFactor: mean(study.duty.loadFactor), chargeFactor: mean(study.duty.chargeFactor) };
  return { ...withoutSpread(study, {}), duty };
}

function scaledStock(stock: PopulationStock, chosen: SpreadChoice, factor: number): PopulationStock {
  const quantities = Object.fromEntries(
    Object.entries(stock.quantities).map(([name, spread]) => {
      const isChosen = chosen.quantity === undefined || chosen.quantity === name;
      return [name, isChosen ? scaledSpread(spread, chosen, factor) : spread];
    }),
  ) as Record<QuantityName, Spread>;
  return { ...stock, quantities };
}

function scaledSpread(spread: Spread, { level }: SpreadChoice, factor: number): Spread {
  const base = spread.relative ? 1 : spread.nominal;
  const scaled = (own: 'lot' | 'module' | 'cell'): Law =>
    level === undefined || level === own ? scaledLaw(spread[own], factor, base) : spread[own];
  return { ...spread, lot: scaled('lot'), module: scaled('module'), cell: scaled('cell') };
}

function scaledLaw(law: Law, factor: number, base: number): Law {
  if (law.law === 'fixed' || factor === 0) return { law: 'fixed' };
  switch (law.law) {
    case 'normal':
      return { ...law, sd: factor * law.sd };
    case 'truncated-normal':
      return { ...law, sd: factor * law.sd, lower: factor * law.lower, upper: factor * law.upper };
    case 'uniform':
      return { ...law, halfWidth: factor * law.halfWidth };
    case 'lognormal': {
      const variance = Math.log1p((law.sd / base) ** 2);
      return { ...law, sd: base * Math.sqrt(Math.expm1(factor * factor * variance)) };
    }
  }
}
