import type { ModuleParameters, PopulationStock, Study } from '../study/study.js';
import { blockAddress } from './block-address.js';
import { composeModule } from './compose-module.js';
import { levelSampler } from './level-sampler.js';
import { lotOf } from './lot-of.js';
import { sampleMeasured, withMeasured } from './measured-module.js';
import { plannedUniforms } from './planned-uniforms.js';
import { type PerQuantity, perQuantity } from './quantity-order.js';
import type { DrawScope, UniformOf } from './streams.js';

/**
 * The modules of one instance by their ids: drawn for populations, as written for explicit stocks.
 *
 * What is drawn for a module depends on seed, block size, sampling plan, instance, its stock and its own id only.
 * Candidates have no part in it, so all of them get the same modules. Modules of one lot share what is drawn for it; a
 * stock has one lot in an instance unless it says otherwise. A pack may take the cell draws of the modules it is compared
 * with; its lot and module draws are its own all the same.
 *
 * @param instance from 1
 * @throws RangeError if the instance is not a whole number from 1, or a stock has laws or correlations that cannot be
 */
export function sampleModules(study: Study, instance: number): ReadonlyMap<string, ModuleParameters> {
  const ofInstance = { seed: study.seed, ...blockAddress(instance, study.blockSize) };
  const uniformsIn = plannedUniforms(study);
  const modules = study.stocks.flatMap((stock) =>
    stock.kind === 'explicit' ? stock.modules : samplePopulation(ofInstance, uniformsIn, stock),
  );
  return new Map(modules.map((module) => [module.id, module]));
}

function samplePopulation(
  ofInstance: Pick<DrawScope, 'seed' | 'block' | 'index'>,
  uniformsIn: (scope: DrawScope) => UniformOf,
  stock: PopulationStock,
): ModuleParameters[] {
  const ofStock = { ...ofInstance, stock: stock.key, module: null, cell: null };
  const drawModule = levelSampler(stock, 'module');
  const drawCell = levelSampler(stock, 'cell');
  const drawLot = levelSampler(stock, 'lot');
  const lots = new Map<string | undefined, PerQuantity<number>>();
  const lotNamed = (name: string | undefined): PerQuantity<number> => {
    const lot = lots.get(name) ?? drawLot(uniformsIn({ ...ofStock, level: 'lot', lot: name }));
    lots.set(name, lot);
    return lot;
  };
  return stock.moduleIds.map((id) => {
    const ofModule = { ...ofStock, module: id };
    const uniformOf = uniformsIn({ ...ofModule, level: 'module' });
    const lot = lotNamed(lotOf(stock, id, uniformsIn({ ...ofModule, level: 'lot' })));
    const own = drawModule(uniformOf);
    const cells = Array.from({ length: stock.cellsInSeries }, (_, place) => {
      const drawnAs = stock.cellsDrawnAs?.[id]?.[place] ?? { stock: stock.key, module: id, cell: place + 1 };
      return drawCell(uniformsIn({ ...ofStock, ...drawnAs, level: 'cell' }));
    });
    const shared = perQuantity((name) => lot[name] + own[name]);
    if (stock.measured === undefined) return composeModule(stock, id, shared, cells);
    const measured = withMeasured(stock, sampleMeasured(stock.measured, id, uniformOf), { shared, cells });
    return composeModule(stock, id, measured.shared, measured.cells);
  });
}
