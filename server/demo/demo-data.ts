import type { z } from 'zod';
import type { EvidenceInput } from '../../shared/schemas/evidence.js';
import type { unknownCreateRequest } from '../../shared/schemas/unknowns.js';
import type { QuotaRole, TeamRole } from '../../shared/types/roles.js';
import type { UnknownStatus, Verdict } from '../../shared/types/states.js';

/**
 * The invented laboratory. People, samples and listings are made up; shifts and couplings were chosen within the
 * textbook ranges for such groups in CDCl3, with the scatter of a routine measurement, and copied from no source.
 */
export const DEMO_TEAM = 'Weir Street Laboratory (invented)';

export const DEMO_PEOPLE: ReadonlyArray<{ readonly role: QuotaRole; readonly name: string; readonly email: string }> = [
  { role: 'chemist', name: 'Ines Varga', email: 'chemist@weirstreet.example' },
  { role: 'lead', name: 'Tomas Eklund', email: 'lead@weirstreet.example' },
  { role: 'reader', name: 'Amara Nandi', email: 'reader@weirstreet.example' },
  { role: 'admin', name: 'Samuel Brandt', email: 'admin@weirstreet.example' },
];

export interface DemoUnknown {
  readonly title: string;
  readonly description: string;
  readonly purpose: z.output<typeof unknownCreateRequest>['purpose'];
  readonly owner: TeamRole;
  /** Where it stands in the end. */
  readonly status: UnknownStatus;
  readonly revisions: ReadonlyArray<{ readonly comment: string; readonly evidence: EvidenceInput }>;
  /** A run over the newest revision. */
  readonly run: boolean;
  readonly shortlist?: ReadonlyArray<{ readonly smiles: string; readonly verdict: Verdict; readonly note: string }>;
  readonly comments: ReadonlyArray<{ readonly by: TeamRole; readonly text: string }>;
}

const WITHOUT_PROTONS: EvidenceInput = {
  formula: 'C7H12O2',
  carbonSignals: [
    { shift: 176.4, hydrogens: 0 },
    { shift: 132.3, hydrogens: 1 },
    { shift: 117.9, hydrogens: 2 },
    { shift: 64.9, hydrogens: 2 },
    { shift: 34.1, hydrogens: 1 },
    { shift: 18.9, hydrogens: 3 },
  ],
};

