import { meanOf } from '../mathematics/mean.js';
import type { QuantityName } from './quantities.js';
import type { BankSpread, Law, MeasuredModules, PopulationStock, Spread, Study } from './study.js';

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
  const { measured } = stock;
  return { ...stock, quantities, ...(measured && { measured: scaledMeasured(measured, chosen, factor) }) };
}

/** Measured values spread between modules: by their uncertainty, and by the row where that is drawn. */
function scaledMeasured(measured: MeasuredModules, { quantity, level }: SpreadChoice, factor: number): MeasuredModules {
  if (level !== undefined && level !== 'module') return measured;
  const isChosen = (place: number): boolean => quantity === undefined || measured.quantities[place] === quantity;
  const uncertaintySd = measured.uncertaintySd.map((sd, place) => (isChosen(place) ? factor * sd : sd));
  if (measured.rows === 'of-each-module') return { ...measured, uncertaintySd };
  const means = measured.quantities.map((_, place) => meanOf(measured.values.map((row) => row[place] ?? Number.NaN)));
  const scaled = (value: number, place: number): number => {
    const mean = means[place] ?? Number.NaN;
    return isChosen(place) ? mean + factor * (value - mean) : value;
  };
  return { ...measured, uncertaintySd, values: measured.values.map((row) => row.map(scaled)) };
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
    case 'triangular':
    case 'beta':
      return { ...law, halfWidth: factor * law.halfWidth };
    case 'weibull':
      return { ...law, sd: factor * law.sd };
    case 'resampled':
      return { ...law, values: law.values.map((value) => factor * value) };
    case 'mixture':
      return { ...law, factor: factor * law.factor };
    case 'lognormal': {
      const variance = Math.log1p((law.sd / base) ** 2);
      return { ...law, sd: base * Math.sqrt(Math.expm1(factor * factor * variance)) };
    }
  }
}
