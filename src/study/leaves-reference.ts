import type { Candidate, PopulationStock, Study } from './study.js';

/** @returns true if a module of the candidate can be at another temperature than 25 degC at some time */
export function leavesReference(study: Study, candidate: Candidate): boolean {
  const used = new Set(candidate.strings.flat());
  const isWarmed = study.stocks.some((stock) =>
    stock.kind === 'population'
      ? stock.moduleIds.some((id) => used.has(id)) && isOffset(stock)
      : stock.modules.some(({ id, temperatureOffsetK }) => used.has(id) && (temperatureOffsetK ?? 0) !== 0),
  );
  const slots = candidate.slotOffsetK ?? [];
  const segments = study.duty.parts.flatMap(({ cycles }) => cycles.flat());
  return (
    isWarmed ||
    slots.some((string) => string.some((offsetK) => offsetK !== 0)) ||
    segments.some(({ ambientK }) => ambientK !== undefined)
  );
}

function isOffset({ quantities, measured }: PopulationStock): boolean {
  const { nominal, lot, module } = quantities.temperatureOffsetK;
  if (measured?.quantities.includes('temperatureOffsetK')) return true;
  return nominal !== 0 || lot.law !== 'fixed' || module.law !== 'fixed';
}
