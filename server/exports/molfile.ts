import type { LaidOutStructure } from '../../shared/jobs/contract.js';

/** V2000 has three columns for each count. */
const MOST_ATOMS = 999;
const CHARGES_PER_LINE = 8;

/**
 * Writes a connection table in the V2000 format (SCIENCE.md 9.1): fixed columns, charges as `M  CHG`, one Kekulé form.
 *
 * @param name - first line; line breaks become spaces and it is cut to 80 characters, as the format says
 * @throws RangeError above 999 atoms or bonds
 */
export function molfile(structure: LaidOutStructure, name: string): string {
  const { atoms, bonds } = structure;
  if (atoms.length > MOST_ATOMS || bonds.length > MOST_ATOMS) throw new RangeError(`A V2000 file holds at most ${MOST_ATOMS} atoms.`);
  const charged = atoms.flatMap(({ charge }, index) => (charge === 0 ? [] : [{ charge, number: index + 1 }]));
  const chargeLines: string[] = [];
  for (let start = 0; start < charged.length; start += CHARGES_PER_LINE) {
    const part = charged.slice(start, start + CHARGES_PER_LINE);
    chargeLines.push(
      `M  CHG${columns(part.length, 3)}${part.map(({ number, charge }) => columns(number, 4) + columns(charge, 4)).join('')}`,
    );
  }
  return [
    name.replace(/[\r\n]+/g, ' ').slice(0, 80),
    '  Isoloom           2D',
    '',
    `${columns(atoms.length, 3)}${columns(bonds.length, 3)}  0  0  0  0  0  0  0  0999 V2000`,
    ...atoms.map(
      ({ symbol, x, y }) => `${coordinate(x)}${coordinate(y)}${coordinate(0)} ${symbol.padEnd(3)} 0  0  0  0  0  0  0  0  0  0  0  0`,
    ),
    ...bonds.map(({ from, to, order }) => `${columns(from + 1, 3)}${columns(to + 1, 3)}${columns(order, 3)}  0  0  0  0`),
    ...chargeLines,
    'M  END',
    '',
  ].join('\n');
}

const columns = (value: number, width: number): string => String(value).padStart(width);
/** Ten columns, four of them decimals. */
const coordinate = (value: number): string => (Math.abs(value) < 5e-5 ? 0 : value).toFixed(4).padStart(10);
