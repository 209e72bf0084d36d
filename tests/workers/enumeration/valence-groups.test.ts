import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { parseSmiles } from '../../../shared/chemistry/smiles.js';
import { evidenceDocument, VALENCE_GROUPS, type EvidenceInput, type ValenceGroup } from '../../../shared/schemas/evidence.js';
import type { MolecularGraph } from '../../../shared/types/molecular-graph.js';
import { createSearch } from '../../../workers/enumeration/search.js';
import { constitutionKey } from '../../../workers/graph/constitution-key.js';
import { cutOut, outsideOrders } from '../../support/cut-out.js';
import { enumerateAll } from '../../support/enumerate.js';
import { graphOf } from '../../support/graph-of.js';
import { loadRdkit, molfileOf, rdkitSmiles } from '../../support/rdkit.js';
import { bruteForce, groupOfAtom } from '../../support/valence-brute-force.js';

const ALL = [...VALENCE_GROUPS];
const rdkit = await loadRdkit();

function formulaOf(atoms: Readonly<Record<string, number>>, hydrogens: number): string {
  return Object.entries({ ...atoms, H: hydrogens })
    .filter(([, count]) => count > 0)
    .map(([symbol, count]) => `${symbol}${count}`)
    .join('');
}

/** The constitutions of a formula as RDKit writes them, aromatic rings perceived: each once. */
function expectedSmiles(atoms: Readonly<Record<string, number>>, hydrogens: number, groups: readonly ValenceGroup[]): string[] {
  const found = new Set<string>();
  bruteForce(atoms, hydrogens, new Set(groups), (graph) => found.add(rdkitSmiles(rdkit, graph)));
  return [...found].sort();
}
const foundSmiles = (input: EvidenceInput, shards = 1): string[] =>
  enumerateAll(input, { keep: true, shards })
    .graphs.map((graph) => rdkitSmiles(rdkit, graph))
    .sort();

