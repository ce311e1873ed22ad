import { createHash } from 'node:crypto';
import type { Candidate, Study } from '../../src/study/study.js';

const STRINGS: Candidate = {
  key: 'strings',
  title: '',
  wiring: 'strings',
  strings: [['A', 'B']],
  leads: [{ negativeOhm: 0, betweenOhm: 0, positiveOhm: 0 }],
  linkOhm: 0,
  charger: {
    limitA: 20,
    absorptionV: 28.4,
    tailA: 4,
    tailHoldS: 120,
    absorptionS: null,
    floatV: null,
    restart: 'each-cycle',
    restartV: 26.4,
  },
  load: { disconnectV: null, disconnectDelayS: 10, reconnectV: 26 },
  commissioning: 'as-received',
  bleed: null,
};

export const NATIVE: Candidate = { ...STRINGS, key: 'native', wiring: 'native' };

/** A study that only the fake engine can run: 3 blocks of 4 and one of 2, twice. Invented. */
export const FAKE_STUDY: Study = {
  format: 1,
  title: 'fake',
  seed: '0',
  instances: 14,
  blockSize: 4,
  plan: 'independent',
  cycles: 3,
  confidenceFraction: 0.95,
  driftLimitFraction: 0.05,
  ocvTables: [],
  stocks: [],
  duty: {
    kind: 'profile',
    cycleS: 86_400,
    parts: [],
    loadFactor: { nominal: 1, relative: true, bank: { law: 'fixed' } },
    chargeFactor: { nominal: 1, relative: true, bank: { law: 'fixed' } },
  },
  candidates: [STRINGS, { ...STRINGS, key: 'cross-linked', wiring: 'cross-linked' }],
  reference: 'strings',
  acceptance: [],
};

/** Stands in for simulation keys: a digest of what the fake engine depends on. */
export function fakeKeys({ seed, blockSize, cycles, candidates }: Study): Map<string, string> {
  return new Map(
    candidates.map(({ key, wiring }) => [
      key,
      createHash('sha256')
        .update(JSON.stringify([seed, blockSize, cycles, wiring]))
        .digest('hex'),
    ]),
  );
}
