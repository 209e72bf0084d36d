import { describe, expect, it } from 'vitest';
import { checkEvidence } from '../../../shared/chemistry/check-evidence.js';
import { attachedHydrogensFrom2D, readCorrelations, signalsNear } from '../../../shared/chemistry/correlations.js';
import { resolveOptions } from '../../../shared/chemistry/resolve-options.js';
import { evidenceDocument, type EvidenceDocument, type EvidenceInput } from '../../../shared/schemas/evidence.js';

/** An invented ester C6H10O3 with an OH; no compound of a collection. */
const base: EvidenceInput = {
  formula: 'C6H10O3',
  carbonSignals: [{ shift: 172.4 }, { shift: 66.1 }, { shift: 60.8 }, { shift: 44.0 }, { shift: 43.6 }, { shift: 14.1 }],
  protonSignals: [
    { shift: 4.35, count: 1 },
    { shift: 4.1, count: 2 },
    { shift: 2.6, count: 1 },
    { shift: 2.4, count: 1 },
    { shift: 1.2, count: 3 },
    { shift: 3.1, count: 1 },
  ],
};
const documentOf = (correlations: EvidenceInput['correlations'], change: Partial<EvidenceInput> = {}): EvidenceDocument =>
  evidenceDocument.parse({ ...base, ...change, correlations });
const paths = (document: EvidenceDocument): string[] => checkEvidence(document).issues.map(({ path }) => path);

describe('shifts of 2D pairs', () => {
  it('mean every signal within the tolerance, the nearest first', () => {
    const { carbonSignals } = documentOf({});
    expect(signalsNear(carbonSignals, 43.7, 0.6)).toEqual([4, 3]);
    expect(signalsNear(carbonSignals, 61.4, 0.6)).toEqual([2]);
    expect(signalsNear(carbonSignals, 61.5, 0.6)).toEqual([]);
  });

  it('that lie on no signal are noted with the place of the pair, and do no harm', () => {
    const check = checkEvidence(
      documentOf({
        hmbc: [
          [4.1, 172.4],
          [4.1, 120.3],
        ],
        cosy: [
          [9.9, 1.2],
          [1.2, 1.22],
        ],
      }),
    );
    expect(check.issues).toEqual([]);
    expect(check.notes.filter((note) => note.startsWith('correlations.'))).toEqual([
      'correlations.cosy[0] is not used: no 1H signal is listed within 0.06 ppm of 9.9',
      'correlations.cosy[1] is not used: both shifts mean the same signal',
      'correlations.hmbc[1] is not used: no 13C signal is listed within 0.6 ppm of 120.3',
    ]);
  });

  it('speak of carbons where HSQC ties the proton to one, and of any place otherwise', () => {
    const { sites, constraints } = readCorrelations(
      documentOf({
        hsqc: [[60.8, 4.1]],
        hmbc: [
          [4.1, 172.4],
          [3.1, 66.1],
        ],
      }),
    );
    const ends = constraints.map(({ alternatives }) => alternatives.map((pair) => pair.map((site) => sites[site])));
    expect(ends).toEqual([
      [
        [
          { kind: 'carbon', signal: 2 },
          { kind: 'carbon', signal: 0 },
        ],
      ],
      [
        [
          { kind: 'proton', signal: 5 },
          { kind: 'carbon', signal: 1 },
        ],
      ],
    ]);
  });

  it('between overlapping signals are met by either of them', () => {
    const { sites, constraints } = readCorrelations(documentOf({ hmbc: [[1.2, 43.9]] }));
    expect(constraints[0]!.alternatives.map(([, carbon]) => sites[carbon])).toEqual([
      { kind: 'carbon', signal: 3 },
      { kind: 'carbon', signal: 4 },
    ]);
  });

  it('leave an unpaired proton beside a paired one free', () => {
    const protonSignals = [{ shift: 3.5 }, { shift: 3.53 }];
    const { sites, constraints } = readCorrelations(documentOf({ hsqc: [[66.1, 3.5]], hmbc: [[3.58, 172.4]] }, { protonSignals }));
    expect(constraints[0]!.alternatives.map(([proton]) => sites[proton])).toContainEqual({ kind: 'proton', signal: 1 });
  });

  it('count once when they are listed twice or mirrored', () => {
    const document = documentOf({
      cosy: [
        [1.2, 4.1],
        [4.1, 1.2],
        [4.11, 1.19],
      ],
      hmbc: [
        [4.1, 172.4],
        [4.1, 172.4],
      ],
    });
    expect(readCorrelations(document).constraints.map(({ kind, index }) => `${kind}[${index}]`)).toEqual(['hmbc[0]', 'cosy[0]']);
  });
});

