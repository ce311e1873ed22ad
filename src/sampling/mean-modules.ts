import type { ModuleParameters, PopulationStock, Study } from '../study/study.js';
import { composeModule } from './compose-module.js';
import { meanDeviations } from './level-sampler.js';
import { meanMeasured, withMeasured } from './measured-module.js';
import { type PerQuantity, perQuantity } from './quantity-order.js';

/**
 * The modules of the twin by their ids: every quantity of a population at its mean, explicit modules as written.
 *
 * What follows from several quantities (leakage current) follows here from their means.
 */
export function meanModules(study: Study): ReadonlyMap<string, ModuleParameters> {
  const modules = study.stocks.flatMap((stock) => (stock.kind === 'explicit' ? stock.modules : meanPopulation(stock)));
  return new Map(modules.map((module) => [module.id, module]));
}

function meanPopulation(stock: PopulationStock): ModuleParameters[] {
  const lot = meanDeviations(stock, 'lot');
  const module = meanDeviations(stock, 'module');
  const shared = perQuantity((name) => lot[name] + module[name]);
  const cells = new Array<PerQuantity<number>>(stock.cellsInSeries).fill(meanDeviations(stock, 'cell'));
  const { measured } = stock;
  if (measured === undefined) return stock.moduleIds.map((id) => composeModule(stock, id, shared, cells));
  return stock.moduleIds.map((id) => {
    const own = withMeasured(stock, meanMeasured(measured, id), { shared, cells });
    return composeModule(stock, id, own.shared, own.cells);
  });
}
