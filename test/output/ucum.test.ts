import { describe, expect, it } from 'vitest';
import { DRAWN_FEATURES } from '../../src/measures/drawn-features.js';
import { CYCLE_MEASURES, MEASURES } from '../../src/measures/registry.js';
import { ucumCode } from '../../src/output/ucum.js';

describe('UCUM codes', () => {
  it('exist for every unit that a run prints', () => {
    for (const { name, unit } of [...MEASURES, ...CYCLE_MEASURES, ...DRAWN_FEATURES]) {
      expect(ucumCode(unit), name).not.toBe('');
    }
  });

  it('are those of the UCUM tables', () => {
    // The Unified Code for Units of Measure 2.1: ampere A, hour h, watt W, prefix k, percent %, day d, unity 1.
    expect(ucumCode('Ah')).toBe('A.h');
    expect(ucumCode('kWh')).toBe('kW.h');
    expect(ucumCode('%/month')).toBe('%/(30.d)');
    expect(ucumCode('')).toBe('1');
  });

  it.each(['furlong', 'toString', '__proto__'])('do not exist for %s', (unit) => {
    expect(() => ucumCode(unit)).toThrow(RangeError);
  });
});
