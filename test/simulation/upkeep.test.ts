import { describe, expect, it } from 'vitest';
import { compileOcvCurves } from '../../src/bank/ocv-curves.js';
import { runSegment } from '../../src/simulation/run-cycle.js';
import { planVisits, visitIfDue } from '../../src/simulation/upkeep.js';
import { bankOf } from '../reference/bank-of.js';
import { bareModule, noLeads, straightTable } from '../reference/bare-module.js';
import { segmentOf } from '../reference/duties.js';
import { journeyOf } from './journey-of.js';

describe('a visit', () => {
  it('leaves a bank that has rested: at its open-circuit voltage', () => {
    const module = bareModule('m', { polarisation: [{ timeConstantS: 1800, resistanceOhm: [0.005] }] });
    const bank = bankOf('visited', {
      modules: [[module]],
      ocvTables: [straightTable(3, 1)],
      leads: noLeads(1),
      cycles: [],
      upkeep: { everyCycles: 1 },
    });
    const ocv = compileOcvCurves(bank.ocvTables);
    const journey = journeyOf(bank);
    const { kernel } = journey;
    const visits = planVisits(kernel.bank, bank.candidate, new Map([['m', module]]), ocv, 1);
    if (visits === null) throw new RangeError('nobody comes');
    runSegment(journey, segmentOf(0.5, { loadA: 36 }), bank);
    // By hand: at 36 A the pair stands 0.18 (1 - exp(-1)) V below the open-circuit voltage of the cell.
    runSegment(journey, segmentOf(0), bank);
    expect(3 + kernel.state.charge[0] - kernel.bus.bankV).toBeCloseTo(0.18 * (1 - Math.exp(-1)), 3);
    visitIfDue(visits, journey, 1);
    runSegment(journey, segmentOf(0), bank);
    expect(kernel.state.charge[0]).toBeGreaterThan(0.5);
    expect(kernel.bus.bankV).toBeCloseTo(3 + kernel.state.charge[0], 9);
  });
});
