import { describe, expect, it } from 'vitest';
import { resolveOptions } from '../../../shared/chemistry/resolve-options.js';
import { createCounters } from '../../../shared/jobs/counters.js';
import type { JobContract, RunSettings } from '../../../shared/jobs/contract.js';
import { evidenceDocument, type EvidenceInput } from '../../../shared/schemas/evidence.js';
import { createSearch, planShards } from '../../../workers/enumeration/search.js';
import { constitutionKey } from '../../../workers/graph/constitution-key.js';
import { runShard } from '../../../workers/jobs/shard.js';
import { finishRanking } from '../../../workers/ranking/finish.js';
import { graphOf } from '../../support/graph-of.js';
import { REFERENCE_COMPOUNDS, type ReferenceCompound } from './reference-compounds.js';

type Finished = JobContract['finish']['output'];

function run(input: EvidenceInput, settings: Partial<RunSettings> = {}): Finished {
  const evidence = evidenceDocument.parse(input);
  const all: RunSettings = { keep: 200, maxSeconds: null, mode: 'rank', ...settings };
  const [shard] = planShards(createSearch(resolveOptions(evidence, all.mode)), 1);
  if (shard === undefined) return finishRanking({ evidence, settings: all, kept: [], logSumExp: null, funnel: [] });
  const result = runShard({ evidence, settings: all, shard, counters: createCounters(), deadlineEpochMs: null });
  return finishRanking({ evidence, settings: all, kept: result.kept, logSumExp: result.logSumExp, funnel: result.funnel });
}

const named = (name: string): ReferenceCompound => REFERENCE_COMPOUNDS.find((compound) => compound.name === name)!;
const rankOf = (finished: Finished, { smiles }: ReferenceCompound): number => {
  const key = constitutionKey(graphOf(smiles), true);
  return finished.candidates.find((candidate) => candidate.key === key)?.rank ?? 0;
};

