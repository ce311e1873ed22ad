import { describe, expect, it } from 'vitest';
import { type Cutoff, createCycleLog, EARLY_MARGINS, logCutoff, MAIN_MARGIN } from '../../src/measures/cycle-log.js';

const onCharge = (shortfall: number, sketch: Partial<Cutoff> = {}): Cutoff => ({
  direction: 'charge',
  cause: 'voltage',
  string: 1,
  position: 2,
  cell: 3,
  shortfall,
  chargeLeftAh: 0,
  ...sketch,
});
const onDischarge = (chargeLeftAh: number, sketch: Partial<Cutoff> = {}): Cutoff => ({
  ...onCharge(0),
  direction: 'discharge',
  chargeLeftAh,
  ...sketch,
});

describe('logCutoff on charge', () => {
  it('counts a margin only beyond it: 2, 5 and 10 points', () => {
    expect([...EARLY_MARGINS]).toEqual([0.02, 0.05, 0.1]);
    const bits = [0.02, 0.021, 0.05, 0.051, 0.1, 0.101].map((shortfall) => {
      const log = createCycleLog(1);
      logCutoff(log, 1, onCharge(shortfall));
      return log.chargeCutoff[0];
    });
    expect(bits).toEqual([0, 1, 1, 3, 3, 7]);
    expect(EARLY_MARGINS[Math.log2(MAIN_MARGIN)]).toBe(0.05);
  });

  it('keeps cause and place of the first cutoff beyond 5 points only', () => {
    const log = createCycleLog(3);
    logCutoff(log, 1, onCharge(0.03, { cause: 'current' }));
    expect(log.firstOnCharge).toBeNull();
    expect(log.chargeCutoffByCurrent[0]).toBe(0);
    logCutoff(log, 2, onCharge(0.06, { string: 2, position: 1, cell: 4 }));
    logCutoff(log, 3, onCharge(0.2, { cause: 'current', cell: 0 }));
    expect(log.firstOnCharge).toEqual({ cycle: 2, string: 2, position: 1, cell: 4 });
    expect([...log.chargeCutoffByVoltage]).toEqual([0, 1, 0]);
    expect([...log.chargeCutoffByCurrent]).toEqual([0, 0, 1]);
  });

  it('joins the margins of several cutoffs of one cycle', () => {
    const log = createCycleLog(2);
    for (const shortfall of [0.2, 0.03, 0.06]) logCutoff(log, 2, onCharge(shortfall));
    expect([...log.chargeCutoff]).toEqual([0, 7]);
  });
});

describe('logCutoff on discharge', () => {
  it('keeps the charge left at the first cutoff of each cycle', () => {
    const log = createCycleLog(2);
    logCutoff(log, 1, onDischarge(12));
    logCutoff(log, 1, onDischarge(7, { cause: 'current' }));
    logCutoff(log, 2, onDischarge(3));
    expect([...log.chargeLeftAh]).toEqual([12, 3]);
    expect([...log.dischargeCutoff]).toEqual([1, 1]);
    expect([...log.dischargeCutoffByVoltage]).toEqual([1, 1]);
    expect([...log.dischargeCutoffByCurrent]).toEqual([1, 0]);
    expect(log.firstOnDischarge).toEqual({ cycle: 1, string: 1, position: 2, cell: 3 });
    expect(log.firstOnCharge).toBeNull();
  });
});
