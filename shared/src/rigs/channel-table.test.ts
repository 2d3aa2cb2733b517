import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { channelOfRow } from './channel-row.js';
import { checkRoundTrip, only, setting } from './channel-table.fixture.js';
import {
  channelRowsMax,
  hasTableHead,
  mergeRows,
  pasteCells,
  readChannelTable,
  writeChannelTable,
} from './channel-table.js';
import { readTextTable, tableTextMax, writeTextTable } from './channel-table-text.js';
import { rigSchema } from './rig.schema.js';

describe('a channel table', () => {
  it('gives back every channel that is written and read again, whatever is in it', () => {
    checkRoundTrip(150);
  });

  it('is written as RFC 4180 has it', () => {
    const rows = [{ id: 'a', title: 'Oxygen, "wet"', kind: 'derived', expression: 'b + 1' }];
    const [head, line, end] = writeChannelTable(rows, setting).split('\r\n');
    expect(head).toBe(
      'id,title,kind,unit,display.min,display.max,display.decimals,connection,expression,axis.title,axis.unit,axis.from,axis.step',
    );
    expect(line).toBe('a,"Oxygen, ""wet""",derived,,,,,,b + 1,,,,');
    expect(end).toBe('');
  });

  it.each([
    ['comma', 'id,unit,address.register,address.type,address.query,address.scale\r\no2,%,4,u16,q,0.5\r\n'],
    [
      'semicolon and decimal comma',
      '\uFEFFid;unit;address.register;address.type;address.query;address.scale\no2;%;4;u16;q;0,5',
    ],
    [
      'tab, as a spreadsheet copies it',
      'ID\tUnit\tAddress.Register\taddress.type\taddress.query\taddress.scale\r\r o2\t%\t0x4\tU16\tq\t0,5\r',
    ],
  ])('is read with %s', (_name, source) => {
    const { rows, faults } = readChannelTable(source, only('plc'));
    expect(faults).toEqual([]);
    expect(rows.map((row) => channelOfRow(row, setting.columnsOf).channel)).toEqual([
      {
        kind: 'sensor',
        ...{ id: 'o2', title: 'o2', unit: '%', connection: 'plc' },
        display: { min: 0, max: 100, decimals: 2 },
        address: { register: 4, type: 'u16', query: 'q', scale: 0.5 },
      },
    ]);
  });

  it('takes cells whose text has separators, quotes and line ends in it, and counts lines by them', () => {
    const source = 'id,title,address.query\na,"two\r\nlines, ""quoted""",q\nb,c,d,stray\n';
    const { rows, faults } = readChannelTable(source, only('plc'));
    expect(rows[0]?.['title']).toBe(JSON.stringify('two\r\nlines, "quoted"'));
    expect(faults).toContainEqual({ line: 4, column: '', message: 'Cell 4 stands below no column name.' });
  });

  it.each([
    ['x,unit\na,b', 1, 'x', 'no such column'],
    ['unit,title\n%,b', 1, 'id', 'name the columns'],
    ['id,id,connection\na,b,plc', 1, 'id', 'twice'],
    ['id,connection\nO2,plc', 2, 'id', 'lower-case'],
    ['id,connection\n\no2,plc\no2,plc', 4, 'id', 'Line 3'],
    ['id,connection\no2,ghost', 2, 'connection', 'no connection "ghost"'],
    ['id,connection,address.register\no2,plc,"1,5"', 2, 'address.register', 'Give a number.'],
    ['id;connection;address.register\no2;plc;1,5', 2, 'address.register', 'whole number'],
    ['id,connection,address.type\no2,plc,u17', 2, 'address.type', 'Use one of u16, f32.'],
    ['id,connection,address.register\no2,plc,', 2, 'address.register', 'Needed.'],
    ['id,connection,expression\no2,plc,a + 1', 2, 'connection', 'derived'],
    ['id,kind,connection\no2,sensor,plc\na,kettle,plc', 3, 'kind', 'Use one of sensor'],
    ['id,display.decimals\no2,12', 2, 'display.decimals', '<=9'],
    ['id,title\na,"open', 2, '', 'not closed'],
    ['id,title\na,"b"c', 2, '', 'closing quote'],
    ['', 1, '', 'empty'],
  ])('names line and column of the fault in %j', (source, line, column, message) => {
    const { faults } = readChannelTable(source, setting);
    const found = faults.find((fault) => fault.line === line && fault.column === column);
    expect(found?.message, JSON.stringify(faults)).toContain(message);
  });

  it('refuses more than a rig may have, and tells a bounded number of faults', () => {
    const lines = Array.from({ length: channelRowsMax + 5 }, (_, i) => `c${i},plc`);
    const { faults } = readChannelTable(['id,connection', ...lines].join('\n'), setting);
    expect(faults.length).toBeLessThanOrEqual(100);
    const big = readChannelTable('x'.repeat(tableTextMax + 1), setting);
    expect(big.faults[0]?.message).toContain('characters');
    const wide = readChannelTable(`id${',a'.repeat(300)}`, setting);
    expect(wide.faults[0]?.message).toContain('columns');
  });

  it('takes the place of rows of the same id, and adds the others', () => {
    const merged = mergeRows([{ id: 'a', unit: '1' }, { id: 'b' }], [{ id: 'c' }, { id: 'a', unit: '2' }]);
    expect(merged).toEqual([{ id: 'a', unit: '2' }, { id: 'b' }, { id: 'c' }]);
  });

  it('takes cells from a spreadsheet at a place, and adds rows for them', () => {
    const rows = pasteCells(
      [{ id: 'a', unit: 'K' }],
      ['id', 'title', 'unit'],
      { row: 0, column: 1 },
      'A\t%\r\nB\tV\r\n',
      { kind: 'sensor' },
    );
    expect(rows).toEqual([
      { id: 'a', title: 'A', unit: '%' },
      { kind: 'sensor', title: 'B', unit: 'V' },
    ]);
    expect(hasTableHead('id\ttitle\r\na\tb', setting)).toBe(true);
    expect(hasTableHead('a\tb', setting)).toBe(false);
  });

  it('never takes a cell that cannot be read for right', () => {
    const { channel, faults } = channelOfRow(
      { id: 'a', title: 'A', kind: 'sensor', 'display.min': 'low', connection: 'plc', 'address.ghost': '3' },
      setting.columnsOf,
    );
    expect(faults.map(({ column }) => column)).toEqual(
      expect.arrayContaining(['display.min', 'display.max', 'address.register', 'address.ghost']),
    );
    expect(rigSchema.shape.channels.safeParse([channel]).success).toBe(false);
  });
});

describe('text with separators', () => {
  it('finds the separator behind a quoted cell with a line end in it', () => {
    expect(readTextTable('"\n"\t\r\n').records.map(({ cells }) => cells)).toEqual([['\n', '']]);
  });

  it('gives back what was written, with every separator', () => {
    const cell = fc.string({ unit: 'binary', maxLength: 8 });
    const table = fc.array(fc.array(cell, { minLength: 2, maxLength: 4 }), { minLength: 1, maxLength: 5 });
    fc.assert(
      fc.property(table, fc.constantFrom(',', ';', '\t'), (cells, separator) => {
        const filled = cells.filter((record) => record.some((one) => one !== ''));
        const back = readTextTable(writeTextTable(filled, separator)).records;
        expect(back.map((record) => record.cells)).toEqual(filled);
      }),
      { numRuns: 300 },
    );
  });
});