describe('finishRanking', () => {
  const acetate = named('butyl acetate');
  // Without windows of shifts, so that many survive.
  const evidence: EvidenceInput = { ...acetate.evidence, options: { ...acetate.evidence.options, shiftWindows: false } };
  const finished = run(evidence, { keep: 1000 });

  it('orders by score and gives probabilities that add up to one with "none of these"', () => {
    const { candidates, noneOfTheseProbability } = finished;
    expect(candidates.length).toBeGreaterThan(10);
    candidates.forEach((candidate, index) => {
      expect(candidate.rank).toBe(index + 1);
      if (index > 0) expect(candidate.score).toBeLessThanOrEqual(candidates[index - 1].score);
    });
    expect(candidates.reduce((sum, { probability }) => sum + probability, noneOfTheseProbability)).toBeCloseTo(1, 6);
    expect(rankOf(finished, acetate)).toBe(1);
    expect(candidates[0].probability).toBeGreaterThan(0.9);
  });

  it('takes all survivors into account, kept or not', () => {
    const few = run(evidence, { keep: 2 });
    expect(few.candidates).toHaveLength(2);
    few.candidates.forEach((candidate, index) => expect(candidate.probability).toBeCloseTo(finished.candidates[index].probability, 9));
  });

  it('lays every observed signal on predicted ones of its kind, with atoms of the SMILES', () => {
    const { carbonSignals = [], protonSignals = [] } = acetate.evidence;
    for (const { smiles, spectra, matches, remarks } of finished.candidates) {
      const graph = graphOf(smiles);
      for (const { atoms, hydrogens } of spectra.carbons)
        for (const atom of atoms) expect([graph.atomicNumbers[atom], graph.hydrogens[atom]]).toEqual([6, hydrogens]);
      for (const { atoms } of spectra.protons) for (const atom of atoms) expect(graph.hydrogens[atom]).toBeGreaterThan(0);
      const observed = (nucleus: string): (number | null)[] =>
        matches.flatMap((match) => (match.nucleus === nucleus && match.observedIndex !== null ? [match.observedIndex] : []));
      expect(observed('13C')).toEqual(carbonSignals.map((_, index) => index));
      expect(observed('1H')).toEqual(protonSignals.map((_, index) => index));
      for (const { nucleus, observedIndex, predictedIndexes, deviation } of matches) {
        if (nucleus === '13C' && observedIndex !== null) {
          for (const index of predictedIndexes) expect(spectra.carbons[index].hydrogens).toBe(carbonSignals[observedIndex].hydrogens);
          if (deviation !== null) expect(Math.abs(deviation)).toBeLessThan(250);
        }
        if (observedIndex === null) expect(deviation).toBeNull();
      }
      for (const { atoms, text } of remarks) {
        for (const atom of atoms) expect(atom).toBeLessThan(graph.atomCount);
        expect(text).toMatch(/\.$/);
      }
    }
  });

  it('says which signals speak for the best candidate and which against others', () => {
    const [best] = finished.candidates;
    expect(best.remarks).toContainEqual({
      kind: 'fit',
      tone: 'supports',
      text: 'δ 171.2 fits ester C=O.',
      atoms: [best.smiles.startsWith('CCCCOC(C)=O') ? 5 : expect.any(Number)],
    });
    expect(best.carbonDeviation).toBeLessThan(3);
    expect(best.protonDeviation).toBeLessThan(0.3);
    const doubts = finished.candidates
      .slice(1)
      .flatMap(({ remarks }) => remarks.filter(({ tone, kind }) => tone === 'doubts' && kind !== 'plausibility'));
    expect(doubts.length).toBeGreaterThan(0);
    expect(doubts.some(({ text }) => /the splitting does not fit/.test(text))).toBe(true);
  });

  it('shows every soft rule that fired, and what stereochemistry leaves open', () => {
    const all = run({
      formula: 'C4H8O2',
      carbonSignals: [
        { shift: 60, hydrogens: 2 },
        { shift: 20, hydrogens: 3 },
        { shift: 100, hydrogens: 1 },
      ],
    });
    const texts = new Set(all.candidates.flatMap(({ remarks }) => remarks.map(({ text }) => text)));
    expect([...texts].some((text) => /three-membered ring/.test(text))).toBe(true);
    expect([...texts].some((text) => /stereocentre/.test(text))).toBe(true);
    for (const { terms, remarks } of all.candidates) {
      expect(remarks.some(({ kind }) => kind === 'plausibility')).toBe((terms.plausibility ?? 0) < 0);
    }
  });

  it('lists without ranking when asked to', () => {
    const listed = run(acetate.evidence, { mode: 'list', keep: 5 });
    expect(listed.candidates).toHaveLength(5);
    expect(listed.noneOfTheseProbability).toBe(0);
    for (const { probability, matches, score } of listed.candidates) expect([probability, matches, score]).toEqual([0, [], 0]);
  });

  it('gives an empty list and certainty of "none of these" when nothing survives', () => {
    const empty = run({ formula: 'C2H6O', carbonSignals: [{ shift: 58, hydrogens: 1 }] });
    expect(empty).toEqual({ candidates: [], noneOfTheseProbability: 1 });
  });

  it('raises "none of these" when the formula is wrong (SCIENCE.md 11 e)', () => {
    // Spectra of butyl acetate under a formula with sulfur in the place of both oxygens: only the hydrogens fit.
    const { carbonSignals, protonSignals } = acetate.evidence;
    const wrong = run({ formula: 'C6H12S', carbonSignals, protonSignals });
    expect(wrong.noneOfTheseProbability).toBeGreaterThan(0.5);
    expect(finished.noneOfTheseProbability).toBeLessThan(0.01);
  });

  it('keeps the order when all shifts move by 0.01 ppm (SCIENCE.md 11 b)', () => {
    const { carbonSignals = [], protonSignals = [] } = acetate.evidence;
    const moved = run({
      ...evidence,
      carbonSignals: carbonSignals.map((signal) => ({ ...signal, shift: signal.shift + 0.01 })),
      protonSignals: protonSignals.map((signal) => ({ ...signal, shift: signal.shift + 0.001 })),
    });
    expect(moved.candidates.slice(0, 5).map(({ key }) => key)).toEqual(finished.candidates.slice(0, 5).map(({ key }) => key));
  });

  it('keeps the true structure in the top five without one carbon or with a solvent peak, and says so (SCIENCE.md 11 d)', () => {
    for (const name of ['ethyl acetate', 'butyl acetate', '4-methyl-2-pentanone', '2-butanone']) {
      const compound = named(name);
      const { carbonSignals = [] } = compound.evidence;
      const quaternary = carbonSignals.findIndex(({ hydrogens }) => hydrogens === 0);
      const dropped = run({ ...compound.evidence, carbonSignals: carbonSignals.filter((_, index) => index !== quaternary) });
      const rank = rankOf(dropped, compound);
      expect(rank, `${name} without C=O`).toBeGreaterThan(0);
      expect(rank, `${name} without C=O`).toBeLessThanOrEqual(5);
      const missing = dropped.candidates[rank - 1].matches.filter(
        ({ nucleus, observedIndex }) => nucleus === '13C' && observedIndex === null,
      );
      expect(missing.map(({ remark }) => remark)).toEqual(['No signal found; quaternary carbons are weak and can be missing.']);
    }
    // As many signals as carbons at most: 4-methyl-2-pentanone shows five of six.
    const compound = named('4-methyl-2-pentanone');
    const withSolvent = run({ ...compound.evidence, carbonSignals: [...(compound.evidence.carbonSignals ?? []), { shift: 77.16 }] });
    const rank = rankOf(withSolvent, compound);
    expect(rank).toBeGreaterThan(0);
    expect(rank).toBeLessThanOrEqual(5);
    expect(withSolvent.candidates[rank - 1].remarks.map(({ text }) => text)).toContain(
      'δ 77.2 (¹³C) is given by nothing in this structure; CDCl₃ has a line there.',
    );
  });
});
