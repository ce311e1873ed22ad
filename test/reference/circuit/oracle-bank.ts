import { readFileSync } from 'node:fs';
import { oracleStudyText } from '../../simulation/oracle-study.js';
import { studyOf } from '../../study/study-under-test.js';
import { contractLimits, type WaveformLimits } from '../contract.js';
import { ORACLE_CASES, type OracleCase, readOracle } from '../oracle/oracle-case.js';
import { readOracleDeck } from '../oracle/oracle-deck.js';
import { type Agreement, agreementOf, phaseStartsOf } from './agreement.js';
import { circuitEvents, circuitWaveform } from './circuit-waveform.js';
import { type EngineAndDeck, runEngineAndDeck } from './engine-and-deck.js';
import { RANDOM_STUDIES, type RandomStudy, randomStudy } from './random-study.js';
import { runDeck } from './run-deck.js';

/** A bank of the suite. */
export interface OracleBank {
  readonly name: string;
  readonly simulate: () => Promise<OracleResult>;
}

/** Simulations of one bank held against each other. */
export interface OracleResult {
  readonly bank: string;
  readonly wiring: string;
  readonly course: string;
  readonly engineAndDeck: EngineAndDeck;
  /** Of a bank from outside: our deck against the outside deck, and that against the outside run. */
  readonly outside: { readonly decks: Agreement; readonly runs: Agreement } | null;
}

/** How closely the outside simulator and the outside Runge-Kutta run are said to agree: ../oracle/README.md. */
const OUTSIDE_LIMITS: WaveformLimits = {
  currentA: 0.006,
  charge: 1e-6,
  plateauCellV: 1e-4,
  kneeCellV: 1e-4,
  terminalV: 1e-4,
};
const OUTSIDE_EVENT_S = 0.009;

const OUTSIDE_COURSES: Readonly<Record<OracleCase, string>> = {
  b: 'constant current to the end',
  c: 'constant current to the end',
  f: 'unequal leads',
  d2: 'over-voltage and discharge through it',
};

/** Every bank of the suite, in the order of its table. */
export function oracleBanks(): readonly OracleBank[] {
  return [
    ...ORACLE_CASES.map((name) => ({ name: `outside-${name}`, simulate: () => simulateOutside(name) })),
    ...Array.from({ length: RANDOM_STUDIES }, (_, i) => {
      const study = randomStudy(i + 1);
      return { name: study.name, simulate: () => simulateRandom(study) };
    }),
  ];
}

async function simulateRandom(study: RandomStudy): Promise<OracleResult> {
  const phaseStartS = phaseStartsOf(studyOf(study.text, study.files), study.fromCycle, study.toCycle);
  return {
    bank: study.name,
    wiring: study.wiring,
    course: study.course,
    engineAndDeck: await runEngineAndDeck(study, phaseStartS),
    outside: null,
  };
}

async function simulateOutside(name: OracleCase): Promise<OracleResult> {
  const parameters = JSON.parse(readFileSync(new URL(`../oracle/${name}/params.json`, import.meta.url), 'utf8'));
  const outside = readOracle(name);
  const { phaseStartS, largestBankA } = outside;
  const study = { text: oracleStudyText(parameters), files: {}, fromCycle: 1, toCycle: 1 };
  const engineAndDeck = await runEngineAndDeck(study, phaseStartS);
  const { deck, bank } = readOracleDeck(name);
  const run = await runDeck(deck);
  const ofDeck = {
    waveform: circuitWaveform(run, bank, outside.waveform.timeS),
    events: circuitEvents(run, bank),
  };
  return {
    bank: `outside-${name}`,
    wiring: name === 'c' ? 'cross-linked' : 'strings',
    course: OUTSIDE_COURSES[name],
    engineAndDeck,
    outside: {
      decks: agreementOf(engineAndDeck.simulated, ofDeck, { limits: contractLimits(largestBankA), phaseStartS }),
      runs: agreementOf(ofDeck, outside, { limits: OUTSIDE_LIMITS, phaseStartS, eventS: OUTSIDE_EVENT_S }),
    },
  };
}
