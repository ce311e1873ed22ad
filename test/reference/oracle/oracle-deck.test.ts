import { describe, expect, it } from 'vitest';
import { circuitEvents, circuitWaveform } from '../circuit/circuit-waveform.js';
import { runDeck } from '../circuit/run-deck.js';
import { compareEvents, compareWaveforms, laterSamples, type WaveformLimits } from '../contract.js';
import { ORACLE_CASES, readOracle } from './oracle-case.js';
import { readOracleDeck } from './oracle-deck.js';

/** How closely the outside simulator and the outside Runge-Kutta run are said to agree: README.md beside this. */
const OUTSIDE: WaveformLimits = {
  currentA: 0.006,
  charge: 1e-6,
  plateauCellV: 1e-4,
  kneeCellV: 1e-4,
  terminalV: 1e-4,
};
const OUTSIDE_EVENT_S = 0.009;

describe('outside decks in the circuit simulator of these tests', () => {
  it.each(ORACLE_CASES)('bank %s runs as outside, as closely as the outside runs agree', async (name) => {
    const { waveform, events, phaseStartS } = readOracle(name);
    const { deck, bank } = readOracleDeck(name);
    // At 0 s the small capacitors of a deck have not taken their voltages yet.
    const expected = laterSamples(waveform, 1);
    const run = await runDeck(deck);
    const actual = circuitWaveform(run, bank, expected.timeS);
    expect(compareWaveforms(actual, expected, OUTSIDE, events, phaseStartS).faults).toEqual([]);
    const inTime = () => OUTSIDE_EVENT_S;
    expect(compareEvents(circuitEvents(run, bank), events, phaseStartS, inTime).faults).toEqual([]);
  });
});
