import { packKind } from './packs.js';
import type { Candidate, Study } from './study.js';

/** Says what packs are beside candidates of modules, and how to compare them more fairly. */
export function warnOfPacks(study: Study, candidate: Candidate, warn: (text: string) => void): void {
  const kind = packKind(candidate, study.candidates);
  if (kind === 're-housed, not a product') {
    warn(
      `packs ${kind}: the cells of its modules under one BMS each show what one BMS over the full series length would ` +
        'change; to compare with packs on sale, give them a stock of their own',
    );
  }
  if (kind !== 'different purchase') return;
  const shared = new Set(
    study.stocks.flatMap((stock) => (stock.kind === 'population' ? Object.keys(stock.cellsDrawnAs ?? {}) : [])),
  );
  const advice = candidate.strings.flat().every((id) => shared.has(id))
    ? 'state its spreads as carefully as those of the modules'
    : 'its cells draw values of their own too; cells_drawn_as lets them share the draws of the modules cell by cell';
  warn(`packs of a ${kind}, with a lot and BMS of their own: the comparison is not one of wiring alone; ${advice}`);
}