export const DEMO_UNKNOWNS: readonly DemoUnknown[] = [
  {
    title: 'Late peak in ester batch 7',
    description: 'Invented sample. Grows when the wash is skipped; 0.3 area percent by GC. Collected by preparative HPLC, 11 mg.',
    purpose: 'regulated',
    owner: 'chemist',
    status: 'settled',
    revisions: [
      {
        comment: 'First look: HRMS, 13C with DEPT, 1H, IR',
        evidence: {
          formula: 'C10H12O2',
          fragments: { required: [{ smiles: '*c1ccc(*)cc1', count: 1, label: '1,4-disubstituted benzene' }] },
          carbonSignals: [
            { shift: 173.1, hydrogens: 0 },
            { shift: 148.5, hydrogens: 0 },
            { shift: 135.3, hydrogens: 0 },
            { shift: 129.9, hydrogens: 1, count: 2 },
            { shift: 121.2, hydrogens: 1, count: 2 },
            { shift: 27.7, hydrogens: 2 },
            { shift: 20.8, hydrogens: 3 },
            { shift: 9.1, hydrogens: 3 },
          ],
          protonSignals: [
            { shift: 7.17, count: 2, multiplicity: 'd', couplings: [8.3] },
            { shift: 6.95, count: 2, multiplicity: 'd', couplings: [8.3] },
            { shift: 2.57, count: 2, multiplicity: 'q', couplings: [7.5] },
            { shift: 2.34, count: 3, multiplicity: 's' },
            { shift: 1.26, count: 3, multiplicity: 't', couplings: [7.5] },
          ],
          infraredBands: [
            { wavenumber: 1760, intensity: 'strong' },
            { wavenumber: 1508, intensity: 'medium' },
            { wavenumber: 1197, intensity: 'strong' },
          ],
          massPeaks: [
            { mz: 164.084, intensity: 18 },
            { mz: 108.058, intensity: 100 },
            { mz: 57.034, intensity: 41 },
          ],
        },
      },
    ],
    run: true,
    shortlist: [
      {
        smiles: 'CCC(=O)Oc1ccc(C)cc1',
        verdict: 'confirmed',
        note: 'Same retention time and 1H as material made from the phenol on the shelf.',
      },
      {
        smiles: 'CCc1ccc(OC(C)=O)cc1',
        verdict: 'refuted',
        note: 'The CH3 of an ethyl group on the ring would be near 15 ppm; 9.1 ppm is that of a propanoate.',
      },
    ],
    comments: [
      { by: 'lead', text: 'The band at 1760 is high for a conjugated ester. Phenyl ester?' },
      { by: 'chemist', text: 'Agreed, and m/z 108 is what a cresol would leave. Made a reference: matches.' },
      { by: 'reader', text: 'Please file the reference spectrum with the batch record.' },
    ],
  },
  {
    title: 'Colourless oil from the furan step',
    description: 'Invented sample. Forms when the alkylation runs too warm. Smells of roast.',
    purpose: 'research',
    owner: 'chemist',
    status: 'inProgress',
    revisions: [
      {
        comment: '400 MHz, CDCl3',
        evidence: {
          formula: 'C8H12O',
          fragments: { required: [{ smiles: '*c1ccco1', count: 1, label: '2-furyl' }] },
          carbonSignals: [
            { shift: 160.8, hydrogens: 0 },
            { shift: 140.6, hydrogens: 1 },
            { shift: 109.8, hydrogens: 1 },
            { shift: 103.6, hydrogens: 1 },
            { shift: 35.0, hydrogens: 1 },
            { shift: 28.5, hydrogens: 2 },
            { shift: 18.6, hydrogens: 3 },
            { shift: 11.7, hydrogens: 3 },
          ],
          protonSignals: [
            { shift: 7.3, count: 1, multiplicity: 'm' },
            { shift: 6.27, count: 1, multiplicity: 'm' },
            { shift: 5.97, count: 1, multiplicity: 'm' },
            { shift: 2.76, count: 1, multiplicity: 'sext', couplings: [6.9] },
            { shift: 1.7, count: 1, multiplicity: 'm' },
            { shift: 1.55, count: 1, multiplicity: 'm' },
            { shift: 1.22, count: 3, multiplicity: 'd', couplings: [6.9] },
            { shift: 0.89, count: 3, multiplicity: 't', couplings: [7.4] },
          ],
        },
      },
    ],
    run: true,
    comments: [{ by: 'chemist', text: 'Four butyl groups are possible; the methyl doublet leaves few of them.' }],
  },
  {
    title: 'Crystals from the amine wash',
    description: 'Invented sample. Crystallised from the aqueous wash overnight, melts near room temperature.',
    purpose: 'research',
    owner: 'lead',
    status: 'shelved',
    revisions: [
      {
        comment: 'From the open-access instrument',
        evidence: {
          formula: 'C6H13NO',
          carbonSignals: [
            { shift: 170.3, hydrogens: 0 },
            { shift: 46.9, hydrogens: 2 },
            { shift: 28.4, hydrogens: 1 },
            { shift: 23.2, hydrogens: 3 },
            { shift: 20.1, hydrogens: 3, count: 2 },
          ],
          protonSignals: [
            { shift: 5.8, count: 1, multiplicity: 'br s', exchangeable: true },
            { shift: 3.07, count: 2, multiplicity: 't', couplings: [6.4] },
            { shift: 1.99, count: 3, multiplicity: 's' },
            { shift: 1.77, count: 1, multiplicity: 'm' },
            { shift: 0.91, count: 6, multiplicity: 'd', couplings: [6.7] },
          ],
          infraredBands: [
            { wavenumber: 3290, intensity: 'medium' },
            { wavenumber: 1650, intensity: 'strong' },
            { wavenumber: 1555, intensity: 'strong' },
          ],
        },
      },
    ],
    run: true,
    comments: [{ by: 'lead', text: 'The stream was closed last week and the sample is used up. Shelved.' }],
  },
  {
    title: 'Chlorinated by-product, fraction 12',
    description: 'Invented sample. Isotope pattern shows one chlorine. The substitution pattern has to be settled.',
    purpose: 'regulated',
    owner: 'chemist',
    status: 'inProgress',
    revisions: [
      {
        comment: 'HRMS and NMR',
        evidence: {
          formula: 'C8H9ClO',
          fragments: {
            required: [
              { smiles: '*c1ccc(*)c(*)c1', count: 1, label: '1,2,4-trisubstituted benzene' },
              { smiles: '*OC', count: 1, label: 'methoxy' },
            ],
          },
          carbonSignals: [
            { shift: 158.3, hydrogens: 0 },
            { shift: 134.8, hydrogens: 0 },
            { shift: 131.2, hydrogens: 1 },
            { shift: 127.8, hydrogens: 0 },
            { shift: 114.6, hydrogens: 1 },
            { shift: 112.7, hydrogens: 1 },
            { shift: 55.5, hydrogens: 3 },
            { shift: 19.1, hydrogens: 3 },
          ],
          protonSignals: [
            { shift: 7.11, count: 1, multiplicity: 'd', couplings: [8.4] },
            { shift: 6.9, count: 1, multiplicity: 'd', couplings: [2.6] },
            { shift: 6.71, count: 1, multiplicity: 'dd', couplings: [8.4, 2.6] },
            { shift: 3.77, count: 3, multiplicity: 's' },
            { shift: 2.29, count: 3, multiplicity: 's' },
          ],
          massPeaks: [
            { mz: 156.034, intensity: 100 },
            { mz: 158.031, intensity: 33 },
            { mz: 121.065, intensity: 74 },
          ],
        },
      },
    ],
    run: true,
    comments: [{ by: 'lead', text: 'The first two are isomers by position only. What would a NOESY from the methoxy show?' }],
  },
  {
    title: 'Fruity forerun of still 2',
    description: 'Invented sample. First fraction of the redistillation.',
    purpose: 'research',
    owner: 'lead',
    status: 'inProgress',
    revisions: [
      { comment: '13C and DEPT only', evidence: WITHOUT_PROTONS },
      {
        comment: '1H added',
        evidence: {
          ...WITHOUT_PROTONS,
          protonSignals: [
            { shift: 5.92, count: 1, multiplicity: 'm' },
            { shift: 5.31, count: 1, multiplicity: 'm' },
            { shift: 5.22, count: 1, multiplicity: 'm' },
            { shift: 4.57, count: 2, multiplicity: 'd', couplings: [5.6] },
            { shift: 2.58, count: 1, multiplicity: 'sept', couplings: [7.0] },
            { shift: 1.18, count: 6, multiplicity: 'd', couplings: [7.0] },
          ],
          infraredBands: [
            { wavenumber: 1737, intensity: 'strong' },
            { wavenumber: 1649, intensity: 'weak' },
          ],
        },
      },
    ],
    run: true,
    comments: [{ by: 'chemist', text: 'The terminal =CH2 is certain from the HSQC.' }],
  },
  {
    title: 'Camphor-like liquid, retained sample',
    description: 'Invented sample. Label lost; found in the solvent cabinet.',
    purpose: 'research',
    owner: 'chemist',
    status: 'inProgress',
    revisions: [
      {
        comment: 'Six-ring assumed from the envelope',
        evidence: {
          formula: 'C9H16O',
          fragments: { required: [{ smiles: '*C1CCCCC1', count: 1, label: 'cyclohexyl' }] },
          carbonSignals: [
            { shift: 214.5, hydrogens: 0 },
            { shift: 50.7, hydrogens: 1 },
            { shift: 33.7, hydrogens: 2 },
            { shift: 28.6, hydrogens: 2, count: 2 },
            { shift: 25.9, hydrogens: 2 },
            { shift: 25.7, hydrogens: 2, count: 2 },
            { shift: 7.8, hydrogens: 3 },
          ],
          protonSignals: [
            { shift: 2.45, count: 2, multiplicity: 'q', couplings: [7.3] },
            { shift: 2.34, count: 1, multiplicity: 'm' },
            { shift: 1.75, count: 5, multiplicity: 'm' },
            { shift: 1.27, count: 5, multiplicity: 'm' },
            { shift: 1.03, count: 3, multiplicity: 't', couplings: [7.3] },
          ],
          infraredBands: [{ wavenumber: 1711, intensity: 'strong' }],
        },
      },
    ],
    run: true,
    comments: [],
  },
  {
    title: 'Solvent trap, week 14',
    description: 'Invented sample. Evidence is entered; nobody has started a run yet.',
    purpose: 'research',
    owner: 'chemist',
    status: 'new',
    revisions: [
      {
        comment: '13C only so far',
        evidence: {
          formula: 'C7H14O',
          carbonSignals: [{ shift: 214.8 }, { shift: 42.3 }, { shift: 40.8 }, { shift: 18.3 }, { shift: 17.2 }, { shift: 13.8 }],
        },
      },
    ],
    run: false,
    comments: [],
  },
];
