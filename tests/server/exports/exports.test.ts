import { Molecule } from 'openchemlib';
import { describe, expect, it } from 'vitest';
import type { Candidate } from '../../../server/models/candidate.js';
import { csvHeader, csvRow } from '../../../server/exports/csv.js';
import { molfile } from '../../../server/exports/molfile.js';
import { sdfRecord } from '../../../server/exports/sdf.js';
import { smilesLine } from '../../../server/exports/smiles.js';
import { layOut } from '../../../workers/jobs/layout.js';
import { loadRdkit } from '../../support/rdkit.js';

const origin = { code: 'U-0042', runNumber: 3, complete: false };
const candidate = {
  rank: 2,
  smiles: 'CC(=O)OCC=C',
  idcode: 'gNp@`',
  probability: 0.125,
  score: -3.5,
  terms: { carbon13: -2.5, plausibility: -1 },
  carbonDeviation: 1.25,
  protonDeviation: null,
  remarks: [
    { kind: 'fit', tone: 'doubts', text: 'carbonyl, 4 ppm off', atoms: [1] },
    { kind: 'stereo', tone: 'notes', text: 'a "double" bond\nof two forms', atoms: [] },
  ],
} as unknown as Candidate;

describe('V2000 connection tables', () => {
  /** Structures of many kinds; both readers must get back what was written. */
  const structures = [
    'CC(=O)OCC=C',
    'Cc1ccncc1',
    'C[N+](=O)[O-]',
    'CCN=[N+]=[N-]',
    '[C-]#[N+]CC',
    'CS(=O)(=O)C',
    'CC#CC1CC1',
    'Clc1ccc(Br)c(I)c1F',
    'C[Si](C)(C)C',
    'CP(=O)(OC)OC',
    'c1ccc2[nH]ccc2c1',
  ];

  it.each(structures)('are read back as the same structure: %s', async (smiles) => {
    const text = molfile(layOut(smiles), 'test');
    expect(Molecule.fromMolfile(text).getIDCode()).toBe(Molecule.fromSmiles(smiles).getIDCode());
    const rdkit = await loadRdkit();
    const [written, read] = [rdkit.get_mol(smiles), rdkit.get_mol(text)];
    expect(read?.get_smiles()).toBe(written?.get_smiles());
    written?.delete();
    read?.delete();
  });

  it('keep to the columns of the format', () => {
    // CTfile formats, connection table: counts line aaabbb…V2000, atom x y z in 10.4 each, bond 111222ttt (SCIENCE.md 9.1).
    const lines = molfile(layOut('C[N+](=O)[O-]'), 'nitro\nmethane').split('\n');
    expect(lines[0]).toBe('nitro methane');
    expect(lines[1].slice(20, 22)).toBe('2D');
    expect(lines[3]).toBe('  4  3  0  0  0  0  0  0  0  0999 V2000');
    for (const atom of lines.slice(4, 8)) expect(atom).toMatch(/^( {1,5}-?\d+\.\d{4}){3} [CNO] {3}0 {2}0/);
    for (const atom of lines.slice(4, 8)) expect(atom.slice(30, 31)).toBe(' ');
    expect(lines.slice(8, 11)).toEqual(['  1  2  1  0  0  0  0', '  2  3  2  0  0  0  0', '  2  4  1  0  0  0  0']);
    expect(lines.slice(11)).toEqual(['M  CHG  2   2   1   4  -1', 'M  END', '']);
  });

  it('are not written for more atoms than the format holds', () => {
    const atoms = Array.from({ length: 1_000 }, () => ({ symbol: 'C', charge: 0, x: 0, y: 0 }));
    expect(() => molfile({ idcode: '', atoms, bonds: [] }, 'large')).toThrow(RangeError);
  });
});

describe('SDF records', () => {
  it('hold the structure and its figures, each value on one line', () => {
    const record = sdfRecord(candidate, layOut(candidate.smiles), origin);
    expect(record.startsWith('U-0042-run-3-rank-2\n')).toBe(true);
    expect(record).toContain('> <RANK>\n2\n\n');
    expect(record).toContain('> <PROBABILITY>\n0.125\n\n');
    expect(record).toContain('> <RUN_COMPLETE>\nno\n\n');
    expect(record).toContain('> <REMARKS>\ncarbonyl, 4 ppm off; a "double" bond of two forms\n\n');
    expect(record).not.toContain('PROTON1');
    expect(record.endsWith('$$$$\n')).toBe(true);
  });
});

describe('CSV rows', () => {
  it('have a field for each column and quote what needs it (RFC 4180)', () => {
    expect(csvHeader()).toBe(
      'rank,smiles,probability,score,score_carbon13,score_proton1,score_multiplicity,score_integral,score_plausibility,carbon13_mean_absolute_deviation_ppm,proton1_mean_absolute_deviation_ppm,remarks,idcode,run_complete\r\n',
    );
    expect(csvRow(candidate, origin)).toBe(
      '2,CC(=O)OCC=C,0.125,-3.5,-2.5,,,,-1,1.25,,"carbonyl, 4 ppm off; a ""double"" bond\nof two forms",gNp@`,no\r\n',
    );
  });

  it('keep spreadsheets from running a text as a formula', () => {
    expect(csvRow({ ...candidate, idcode: '@SUM(A1)', remarks: [] } as unknown as Candidate, { complete: true })).toContain(
      ",'@SUM(A1),yes\r\n",
    );
  });
});

describe('SMILES lines', () => {
  it('name unknown, run and rank, and say where a search was cut short', () => {
    expect(smilesLine(candidate, origin)).toBe('CC(=O)OCC=C\tU-0042-run-3-rank-2-incomplete\n');
    expect(smilesLine(candidate, { ...origin, complete: true })).toBe('CC(=O)OCC=C\tU-0042-run-3-rank-2\n');
  });
});
