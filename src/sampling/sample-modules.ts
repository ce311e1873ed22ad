import type { ModuleParameters, PopulationStock, Study } from '../study/study.js';
import { type BlockAddress, blockAddress } from './block-address.js';
import { composeModule } from './compose-module.js';
import { levelSampler } from './level-sampler.js';
import { perQuantity } from './quantity-order.js';
import { uniformsOf } from './streams.js';

/**
 * The modules of one instance by their ids: drawn for populations, as written for explicit stocks.
 *
 * What is drawn for a module depends on seed, block size, instance, its stock and its own id only. Candidates have no
 * part in it, so all of them get the same modules. All modules of a stock share the one lot of their instance. A pack may
 * take the cell draws of the modules it is compared with; its lot and module draws are its own all the same.
 *
 * @param instance from 1
 * @throws RangeError if the instance is not a whole number from 1, or a stock has laws or correlations that cannot be
 */
export function sampleModules(study: Study, instance: number): ReadonlyMap<string, ModuleParameters> {
  const address = blockAddress(instance, study.blockSize);
  const modules = study.stocks.flatMap((stock) =>
    stock.kind === 'explicit' ? stock.modules : samplePopulation(study.seed, stock, address),
  );
  return new Map(modules.map((module) => [module.id, module]));
}

function samplePopulation(seed: string, stock: PopulationStock, address: BlockAddress): ModuleParameters[] {
  const ofStock = { seed, ...address, stock: stock.key, module: null, cell: null };
  const drawModule = levelSampler(stock, 'module');
  const drawCell = levelSampler(stock, 'cell');
  const lot = levelSampler(stock, 'lot')(uniformsOf({ ...ofStock, level: 'lot' }));
  return stock.moduleIds.map((id) => {
    const ofModule = { ...ofStock, module: id };
    const own = drawModule(uniformsOf({ ...ofModule, level: 'module' }));
    const cells = Array.from({ length: stock.cellsInSeries }, (_, place) => {
      const drawnAs = stock.cellsDrawnAs?.[id]?.[place] ?? { stock: stock.key, module: id, cell: place + 1 };
      return drawCell(uniformsOf({ ...ofStock, ...drawnAs, level: 'cell' }));
    });
    const shared = perQuantity((name) => lot[name] + own[name]);
    return composeModule(stock, id, shared, cells);
  });
}
