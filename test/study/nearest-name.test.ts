import { describe, expect, it } from 'vitest';
import { nearestName } from '../../src/study/nearest-name.js';

describe('the nearest known name', () => {
  const KNOWN = ['capacity_Ah', 'cell_resistance_mOhm', 'standby_mA', 'each'];

  it.each([
    ['capcity_Ah', 'capacity_Ah'],
    ['capacity_ah', 'capacity_Ah'],
    ['capacity', 'capacity_Ah'],
    ['stadnby_mA', 'standby_mA'],
    ['eahc', 'each'],
  ])('for %s is %s', (name, meant) => {
    expect(nearestName(name, KNOWN)).toBe(meant);
  });

  it.each(['colour', 'x', '', 'ampere_hours'])('for %s there is none', (name) => {
    expect(nearestName(name, KNOWN)).toBeUndefined();
  });
});
