import { describe, expect, it } from 'vitest';
import { outcomeColumns } from '../../src/outcomes/columns.js';
import { MemoryOutcomes } from '../../src/outcomes/memory-outcomes.js';

const columns = outcomeColumns({ strings: 1, positions: 1, checkpoints: [1] });
const row = (instance: number, value: number | null) => ({ instance, values: columns.map(() => value) });

describe('outcomes in memory', () => {
  const outcomes = new MemoryOutcomes(
    new Map([['strings', { columns, rows: [row(1, 5), row(2, null)], twin: row(0, 4) }]]),
  );

  it('give one column at a time, by name', async () => {
    const column = await outcomes.column('strings', 'drift_at_cycle_1');
    expect([column.at(1), column.at(2)]).toEqual([5, null]);
    expect(outcomes.instances).toBe(2);
  });

  it('keep the twin apart', async () => {
    expect((await outcomes.twin('strings')).values[0]).toBe(4);
  });

  it('refuse a candidate or column that is not there', async () => {
    expect(() => outcomes.columns('native')).toThrow('no candidate "native"');
    await expect(outcomes.column('strings', 'luck')).rejects.toThrow('no column "luck"');
  });

  it('cannot be made of rows out of order or of candidates of unlike length', () => {
    const short = { columns, rows: [row(1, 5)], twin: row(0, 4) };
    const swapped = { columns, rows: [row(2, 5), row(1, 5)], twin: row(0, 4) };
    expect(
      () =>
        new MemoryOutcomes(
          new Map([
            ['a', short],
            ['b', swapped],
          ]),
        ),
    ).toThrow('1 and 2 instances');
    expect(() => new MemoryOutcomes(new Map([['b', swapped]]))).toThrow('b: instance 1 is out of place');
  });
});
