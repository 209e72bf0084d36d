import { describe, expect, it } from 'vitest';
import { evidenceDocument } from '../../../../shared/schemas/evidence.js';
import { compareEvidence } from '../../../../src/features/evidence/lib/compare-evidence.js';
import {
  derivedWindow,
  draftOf,
  emptyDraft,
  issueAt,
  readDraft,
  signalsMeant,
} from '../../../../src/features/evidence/lib/evidence-draft.js';

const document = evidenceDocument.parse({
  formula: 'C9H10O2',
  fragments: { required: [{ smiles: '*c1ccc(*)cc1', count: 1 }], excluded: [{ smiles: 'OO' }] },
  carbonSignals: [
    { shift: 166.9, hydrogens: 0, count: 1 },
    { shift: 21.6, hydrogens: 3 },
  ],
  protonSignals: [{ shift: 7.21, count: 2, multiplicity: 'd', couplings: [8.1, 1.5] }],
  infraredBands: [{ wavenumber: 1718, intensity: 'strong' }],
});

describe('evidence being typed', () => {
  it('gives back the document it was made from', () => {
    const read = readDraft(draftOf(document));
    expect(read.ok && read.document).toEqual(document);
  });

  it('keeps a choice of groups of higher valence, none too, and leaves it open when there is none', () => {
    const groupsOf = (valenceGroups: readonly ('nitro' | 'sulfone')[] | undefined) => {
      const read = readDraft(draftOf(evidenceDocument.parse({ formula: 'C9H10O2', options: { valenceGroups } })));
      return read.ok ? read.document.options.valenceGroups : read.issues;
    };
    expect([groupsOf(['nitro', 'sulfone']), groupsOf([]), groupsOf(undefined)]).toEqual([['nitro', 'sulfone'], [], undefined]);
  });

  it('keeps windows set by hand, windows switched off, and leaves the others to the shift', () => {
    const windowed = evidenceDocument.parse({
      formula: 'C9H10O2',
      carbonSignals: [
        { shift: 166.9, window: { hybridisations: ['sp2', 'sp3'], heteroNeighbours: { min: 1, max: 2 } } },
        { shift: 128.3, window: null },
        { shift: 21.6 },
      ],
      massPeaks: [{ mz: 119.049, intensity: 100 }, { mz: 91.05 }],
      options: { shiftWindows: false, maxConstitutions: 50_000 },
    });
    const draft = draftOf(windowed);
    expect(draft.carbons.map(({ window }) => window)).toEqual(['sp3,sp2;1-2', 'none', '']);
    const read = readDraft(draft);
    expect(read.ok && read.document.carbonSignals.map(({ window }) => window)).toEqual([
      { hybridisations: ['sp3', 'sp2'], heteroNeighbours: { min: 1, max: 2 } },
      null,
      undefined,
    ]);
    expect(read.ok && [read.document.massPeaks, read.document.options.shiftWindows, read.document.options.maxConstitutions]).toEqual([
      windowed.massPeaks,
      false,
      50_000,
    ]);
  });

  it('derives a window from the shift and the heteroatoms of the formula, unless that is switched off', () => {
    const draft = { ...draftOf(document), carbons: [{ shift: '166,9', hydrogens: '0', count: '', window: '' }] };
    // The carbonyl carbon of an ester: sp2 with two oxygens (SCIENCE.md 4, 13C ranges).
    expect(derivedWindow(draft, 0)).toMatchObject({ hybridisations: expect.arrayContaining(['sp2']) });
    expect(derivedWindow(draft, 0)!.heteroNeighbours.max).toBeGreaterThanOrEqual(2);
    expect(derivedWindow({ ...draft, options: { ...draft.options, shiftWindows: false } }, 0)).toBeNull();
    expect(derivedWindow({ ...draft, carbons: [{ ...draft.carbons[0]!, shift: 'abc' }] }, 0)).toBeNull();
  });

  it('understands the letters of band tables and names the row of a wrong band', () => {
    const bands = [
      { wavenumber: '3350', intensity: 'br' },
      { wavenumber: '', intensity: '' },
      { wavenumber: '1718', intensity: 'loud' },
    ];
    const read = readDraft({ ...draftOf(document), bands });
    expect(issueAt(read.issues, 'infraredBands[2].intensity')).toBeDefined();
    expect(issueAt(read.issues, 'infraredBands[0]')).toBeUndefined();
    const right = readDraft({ ...draftOf(document), bands: bands.slice(0, 2) });
    expect(right.ok && right.document.infraredBands).toEqual([{ wavenumber: 3350, intensity: 'broad' }]);
  });

  it('reads decimal commas and real minus signs', () => {
    const draft = {
      ...draftOf(document),
      carbons: [{ shift: '−2,5', hydrogens: '3', count: '', window: '' }],
      protons: [{ shift: '0,07', count: '9', multiplicity: 's', couplings: '' }],
    };
    const read = readDraft({ ...draft, formula: 'C4H12Si', required: [] });
    expect(read.ok && [read.document.carbonSignals[0]?.shift, read.document.protonSignals[0]?.shift]).toEqual([-2.5, 0.07]);
  });

  it('names the row of a wrong cell although blank rows stand before it', () => {
    const blank = { shift: '', hydrogens: '', count: '', window: '' };
    const read = readDraft({ ...draftOf(document), carbons: [blank, blank, { shift: 'abc', hydrogens: '', count: '', window: '' }] });
    expect(read.ok).toBe(false);
    expect(issueAt(read.issues, 'carbonSignals[2].shift')).toContain('expected a number between -50 and 300');
  });

  it('reads pairs of 2D spectra, and names the row of a wrong one although blank rows stand before it', () => {
    const withPairs = { ...document, correlations: { ...document.correlations, hsqc: [[21.6, 2.4]] as [number, number][], hmbcBonds: 4 } };
    const draft = draftOf(withPairs);
    const read = readDraft(draft);
    expect(read.ok && read.document.correlations).toEqual(withPairs.correlations);
    const blank = { first: '', second: '' };
    const wrong = readDraft({
      ...draft,
      pairs: { ...draft.pairs, hmbc: [blank, { first: '7,21', second: 'abc' }], hsqc: [blank, { first: '166.9', second: '7.21' }] },
    });
    expect(issueAt(wrong.issues, 'correlations.hmbc[1][1]')).toContain('expected a number between -50 and 300');
    const contradicted = readDraft({ ...draft, pairs: { ...draft.pairs, hsqc: [blank, { first: '166.9', second: '7.21' }] } });
    expect(issueAt(contradicted.issues, 'correlations.hsqc[1]')).toContain('has 0 attached hydrogens');
  });

  it('shows which signals a shift of a pair can mean', () => {
    const draft = draftOf(document);
    expect(signalsMeant(draft, '13C', '166,5')).toEqual(['166.9']);
    expect(signalsMeant(draft, '1H', '9.9')).toEqual([]);
    expect(signalsMeant(draft, '1H', 'x')).toBeNull();
    const typing = {
      ...draft,
      carbons: [
        { ...draft.carbons[0]!, shift: '166.' },
        { ...draft.carbons[0]!, shift: 'abc' },
        { ...draft.carbons[0]!, shift: '166.3' },
      ],
    };
    expect(signalsMeant(typing, '13C', '166.4')).toEqual(['166.3', '166.']);
  });

  it('keeps text in number fields on the page and says what was expected', () => {
    const draft = draftOf(document);
    const read = readDraft({ ...draft, options: { ...draft.options, keep: 'many' } });
    expect(issueAt(read.issues, 'options.keep')).toContain('expected a whole number');
  });

  it('asks for a formula when there is none', () => {
    expect(issueAt(readDraft(emptyDraft()).issues, 'formula')).toContain('formula');
  });
});

describe('comparing revisions', () => {
  it('finds nothing between equal documents, whatever the order of signals', () => {
    const shuffled = { ...document, carbonSignals: [...document.carbonSignals].reverse() };
    expect(compareEvidence(document, shuffled)).toEqual([]);
  });

  it('names what came, went and changed', () => {
    const after = evidenceDocument.parse({
      ...document,
      formula: 'C9H12O2',
      carbonSignals: [document.carbonSignals[0]],
      options: { ...document.options, solvent: 'DMSO-d6' },
    });
    expect(compareEvidence(document, after)).toEqual([
      { part: 'Formula', before: 'C9H10O2', after: 'C9H12O2' },
      { part: '¹³C signals', before: 'δ 21.6, CH₃', after: null },
      { part: 'Solvent', before: 'CDCl3', after: 'DMSO-d6' },
    ]);
  });
});
