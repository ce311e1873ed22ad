import { describe, expect, it } from 'vitest';
import { referenceBanks } from './banks.js';
import { chargeDifference, compareEvents } from './contract.js';
import { optionBanks } from './option-banks.js';
import { simulateSlowBank, TRUSTED_STEPS } from './slow-bank.js';
import type { EventKind } from './slow-event.js';

/** Twice as coarse where it matters: what halving leaves to gain. */
const COARSER = { stepS: 60, fineStepS: 10 };

const runs = new Map(referenceBanks().map((bank) => [bank.name, simulateSlowBank(bank, TRUSTED_STEPS)]));
const optionRuns = new Map(optionBanks().map((bank) => [bank.name, simulateSlowBank(bank, TRUSTED_STEPS)]));
const kindsOf = (name: string): Set<EventKind> => new Set(runs.get(name)?.events.map((event) => event.kind));

describe('the reference banks', () => {
  it('have names of their own and modules of their own', () => {
    const banks = referenceBanks();
    expect(runs.size).toBe(banks.length);
    for (const bank of banks) {
      const ids = bank.modules.flat().map((module) => module.id);
      expect(new Set(ids).size).toBe(ids.length);
      expect(bank.candidate.strings.flat()).toEqual(ids);
    }
  });

  it('show every kind of event between them', () => {
    const seen = new Set([...runs.values()].flatMap((run) => run.events.map((event) => event.kind)));
    const all: EventKind[] = [
      'charge-ended',
      'charge-restart',
      'load-back',
      'load-disconnect',
      'load-lost',
      'load-reconnect',
      'over-current-charge-trip',
      'over-current-discharge-trip',
      'over-current-lock',
      'over-current-retry',
      'over-voltage-release',
      'over-voltage-trip',
      'under-voltage-release',
      'under-voltage-trip',
    ];
    expect([...seen].sort()).toEqual(all);
  });

  it('do what they are there for', () => {
    expect(kindsOf('1s2p-cascade')).toContain('over-current-lock');
    expect(kindsOf('2s2p-disconnect')).toContain('load-reconnect');
    expect(kindsOf('2s2p-deep')).toContain('under-voltage-release');
    expect(kindsOf('1s2p-overload')).toEqual(new Set(['load-lost', 'load-back']));
  });

  it('account for the whole energy asked for', () => {
    for (const bank of referenceBanks()) {
      const segments = bank.cycles.flat();
      // Without constant currents and early ends the demand is known beforehand.
      if (segments.some((segment) => segment.loadA > 0)) continue;
      const askedWh = segments.reduce((sum, { loadW, durationS }) => sum + (loadW * durationS) / 3600, 0);
      const run = runs.get(bank.name);
      expect((run?.servedWh ?? 0) + (run?.lostWh ?? 0)).toBeCloseTo(askedWh * bank.loadFactor, 4);
    }
  });

  it.each(referenceBanks().map((bank) => [bank.name, bank] as const))(
    'are followed to the same end by coarser steps: %s',
    (name, bank) => {
      const trusted = runs.get(name);
      const coarse = simulateSlowBank(bank, COARSER);
      if (trusted === undefined) throw new Error(`${name} has not been run`);
      const charge = chargeDifference(coarse.cycleEndCharge, trusted.cycleEndCharge);
      expect(Math.max(...charge)).toBeLessThan(1e-6);
      const events = compareEvents(coarse.events, trusted.events, trusted.segmentStartS);
      expect(events.faults).toEqual([]);
    },
  );
});

describe('the banks with options', () => {
  const happens = (name: string): readonly EventKind[] => optionRuns.get(name)?.events.map(({ kind }) => kind) ?? [];
  const count = (name: string, kind: EventKind): number => happens(name).filter((each) => each === kind).length;

  it('have names and modules of their own', () => {
    expect(optionRuns.size).toBe(optionBanks().length);
    for (const { modules, candidate } of optionBanks()) {
      expect(new Set(candidate.strings.flat()).size).toBe(modules.flat().length);
    }
  });

  it('do what they are there for', () => {
    // Every BMS is refused and allowed twice; commissioned, both cycles begin alike and end locked.
    expect([count('winter', 'cold-charge-refusal'), count('winter', 'cold-charge-release')]).toEqual([8, 8]);
    expect(count('visited', 'over-current-lock')).toBe(8);
    expect(count('peaks', 'load-disconnect')).toBe(3);
    for (const name of ['equalised', 'rails-diagonal', 'custom']) expect(happens(name)).toContain('over-voltage-trip');
  });
});