describe('groups of higher valence', () => {
  /** Every group in a formula that is small enough to try all bonds between labelled atoms. */
  it.each([
    [{ C: 1, N: 1, O: 2 }, 3],
    [{ C: 2, S: 1, O: 1 }, 6],
    [{ C: 2, S: 1, O: 2 }, 6],
    [{ C: 1, P: 1, O: 2 }, 5],
    [{ C: 1, N: 2, O: 4 }, 2],
    [{ C: 2, N: 4 }, 2],
    [{ C: 2, N: 3, O: 1 }, 3],
    [{ C: 1, S: 2, O: 3 }, 4],
    [{ C: 1, P: 2, O: 2 }, 6],
    [{ C: 3, N: 2, O: 1 }, 4],
    [{ C: 4, N: 1, O: 1 }, 3],
    [{ N: 2, O: 3, S: 1 }, 2],
  ])('are formed exactly as trying every bond finds them: %j H%i', (atoms, hydrogens) => {
    const expected = expectedSmiles(atoms as Record<string, number>, hydrogens, ALL);
    expect(foundSmiles({ formula: formulaOf(atoms as Record<string, number>, hydrogens), options: { valenceGroups: ALL } })).toEqual(
      expected,
    );
  });

  it('are formed exactly for random formulas and choices of groups', () => {
    fc.assert(
      fc.property(
        fc.record({
          C: fc.integer({ min: 0, max: 4 }),
          N: fc.integer({ min: 0, max: 4 }),
          O: fc.integer({ min: 0, max: 4 }),
          S: fc.integer({ min: 0, max: 2 }),
          P: fc.integer({ min: 0, max: 1 }),
        }),
        fc.nat(1e6),
        fc.subarray(ALL),
        (atoms, pick, groups) => {
          const heavy = atoms.C + atoms.N + atoms.O + atoms.S + atoms.P;
          fc.pre(heavy >= 2 && heavy <= 6);
          const most = 2 * atoms.C + atoms.N + atoms.P + 2;
          const fewest = Math.max(most - 8, most % 2);
          const hydrogens = fewest + 2 * (pick % (Math.floor((most - fewest) / 2) + 1));
          const input = { formula: formulaOf(atoms, hydrogens), options: { valenceGroups: groups } };
          expect(foundSmiles(input, 1 + (pick % 5))).toEqual(expectedSmiles(atoms, hydrogens, groups));
        },
      ),
      { numRuns: 60 },
    );
  }, 240_000);

  /** Well-known compounds by their usual structural formulas (textbook nomenclature, from memory). */
  it.each([
    ['CH3NO2', 'C[N+](=O)[O-]', 'nitromethane'],
    ['C2H6OS', 'CS(C)=O', 'dimethyl sulfoxide'],
    ['C2H6O2S', 'CS(C)(=O)=O', 'dimethyl sulfone'],
    ['C3H9O4P', 'COP(=O)(OC)OC', 'trimethyl phosphate'],
    ['C5H5NO', 'C1=CC=C[N+]([O-])=C1', 'pyridine N-oxide'],
    ['C2H5N3', 'CCN=[N+]=[N-]', 'ethyl azide'],
    ['C2H2N2O', 'O=CC=[N+]=[N-]', 'diazoacetaldehyde'],
    ['C3H5N', 'CC[N+]#[C-]', 'ethyl isocyanide'],
    ['CH5NO2S', 'CS(N)(=O)=O', 'methanesulfonamide'],
    ['CH3ClO2S', 'CS(Cl)(=O)=O', 'methanesulfonyl chloride'],
    ['C3H9NO', 'C[N+](C)(C)[O-]', 'trimethylamine N-oxide'],
    ['C2H3NO', 'CC#[N+][O-]', 'acetonitrile oxide'],
    ['CH2N2O4', 'O=[N+]([O-])C[N+](=O)[O-]', 'dinitromethane'],
    ['C2H7O2P', 'CO[PH](C)=O', 'methyl methylphosphinate'],
  ])('hold in %s the structure %s once (%s), and never without being asked for', (formula, smiles) => {
    const key = constitutionKey(graphOf(smiles), true);
    const all = enumerateAll({ formula, options: { valenceGroups: ALL } }, { keep: true }).keys;
    expect(all.filter((found) => found === key)).toHaveLength(1);
    expect(new Set(all).size).toBe(all.length);
    expect(enumerateAll({ formula }, { keep: true }).keys).not.toContain(key);
  });

  it.each(['C4H7NO2', 'C3H5N3O', 'C2H6O3S', 'C3H9O3P', 'C5H5NO'])('of %s come out the same from any number of shards', (formula) => {
    const input = { formula, options: { valenceGroups: ALL } };
    const whole = enumerateAll(input, { keep: true }).keys.sort();
    for (const shards of [3, 17, 90]) expect(enumerateAll(input, { keep: true, shards }).keys.sort()).toEqual(whole);
  });
});

/** Families with every group, for cutting fragments out of. */
const FAMILIES = ['C2H4N2O3', 'C3H6N2O2', 'C2H3N3O', 'C3H6N2OS', 'C2H6O3S2', 'C2H6NO2P', 'C2H4N4O', 'C4H5NO2'].map((formula) => ({
  formula,
  ...enumerateAll({ formula, options: { valenceGroups: ALL, mergeResonanceForms: false } }, { keep: true }),
}));

