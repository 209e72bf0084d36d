import fc from 'fast-check';
import { Molecule } from 'openchemlib';
import { describe, expect, it } from 'vitest';
import { elementOf } from '../../../shared/chemistry/elements.js';
import { kekuleForms } from '../../../shared/chemistry/fragment.js';
import { formatHill, formulaCounts } from '../../../shared/chemistry/formula.js';
import { compositionOf, parseSmiles, STEREO_NOTE, type ParsedSmiles } from '../../../shared/chemistry/smiles.js';
import type { MolecularGraph } from '../../../shared/types/molecular-graph.js';
import { constitutionKey } from '../../../workers/graph/constitution-key.js';
import { canonicalStructure } from '../../../workers/graph/openchemlib.js';
import { writeExplicitSmiles } from '../../support/explicit-smiles.js';
import { randomMolecule } from '../../support/random-molecules.js';
import { createUnitKind } from '../../../workers/enumeration/units.js';

function parsed(smiles: string): ParsedSmiles {
  const result = parseSmiles(smiles);
  if (!result.ok) throw new Error(`${smiles}: ${result.message}`);
  return result;
}
function refusal(smiles: string): { message: string; position: number } {
  const result = parseSmiles(smiles);
  if (result.ok) throw new Error(`${smiles} was accepted`);
  return result;
}
const formulaOf = (graph: MolecularGraph): string => formatHill(formulaCounts(compositionOf(graph)));
const valenceOf = (graph: MolecularGraph, atom: number): number => {
  let valence = graph.hydrogens[atom];
  for (let other = 0; other < graph.atomCount; other++) valence += graph.bondOrders[atom * graph.atomCount + other];
  return valence;
};
describe('parseSmiles', () => {
  it('gives every atom the hydrogens of the usual valences', () => {
    // OpenSMILES specification 1.0, section 3.1.5 (organic subset).
    expect([...parsed('CN').graph.hydrogens]).toEqual([3, 2]);
    expect([...parsed('C=O').graph.hydrogens]).toEqual([2, 0]);
    expect([...parsed('OC#N').graph.hydrogens]).toEqual([1, 0, 0]);
    expect([...parsed('CS(C)=O').graph.hydrogens]).toEqual([3, 0, 3, 0]);
    expect([...parsed('CP(=O)(O)O').graph.hydrogens]).toEqual([3, 0, 0, 1, 1]);
  });

  it.each([
    // Molecular formulas: common knowledge; caffeine and vanillin also SCIENCE.md 1.4.
    ['Cn1cnc2c1c(=O)n(C)c(=O)n2C', 'C8H10N4O2'],
    ['COc1cc(C=O)ccc1O', 'C8H8O3'],
    ['c1ccc2ccccc2c1', 'C10H8'],
    ['c1ccc2cc3ccccc3cc2c1', 'C14H10'],
    ['c1ccc[nH]1', 'C4H5N'],
    ['c1ccsc1', 'C4H4S'],
    ['c1ccc(-c2ccccc2)cc1', 'C12H10'],
    ['c1ccccc1c1ccccc1', 'C12H10'],
    ['O=c1cccc[nH]1', 'C5H5NO'],
    ['[O-][n+]1ccccc1', 'C5H5NO'],
    ['C[N+](=O)[O-]', 'CH3NO2'],
    ['CN=[N+]=[N-]', 'CH3N3'],
    ['C[N+]#[C-]', 'C2H3N'],
    ['C=[N+]=[N-]', 'CH2N2'],
    ['C[Si](C)(C)C', 'C4H12Si'],
    ['FC(Cl)(Br)I', 'CBrClFI'],
    ['[H]OC([H])([H])[H]', 'CH4O'],
    ['c1cc2cccc3ccc4cccc1c4c23', 'C16H10'],
  ])('reads %s as %s', (smiles, formula) => {
    expect(formulaOf(parsed(smiles).graph)).toBe(formula);
  });

  it('places double bonds so that every atom of an aromatic ring has its valence', () => {
    for (const smiles of [
      'c1ccc2ccccc2c1',
      'c1cnc2[nH]cnc2c1',
      'c1ccc2c(c1)ccc1ccccc12',
      'Cn1cnc2c1c(=O)n(C)c(=O)n2C',
      'c1ccc2c3c(cccc13)CC2',
      'c1coc2ccccc12',
    ]) {
      const { graph } = parsed(smiles);
      for (let atom = 0; atom < graph.atomCount; atom++) {
        const { defaultValence } = elementOf(graph.atomicNumbers[atom]);
        expect(valenceOf(graph, atom), `${smiles} atom ${atom}`).toBe(defaultValence);
      }
    }
  });

  it('agrees with openchemlib on atoms, hydrogens and bonds of random molecules', () => {
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 1_000_000 }), (seed) => {
        const molecule = randomMolecule(seed);
        const { smiles } = canonicalStructure(molecule);
        const read = parsed(smiles);
        const library = Molecule.fromSmiles(smiles, { noCoordinates: true });
        const { graph } = read;
        expect(graph.atomCount).toBe(library.getAllAtoms());
        for (let atom = 0; atom < graph.atomCount; atom++) {
          expect(graph.atomicNumbers[atom]).toBe(library.getAtomicNo(atom));
          expect(graph.charges[atom]).toBe(library.getAtomCharge(atom));
          expect(graph.hydrogens[atom], `${smiles} atom ${atom}`).toBe(library.getAllHydrogens(atom));
        }
        // The library writes rings in lower case: the form it was given is one of those that this allows.
        const keys = kekuleForms(read).map((bondOrders) => constitutionKey({ ...graph, bondOrders }, false));
        expect(keys).toContain(constitutionKey(molecule, false));
      }),
      { numRuns: 400 },
    );
  });

  it('gives back the graph whose SMILES it reads, atom by atom', () => {
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 1_000_000 }), (seed) => {
        const molecule = randomMolecule(seed);
        const { graph } = parsed(writeExplicitSmiles(molecule));
        expect(graph.atomCount).toBe(molecule.atomCount);
        expect(constitutionKey(graph, false)).toBe(constitutionKey(molecule, false));
        expect([...graph.hydrogens].sort()).toEqual([...molecule.hydrogens].sort());
      }),
      { numRuns: 300 },
    );
  });

  it('keeps heavy atoms in the order of the text and takes * and [H] for no atoms', () => {
    const { graph, attachments } = parsed('*c1ccc([H])c([*:2])n1');
    expect([...graph.atomicNumbers]).toEqual([6, 6, 6, 6, 6, 7]);
    expect(attachments).toEqual([
      { atom: 0, order: 1 },
      { atom: 4, order: 1 },
    ]);
    expect([...graph.hydrogens]).toEqual([0, 1, 1, 1, 0, 0]);
  });

  it('knows attachments of every order', () => {
    expect(parsed('*=C').attachments).toEqual([{ atom: 0, order: 2 }]);
    expect(parsed('C=*').attachments).toEqual([{ atom: 0, order: 2 }]);
    expect(parsed('N#*').attachments).toEqual([{ atom: 0, order: 3 }]);
    expect(parsed('[*:1]C[*:2]').attachments).toEqual([
      { atom: 0, order: 1 },
      { atom: 0, order: 1 },
    ]);
  });

  it('drops stereo marks with a note', () => {
    for (const smiles of ['C[C@H](O)F', 'C[C@@H](O)F', 'F/C=C/F', 'F/C=C\\F', '[C@TH1](F)(Cl)(Br)I'])
      expect(parsed(smiles).notes, smiles).toEqual([STEREO_NOTE]);
    expect(parsed('F/C=C/F').graph).toEqual(parsed('FC=CF').graph);
  });

  it.each([
    ['CN(=O)=O', 'C[N+](=O)[O-]'],
    ['CN=N#N', 'CN=[N+]=[N-]'],
    ['C=N#N', 'C=[N+]=[N-]'],
    ['[CH2-][N+]#N', 'C=[N+]=[N-]'],
    ['O=n1ccccc1', '[O-][n+]1ccccc1'],
    ['C[S+](C)[O-]', 'CS(C)=O'],
    ['C[S+2](C)([O-])[O-]', 'CS(C)(=O)=O'],
    ['C[P+](C)(C)[O-]', 'CP(C)(C)=O'],
  ])('reads %s like %s, with a note', (drawn, usual) => {
    expect(parsed(drawn).notes).toHaveLength(1);
    expect(canonicalStructure(parsed(drawn).graph).idcode).toBe(canonicalStructure(parsed(usual).graph).idcode);
    expect([...parsed(drawn).graph.charges].reduce((sum, charge) => sum + charge, 0)).toBe(0);
  });

  it.each([
    ['*c1ccc[n+](*)c1', '*c1ccc[n+]([O-])c1'],
    ['*[N+](=O)*', '*[N+](=O)[O-]'],
    ['*[N+](*)(C)*', '*[N+](*)(C)[O-]'],
  ])('closes the N⁺ of %s, cut from its O⁻, like %s, with a note', (cut, whole) => {
    expect(parsed(cut).notes).toEqual(['the * on N+ read as O−, which its charge needs']);
    const keyOf = (text: string): string => createUnitKind(text, 1, parsed(text).graph, parsed(text).attachments).canonicalKey;
    expect(keyOf(cut)).toBe(keyOf(whole));
  });

  it.each([
    ['empty text', '', 0, /expected a SMILES/],
    ['endless text', 'C'.repeat(2001), 2000, /longer than 2000 characters/],
    ['isotopes', 'C[13CH3]', 2, /isotope labels are not supported; remove the mass number/],
    ['deuterium', 'C[D]', 2, /isotopes are not supported; write H/],
    ['radicals', 'C[CH2]', 1, /radicals are not supported.*\[CH3\]/],
    ['bare bracket atoms', '[C]', 0, /radicals are not supported/],
    ['cations', 'C[NH3+]', 1, /opposite charge/],
    ['anions', 'CC(=O)[O-]', 6, /opposite charge.*neutral form/],
    ['salts', 'CC(=O)O.CN', 7, /several components.*remove/],
    ['charges apart from each other', '[O-]CC[NH3+]', 0, /opposite charge/],
    ['charges that do not add up', '[O-][N+](C)(C)[O-]', 0, /add up to -1/],
    ['carbocations', 'C[CH+][O-]', 1, /this charge on C is not supported/],
    ['atom numbers on atoms', '[CH3:1]C', 4, /remove the :n/],
    ['unknown elements', 'C[Se]C', 2, /"Se" is not supported; use C H N O S P F Cl Br I Si/],
    ['boron', 'CB(O)O', 1, /"B" is not supported/],
    ['silicon without brackets', 'CSi', 1, /in brackets: \[Si\]/],
    ['five-bonded carbon', 'C(C)(C)(C)(C)C', 0, /carbon has 5 bonds.*at most 4/],
    ['four-bonded nitrogen', 'CN(C)(C)C', 1, /nitrogen has 4 bonds.*\[N\+\]\[O-\]/],
    ['three-bonded oxygen', 'CO(C)C', 1, /oxygen has 3 bonds/],
    ['bonded halogens', 'CClC', 1, /chlorine has 2 bonds/],
    ['open rings', 'C1CC', 1, /ring 1 is not closed/],
    ['open branches', 'CC(C', 2, /branch is not closed; add \)/],
    ['stray brackets', 'CC)C', 2, /without \(/],
    ['open square brackets', 'C[NH', 1, /add \]/],
    ['empty branches', 'C()C', 1, /empty/],
    ['bonds to nothing', 'CC=', 2, /leads nowhere/],
    ['two bonds between two atoms', 'C12CC12', 6, /bonded already/],
    ['rings of one atom', 'C11', 2, /with itself/],
    ['contradicting ring bonds', 'C=1CCCCC#1', 9, /two different bond orders/],
    ['spaces', 'CC name', 2, /no spaces/],
    ['query symbols', 'C~C', 1, /query symbol/],
    ['quadruple bonds', 'C$C', 1, /"\$"/],
    ['aromatic rings without alternating bonds', 'c1cccn1', 5, /\[nH\]/],
    ['odd carbon rings', 'c1cccc1', 0, /alternating double bonds/],
    ['lower case outside rings', 'CccC', 1, /in none/],
    ['saturated aromatic carbon', '[cH2]1cccc1', 0, /saturated carbon is not aromatic/],
    ['an attachment inside a ring', '*1CC1', 0, /exactly one bond/],
    ['an attachment alone', '*', 0, /exactly one bond/],
    ['an attachment with a charge', 'C[*+]', 3, /no hydrogens and no charge/],
    ['attachments bonded to each other', '**', 0, /heavy atom/],
    ['hydrogen alone', '[H][H]', 0, /heavy atom/],
    ['bridging hydrogen', 'C[H]C', 1, /exactly one bond/],
  ])('refuses %s and names position and cure', (_what, smiles, position, cure) => {
    const { message, position: found } = refusal(smiles);
    expect(found).toBe(position);
    expect(message).toMatch(new RegExp(`^position ${position + 1}: `));
    expect(message).toMatch(cure);
  });

  it('answers every text with a graph within the valences or a position inside the text', () => {
    const token = fc.constantFrom(
      'C',
      'c',
      'N',
      'n',
      'O',
      'o',
      'S',
      's',
      'P',
      'Cl',
      'F',
      '[nH]',
      '[N+]',
      '[O-]',
      '[Si]',
      '[CH2]',
      '[H]',
      '*',
      '=',
      '#',
      '-',
      ':',
      '/',
      '(',
      ')',
      '1',
      '2',
      '%11',
      '.',
      '[',
      ']',
      ' ',
    );
    fc.assert(
      fc.property(fc.array(token, { maxLength: 24 }), (tokens) => {
        const text = tokens.join('');
        const result = parseSmiles(text);
        if (!result.ok) {
          expect(result.position).toBeGreaterThanOrEqual(0);
          expect(result.position).toBeLessThanOrEqual(Math.max(text.length - 1, 0));
          return;
        }
        const { graph, attachments } = result;
        for (let atom = 0; atom < graph.atomCount; atom++) {
          const open = attachments.reduce((sum, attachment) => sum + (attachment.atom === atom ? attachment.order : 0), 0);
          const { valences } = elementOf(graph.atomicNumbers[atom]);
          const charged =
            graph.charges[atom] === 0 ? valences : [valences[0] + (graph.atomicNumbers[atom] === 6 ? -1 : graph.charges[atom])];
          expect(charged).toContain(valenceOf(graph, atom) + open);
        }
      }),
      { numRuns: 3000 },
    );
  });
});
