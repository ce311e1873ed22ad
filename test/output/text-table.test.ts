import { describe, expect, it } from 'vitest';
import { renderTextTable } from '../../src/output/text-table.js';

const column = (...head: readonly string[]) => ({ head });

describe('text table', () => {
  it('sets heads above figures, both to the right', () => {
    const lines = renderTextTable(
      'name',
      [column('one', '%'), column('two', 'last days', 'kWh')],
      [{ title: '', rows: [{ name: 'a', cells: [['1.5', '1 to 2'], ['-']] }] }],
    );
    expect(lines).toEqual([
      '                       two',
      '            one  last days',
      'name          %        kWh',
      '--------------------------',
      'a           1.5          -',
      '         1 to 2',
    ]);
  });

  it('goes on below where columns do not fit side by side, shared out evenly', () => {
    const columns = ['one', 'two', 'three', 'four'].map((head) => column(head));
    const rows = [{ name: 'a', cells: columns.map(() => ['123456789']) }];
    const lines = renderTextTable('name', columns, [{ title: '', rows }], 40);
    expect(lines).toEqual([
      'name        one        two',
      '--------------------------',
      'a     123456789  123456789',
      '',
      'name      three       four',
      '--------------------------',
      'a     123456789  123456789',
    ]);
  });

  it('names its sections', () => {
    const section = (title: string) => ({ title, rows: [{ name: 'a', cells: [['1']] }] });
    expect(renderTextTable('name', [column('one')], [section('first'), section('second')])).toEqual([
      'name        one',
      '---------------',
      'first',
      ' a            1',
      'second',
      ' a            1',
    ]);
  });
});
