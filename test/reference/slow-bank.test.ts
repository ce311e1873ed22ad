import { describe, expect, it } from 'vitest';
import { compareEvents, compareWaveforms, contractLimits, waveformOf } from './contract.js';
import { ORACLE_CASES, readOracle } from './oracle/oracle-case.js';
import { simulateSlowBank } from './slow-bank.js';

describe('the slow rewrite against outside runs', () => {
  it.each(ORACLE_CASES)('keeps the contract on bank %s with room to spare', (name) => {
    const oracle = readOracle(name);
    // The outside circuits have no leak at their nodes; with 1 uS the like modules of bank f would cut off one by one.
    const run = simulateSlowBank(oracle.bank, { stepS: 10, nodeLeakS: 0, sampleTimesS: oracle.waveform.timeS });
    const limits = contractLimits(oracle.largestBankA);
    const waveforms = compareWaveforms(waveformOf(run), oracle.waveform, limits, oracle.events, oracle.phaseStartS);
    expect(waveforms.faults).toEqual([]);
    expect(waveforms.comparedSamples).toBeGreaterThan(0.98 * oracle.waveform.timeS.length);
    // The same equations by another route: far inside the contract.
    expect(waveforms.charge).toBeLessThan(1e-5);
    expect(waveforms.currentA).toBeLessThan(0.05);

    const ofModules = run.events.filter((event) => event.string !== null);
    const events = compareEvents(ofModules, oracle.events, oracle.phaseStartS);
    expect(events.faults).toEqual([]);
    expect(events.timeS).toBeLessThan(0.1);
  });

  it('is held to its contract: a bank with a lead 1 mOhm longer fails it', () => {
    const oracle = readOracle('f');
    const [first, second] = oracle.bank.candidate.leads;
    const leads = [first, { ...second, positiveOhm: second.positiveOhm + 0.001 }];
    const bank = { ...oracle.bank, candidate: { ...oracle.bank.candidate, leads } };
    const run = simulateSlowBank(bank, { stepS: 30, nodeLeakS: 0, sampleTimesS: oracle.waveform.timeS });
    const limits = contractLimits(oracle.largestBankA);
    const { faults } = compareWaveforms(waveformOf(run), oracle.waveform, limits, oracle.events, oracle.phaseStartS);
    expect(faults.length).toBeGreaterThan(0);
  });
});
