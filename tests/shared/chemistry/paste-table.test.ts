import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { parseCarbonTable, parseProtonTable } from '../../../shared/chemistry/paste-table.js';

const carbons = (text: string) => parseCarbonTable(text).rows.map(({ signal }) => signal);
const protons = (text: string) => parseProtonTable(text).rows.map(({ signal }) => signal);

describe('parseCarbonTable', () => {
  const expected = [
    { shift: 171.4, hydrogens: 0 },
    { shift: 60.5, hydrogens: 2 },
    { shift: 128.4, hydrogens: 1, count: 2 },
  ];

  it('reads every usual separator, decimal point or comma', () => {
    expect(carbons('171.4\t0\n60.5\t2\n128.4\t1\t2')).toEqual(expected);
    expect(carbons('171,4\t0\n60,5\t2\n128,4\t1\t2')).toEqual(expected);
    expect(carbons('171,4;0;\r\n60,5;2;\r\n128,4;1;2\r\n')).toEqual(expected);
    expect(carbons('171.4, C\n60.5, CH2\n128.4, CH, 2')).toEqual(expected);
    expect(carbons('  171.4   C\n\n60.5 CH2\n128.4 CH 2C')).toEqual(expected);
    expect(carbons('171,4 C\n60,5 CH₂\n128,4 CH (2C)')).toEqual(expected);
  });

  it('follows the heading where there is one', () => {
    const table = parseCarbonTable('No.\tCount\tδ / ppm\tType\n1\t\t171,4\tC\n2\t\t60,5\tCH2\n3\t2\t128,4\tCH');
    expect(table.rows.map(({ signal }) => signal)).toEqual(expected);
    expect(table.rows.map(({ line }) => line)).toEqual([2, 3, 4]);
    expect(table.notes).toEqual(['Line 1 skipped: heading', 'Column "No." is not used']);
    expect(table.issues).toEqual([]);
  });

  it('keeps the text of a wrong cell and names line, column and cure', () => {
    const table = parseCarbonTable('171.4\t0\nabc\t1\n20.1\t7\n900\t1');
    expect(table.rows.map(({ signal }) => signal !== null)).toEqual([true, false, false, false]);
    expect(table.rows[1].cells.shift).toBe('abc');
    expect(table.issues).toEqual([
      { line: 2, column: 'shift', message: 'expected a number between -50 and 300 ppm' },
      { line: 3, column: 'hydrogens', message: 'expected a whole number between 0 and 3' },
      { line: 4, column: 'shift', message: 'expected a number between -50 and 300 ppm' },
    ]);
  });

  it('does not guess what q means', () => {
    expect(parseCarbonTable('14.2\tq').issues[0]).toMatchObject({ line: 1, column: 'hydrogens' });
  });

  it('says so when there is nothing to read, or too much', () => {
    expect(parseCarbonTable('').issues[0].message).toMatch(/no numbers found; expected one signal a line/);
    expect(parseCarbonTable('shift\ttype').issues).toHaveLength(1);
    const many = parseCarbonTable(Array.from({ length: 150 }, (_, i) => `${i}.5`).join('\n'));
    expect(many.rows).toHaveLength(120);
    expect(many.issues).toEqual([{ line: 121, column: null, message: 'expected at most 120 signals' }]);
  });

  it('gives back numbers in whatever style they were written', () => {
    const row = fc.record({
      shift: fc.integer({ min: -499, max: 2999 }),
      hydrogens: fc.integer({ min: 0, max: 3 }),
      count: fc.integer({ min: 1, max: 40 }),
    });
    fc.assert(
      fc.property(
        fc.array(row, { minLength: 1, maxLength: 20 }),
        fc.constantFrom('\t', ';', ' '),
        fc.constantFrom('.', ','),
        (rows, separator, decimal) => {
          const text = rows
            .map(({ shift, hydrogens, count }) => [(shift / 10).toFixed(1).replace('.', decimal), hydrogens, count].join(separator))
            .join('\n');
          expect(carbons(text)).toEqual(rows.map(({ shift, hydrogens, count }) => ({ shift: shift / 10, hydrogens, count })));
        },
      ),
    );
  });
});

describe('parseProtonTable', () => {
  it('recognises count, multiplicity and couplings by what they look like', () => {
    expect(protons('7.21\t2H\td\t8.1')).toEqual([{ shift: 7.21, count: 2, multiplicity: 'd', couplings: [8.1] }]);
    expect(protons('7,21;2;d;8,1')).toEqual([{ shift: 7.21, count: 2, multiplicity: 'd', couplings: [8.1] }]);
    expect(protons('5.83 1 ddt 17.1 10.3 6.6')).toEqual([{ shift: 5.83, count: 1, multiplicity: 'ddt', couplings: [17.1, 10.3, 6.6] }]);
    expect(protons('3.79\ts\t3H')).toEqual([{ shift: 3.79, multiplicity: 's', count: 3 }]);
    expect(protons('1.94 1 br s')).toEqual([{ shift: 1.94, count: 1, multiplicity: 'br s' }]);
    expect(protons('7.29\t2 H\tapp t\tJ = 7.7 Hz')).toEqual([{ shift: 7.29, count: 2, multiplicity: 't', couplings: [7.7] }]);
    expect(protons('4.10')).toEqual([{ shift: 4.1 }]);
  });

  it('knows the other names of multiplicities', () => {
    const names = ['singlet', 'pent', 'hept', 'sxt', 'bs', 'br. s', 'Quartet', 'DD'];
    expect(names.map((name) => protons(`1.0\t1\t${name}`)[0]?.multiplicity)).toEqual([
      's',
      'quint',
      'sept',
      'sext',
      'br s',
      'br s',
      'q',
      'dd',
    ]);
  });

  it('reads a range as its middle and says so', () => {
    const table = parseProtonTable('7.62–7.55\t2\tm');
    expect(table.rows[0].signal).toEqual({ shift: 7.585, count: 2, multiplicity: 'm' });
    expect(table.notes[0]).toMatch(/Line 1: range 7.62–7.55 read as its middle, 7.585/);
  });

  it('follows the heading, with couplings in one cell', () => {
    expect(protons('δ\tnH\tmult.\tJ / Hz\n7,21\t2\tdd\t8,1; 1,2\n−0,02\t9\ts\t')).toEqual([
      { shift: 7.21, count: 2, multiplicity: 'dd', couplings: [8.1, 1.2] },
      { shift: -0.02, count: 9, multiplicity: 's' },
    ]);
  });

  it('names the cell that is wrong', () => {
    expect(parseProtonTable('7.2\tx\td').issues).toMatchObject([{ line: 1, column: 'count' }]);
    expect(parseProtonTable('7.2\t2\tfoo').issues).toMatchObject([{ line: 1, column: 'multiplicity' }]);
    expect(parseProtonTable('7.2\t2\td\tabc').issues).toMatchObject([{ line: 1, column: 'couplings' }]);
    expect(parseProtonTable('70.2\t2\td').issues).toMatchObject([{ line: 1, column: 'shift' }]);
  });
});
