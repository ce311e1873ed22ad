import type { BankSpread, DutySegment, Study } from '../../src/study/study.js';
import type { ReferenceBank } from './reference-bank.js';

/** A reference bank as a resolved study of one instance, to be given to the engine. */
export function studyOf(bank: ReferenceBank): Study {
  const modules = bank.modules.flat();
  const fixed = (nominal: number): BankSpread => ({ nominal, relative: false, bank: { law: 'fixed' } });
  const lengths = bank.cycles.map(lengthS);
  const byTheClock =
    lengths.every((length) => length === lengths[0]) && !bank.cycles.flat().some((segment) => segment.endsWhenCharged);
  return {
    format: 1,
    title: bank.name,
    seed: '0',
    instances: 1,
    blockSize: 1,
    plan: 'independent',
    cycles: bank.cycles.length,
    confidenceFraction: 0.95,
    driftLimitFraction: 0.2,
    ocvTables: bank.ocvTables,
    stocks: [{ kind: 'explicit', key: modules[0].stock, modules }],
    duty: {
      kind: byTheClock ? 'profile' : 'phases',
      cycleS: Math.max(...lengths),
      parts: [{ name: bank.name, repeat: 1, cycles: bank.cycles }],
      loadFactor: fixed(bank.loadFactor),
      chargeFactor: fixed(bank.chargeFactor),
    },
    candidates: [bank.candidate],
    reference: bank.candidate.key,
    acceptance: [],
  };
}

function lengthS(cycle: readonly DutySegment[]): number {
  return cycle.reduce((sum, segment) => sum + segment.durationS, 0);
}