describe('contradictions of HSQC pairs', () => {
  it('are issues with the place of the pair', () => {
    const quaternary = documentOf(
      {
        hsqc: [
          [60.8, 4.1],
          [172.4, 4.35],
        ],
      },
      { carbonSignals: [{ shift: 172.4, hydrogens: 0 }, { shift: 60.8 }] },
    );
    expect(paths(quaternary)).toEqual(['correlations.hsqc[1]']);
    const exchanging = documentOf({ hsqc: [[66.1, 3.1]] }, { protonSignals: [{ shift: 3.1, exchangeable: true }] });
    expect(paths(exchanging)).toEqual(['correlations.hsqc[0]']);
    expect(
      paths(
        documentOf({
          hsqc: [
            [66.1, 4.35],
            [60.8, 4.35],
          ],
        }),
      ),
    ).toEqual(['correlations.hsqc[1]']);
    const crowded = documentOf(
      {
        hsqc: [
          [60.8, 4.35],
          [60.8, 4.1],
          [60.8, 2.6],
        ],
      },
      { carbonSignals: [{ shift: 60.8, count: 1 }] },
    );
    expect(paths(crowded)).toEqual(['correlations.hsqc[2]']);
  });

  it('are none where a signal has hydrogens enough for several carbons, or a CH2 shows twice', () => {
    expect(
      paths(
        documentOf({
          hsqc: [
            [66.1, 4.1],
            [60.8, 4.1],
          ],
        }),
      ),
    ).toEqual([]);
    expect(
      paths(
        documentOf({
          hsqc: [
            [44.2, 2.6],
            [44.2, 2.4],
          ],
        }),
      ),
    ).toEqual([]);
  });
});

describe('attached hydrogens from 2D pairs', () => {
  const whole: EvidenceInput['correlations'] = {
    hsqc: [
      [66.1, 4.35],
      [60.8, 4.1],
      [44.2, 2.6],
      [44.2, 2.4],
      [14.1, 1.2],
      [30.0, 1.2],
    ],
  };
  const hydrogensOf = (document: EvidenceDocument): (number | undefined)[] =>
    attachedHydrogensFrom2D(document).map(({ hydrogens }) => hydrogens);

  it('are none where a whole HSQC list shows nothing, and two where two protons sit on one carbon', () => {
    const carbonSignals = base.carbonSignals!.map((signal, k) => ({ ...signal, shift: k === 4 ? 30.2 : signal.shift, count: 1 }));
    expect(hydrogensOf(documentOf(whole, { carbonSignals }))).toEqual([0, undefined, undefined, 2, undefined, undefined]);
    expect(readCorrelations(documentOf(whole, { carbonSignals })).attached[1]).toEqual({ least: 1, most: 3 });
  });

  it('say nothing where either list may lack signals', () => {
    expect(hydrogensOf(documentOf({ hsqc: [[66.1, 4.35]] }))).toEqual(new Array(6).fill(undefined));
    // The three hydrogens of a methyl group are more than the single oxygen carries.
    const unpaired = (count: number): EvidenceDocument =>
      evidenceDocument.parse({
        formula: 'C4H10O',
        carbonSignals: [{ shift: 60 }, { shift: 30 }],
        protonSignals: [{ shift: 3.5 }, { shift: 1.2, count }],
        correlations: { hsqc: [[60, 3.5]] },
      });
    expect(hydrogensOf(unpaired(1))).toEqual([undefined, 0]);
    expect(hydrogensOf(unpaired(3))).toEqual([undefined, undefined]);
    expect(hydrogensOf(documentOf(whole, { options: { carbonList: 'partial' } }))[0]).toBeUndefined();
    expect(hydrogensOf(documentOf({}))[0]).toBeUndefined();
  });

  it('never overrule what is given, and reach the search and the ranking', () => {
    const carbonSignals = [{ shift: 172.4, hydrogens: 1 as const }, ...base.carbonSignals!.slice(1)];
    expect(hydrogensOf(documentOf(whole, { carbonSignals }))[0]).toBe(1);
    expect(resolveOptions(documentOf(whole), 'rank').carbonSignals[0]!.hydrogens).toBe(0);
    expect(checkEvidence(documentOf(whole)).notes).toContain('13C signal without an HSQC pair read as quaternary: 172.4');
  });
});