describe('groups of higher valence beside required fragments', () => {
  it('give exactly the structures in which the fragments find room and a group holds every special atom outside them', () => {
    const asWritten = JSON.stringify({ kekulize: false, setAromaticity: false });
    const molecules = new Map<MolecularGraph, NonNullable<ReturnType<typeof rdkit.get_mol>>>();
    let withGroups = 0;
    fc.assert(
      fc.property(
        fc.constantFrom(...FAMILIES),
        fc.nat(1e6),
        fc.array(fc.nat(1e6), { minLength: 5, maxLength: 5 }),
        fc.integer({ min: 1, max: 5 }),
        fc.integer({ min: 1, max: 2 }),
        fc.oneof(fc.constant(ALL), fc.subarray(ALL)),
        (family, which, picks, wanted, count, groups) => {
          const special = family.graphs.filter((graph) => specialAtoms(graph).length > 0);
          const cut = cutOut(
            which % 4 === 0 ? family.graphs[which % family.graphs.length] : special[which % special.length],
            picks,
            wanted,
          );
          const read = parseSmiles(cut.smiles);
          // A note: the fragment brings an O⁻ that the cut has not.
          fc.pre(cut.smiles.includes('*') && read.ok && read.notes.length === 0);
          // An open double bond at a special atom makes what no group is, or leaves open which group it is.
          fc.pre(!/\[(N\+|S|PH?2?)\][-=#\d]*(\([-#]?\*\))*\(=\*\)/.test(cut.smiles) || groups === ALL);
          const query = rdkit.get_qmol(cut.smarts)!;
          const placements = (graph: MolecularGraph): number[][] => {
            const molecule = molecules.get(graph) ?? rdkit.get_mol(molfileOf(graph), asWritten)!;
            molecules.set(graph, molecule);
            const found = JSON.parse(molecule.get_substruct_matches(query)) as { atoms: number[] }[];
            return (Array.isArray(found) ? found : [])
              .map((match) => match.atoms)
              .filter((atoms) => atoms.every((atom, k) => outsideOrders(graph, atom, atoms) === cut.quotas[k]));
          };
          const expected = family.keys.filter((_, k) => {
            const graph = family.graphs[k];
            const isHeld = (covered: readonly number[]): boolean =>
              specialAtoms(graph).every((atom) => covered.includes(atom) || groups.includes(groupOfAtom(graph, atom) as ValenceGroup));
            const sets = placements(graph);
            if (count === 1) return sets.some(isHeld);
            return sets.some((first) =>
              sets.some((second) => !second.some((atom) => first.includes(atom)) && isHeld([...first, ...second])),
            );
          });
          query.delete();
          let found: string[] = [];
          try {
            const input = {
              formula: family.formula,
              fragments: { required: [{ smiles: cut.smiles, count }] },
              options: { mergeResonanceForms: false, valenceGroups: groups },
            };
            found = enumerateAll(input, { keep: true, shards: 3 }).keys;
          } catch (error) {
            expect(String(error)).toContain('needs more');
          }
          expect(new Set(found).size).toBe(found.length);
          // A fragment may bring a state that no group has (S=N): such structures are no members of the family.
          const members = new Set(family.keys);
          const known = found.filter((key) => members.has(key));
          if (known.length < found.length) expect(cut.smiles).toMatch(/=\*/);
          expect(known.sort()).toEqual(expected.sort());
          if (expected.length > 0) withGroups++;
        },
      ),
      { numRuns: 100 },
    );
    for (const molecule of molecules.values()) molecule.delete();
    expect(withGroups).toBeGreaterThan(30);
  }, 240_000);

  it('make a second nitro group beside a required one, each dinitro compound once', () => {
    const input = {
      formula: 'C3H6N2O4',
      fragments: { required: [{ smiles: '*[N+](=O)[O-]', count: 1 }] },
      options: { valenceGroups: ALL },
    };
    const { keys } = enumerateAll(input, { keep: true });
    expect(new Set(keys).size).toBe(keys.length);
    // Dinitropropanes: 1,1-, 1,2-, 1,3- and 2,2-.
    const nitro = '[N+](=O)[O-]';
    for (const smiles of [`CCC(${nitro})${nitro}`, `CC(${nitro})C${nitro}`, `C(${nitro})CC${nitro}`, `CC(${nitro})(C)${nitro}`])
      expect(keys).toContain(constitutionKey(graphOf(smiles), true));
    const twice = enumerateAll(
      { formula: 'C3H6N2O4', fragments: { required: [{ smiles: '*[N+](=O)[O-]', count: 2 }] } },
      { keep: true },
    ).keys;
    expect(twice).toHaveLength(4);
    for (const key of twice) expect(keys).toContain(key);
  });

  it('make an azide on the nitrogen of a required fragment', () => {
    const input = { formula: 'C2H6N4', fragments: { required: [{ smiles: '*N(*)N=*', count: 1 }] }, options: { valenceGroups: ALL } };
    expect(enumerateAll(input, { keep: true }).keys).toContain(constitutionKey(graphOf('CN(C)N=[N+]=[N-]'), true));
  });

  it('count their oxygens among required ones, as S=O and P=O of the structure', () => {
    const input = { formula: 'C2H6OS', fragments: { required: [{ smiles: 'O=*', count: 1 }] }, options: { valenceGroups: ALL } };
    expect(enumerateAll(input, { keep: true }).keys).toEqual([constitutionKey(graphOf('CS(C)=O'), true)]);
  });
});

describe('groups that the evidence rules out', () => {
  const noted = (input: EvidenceInput): { notes: readonly string[]; keys: string[] } => ({
    notes: createSearch(evidenceDocument.parse(input)).notes.filter((note) => note.startsWith('Nitro')),
    keys: enumerateAll(input, { keep: true }).keys,
  });
  const nitromethane = constitutionKey(graphOf('C[N+](=O)[O-]'), true);
  const spectrum = (...wavenumbers: number[]): { wavenumber: number }[] => wavenumbers.map((wavenumber) => ({ wavenumber }));

  it('are left out for an excluded fragment that is part of them, with a note', () => {
    const input = { formula: 'CH3NO2', fragments: { excluded: [{ smiles: 'N=O' }] }, options: { valenceGroups: ALL } };
    const { notes, keys } = noted(input);
    expect(keys).not.toContain(nitromethane);
    expect(notes).toEqual(['Nitro groups were left out: the excluded fragment N=O is part of them.']);
  });

  it('are left out when a whole infrared list has no band in their region, with a note (regions: SCIENCE.md 5, widened)', () => {
    const input = {
      formula: 'CH3NO2',
      infraredBands: spectrum(3350, 2950, 1740, 1450, 1200, 1050),
      options: { valenceGroups: ALL },
    };
    const { notes, keys } = noted(input);
    expect(keys).not.toContain(nitromethane);
    expect(notes).toEqual([
      'Nitro groups were left out: the infrared list has no band between 1670 and 1490 cm⁻¹, where every NO₂ group absorbs strongly.',
    ]);
  });

  it.each([
    ['too few bands to be a spectrum', spectrum(2950, 1740, 1200)],
    ['both nitro bands', spectrum(2950, 1740, 1555, 1375, 1200, 650)],
    ['bands on one side only', spectrum(3400, 3100, 2950, 2870, 1740)],
    ['no list', []],
  ])('stay with %s', (_, infraredBands) => {
    const { notes, keys } = noted({ formula: 'CH3NO2', infraredBands, options: { valenceGroups: ALL } });
    expect(keys).toContain(nitromethane);
    expect(notes).toEqual([]);
  });

  it('are limited in number, with a note, where a formula has room for more sub-searches than memory', () => {
    const search = createSearch(evidenceDocument.parse({ formula: 'C14H18N4O9S2', options: { valenceGroups: ALL } }));
    expect(search.isCurtailed).toBe(true);
    expect(search.notes).toEqual([expect.stringMatching(/structures with \d+ or more of them are not all built/)]);
    expect(search.branches.length).toBeLessThan(150_000);
    expect(createSearch(evidenceDocument.parse({ formula: 'C8H10N4O2', options: { valenceGroups: ALL } })).isCurtailed).toBe(false);
  });

  it('say nothing of groups that the formula has no atoms for', () => {
    const input = {
      formula: 'C3H6O2',
      infraredBands: spectrum(2950, 1740, 1450, 1050, 1200),
      fragments: { excluded: [{ smiles: 'S=O' }, { smiles: 'N=O' }] },
      options: { valenceGroups: ALL },
    };
    expect(noted(input).notes).toEqual([]);
  });
});

function specialAtoms(graph: MolecularGraph): number[] {
  return Array.from({ length: graph.atomCount }, (_, atom) => atom).filter((atom) => groupOfAtom(graph, atom) !== 'plain');
}
