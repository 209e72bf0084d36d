import { describe, expect, it } from 'vitest';
import { evidenceDocument } from '../../../../shared/schemas/evidence.js';
import { compareEvidence } from '../../../../src/features/evidence/lib/compare-evidence.js';
import { draftOf, emptyDraft, issueAt, readDraft } from '../../../../src/features/evidence/lib/evidence-draft.js';

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

  it('reads decimal commas and real minus signs', () => {
    const draft = {
      ...draftOf(document),
      carbons: [{ shift: '−2,5', hydrogens: '3', count: '' }],
      protons: [{ shift: '0,07', count: '9', multiplicity: 's', couplings: '' }],
    };
    const read = readDraft({ ...draft, formula: 'C4H12Si', required: [] });
    expect(read.ok && [read.document.carbonSignals[0]?.shift, read.document.protonSignals[0]?.shift]).toEqual([-2.5, 0.07]);
  });

  it('names the row of a wrong cell although blank rows stand before it', () => {
    const blank = { shift: '', hydrogens: '', count: '' };
    const read = readDraft({ ...draftOf(document), carbons: [blank, blank, { shift: 'abc', hydrogens: '', count: '' }] });
    expect(read.ok).toBe(false);
    expect(issueAt(read.issues, 'carbonSignals[2].shift')).toContain('expected a number between -50 and 300');
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
