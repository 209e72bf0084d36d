import type { CandidateRemark, PredictedSpectra, SignalMatch } from '../../shared/jobs/contract.js';
import type { EvidenceDocument } from '../../shared/schemas/evidence.js';
import type { StructureAnalysis } from '../graph/analysis.js';
import type { Equivalence } from '../graph/equivalence.js';
import { nameCarbon, nameProton } from './group-names.js';
import { anyCarbonCost } from './none-of-these.js';
import { UNKNOWN_HYDROGENS } from './observations.js';
import type { ActiveRule } from './plausibility/active-rules.js';
import { solventOfCarbonSignal, solventOfProtonSignal } from './solvent-peaks.js';

/** Fits named beside a candidate: the most telling ones for and against it. */
const MOST_FITS = 3;
/** Deviation in standard deviations from which a signal counts as a misfit, and below which as a good fit. */
const MISFIT = 2.5;
const GOOD_FIT = 1;
/** Weight of a signal that nothing gives: named before all misfits. */
const UNEXPLAINED = 100;
/** Gain over "a carbon of any compound" (ln) from which a fit says something. */
const TELLING_GAIN = 1.5;

/** Number and place of stereocentres and of double bonds with two arrangements. */
export function stereoRemarks({ stereocentres, stereoDoubleBonds }: Equivalence): CandidateRemark[] {
  const remarks: CandidateRemark[] = [];
  if (stereocentres.length > 0) {
    const text =
      stereocentres.length === 1
        ? 'One stereocentre: its configuration is left open.'
        : `${stereocentres.length} stereocentres: their configurations are left open.`;
    remarks.push({ kind: 'stereo', tone: 'notes', text, atoms: [...stereocentres] });
  }
  if (stereoDoubleBonds.length > 0) {
    const text =
      stereoDoubleBonds.length === 1 ? 'One double bond can be E or Z.' : `${stereoDoubleBonds.length} double bonds can be E or Z.`;
    remarks.push({ kind: 'stereo', tone: 'notes', text, atoms: [...new Set(stereoDoubleBonds.flat())] });
  }
  return remarks;
}

/** Soft plausibility rules that fired, with their atoms. */
export function plausibilityRemarks(s: StructureAnalysis, soft: readonly ActiveRule[]): CandidateRemark[] {
  return soft.flatMap(({ rule, test }) => {
    const atoms = new Set<number>();
    const count = test(s, (found) => found.forEach((atom) => atoms.add(atom)));
    if (count === 0) return [];
    return [{ kind: 'plausibility' as const, tone: 'doubts' as const, text: rule.sentence, atoms: [...atoms].sort((a, b) => a - b) }];
  });
}

const ppm = (value: number, digits: number): string => value.toFixed(digits).replace('-', '−');

/** The signals that speak most for the structure, and those that fit worst or not at all. */
export function fitRemarks(
  s: StructureAnalysis,
  evidence: EvidenceDocument,
  spectra: PredictedSpectra,
  matches: readonly SignalMatch[],
): CandidateRemark[] {
  const supports: { weight: number; remark: CandidateRemark }[] = [];
  const doubts: { weight: number; remark: CandidateRemark }[] = [];
  for (const match of matches) {
    const { nucleus, observedIndex, predictedIndexes, deviation } = match;
    if (observedIndex === null) continue;
    const isCarbon = nucleus === '13C';
    const observed = isCarbon ? evidence.carbonSignals[observedIndex] : evidence.protonSignals[observedIndex];
    const label = `δ ${ppm(observed.shift, isCarbon ? 1 : 2)}`;
    const predicted = isCarbon ? spectra.carbons : spectra.protons;
    const atoms = [...new Set(predictedIndexes.flatMap((index) => predicted[index].atoms))];
    if (predictedIndexes.length === 0 || deviation === null) {
      const solvent = isCarbon
        ? solventOfCarbonSignal(evidence.carbonSignals[observedIndex], evidence.options.solvent)
        : solventOfProtonSignal(evidence.protonSignals[observedIndex], evidence.options.solvent);
      const text = `${label} (${isCarbon ? '¹³C' : '¹H'}) is given by nothing in this structure${solvent === null ? '' : `; ${solvent} has a line there`}.`;
      doubts.push({ weight: UNEXPLAINED, remark: { kind: 'signal', tone: solvent === null ? 'doubts' : 'notes', text, atoms } });
      continue;
    }
    const { sd } = predicted[predictedIndexes[0]];
    const name = isCarbon ? nameCarbon(s, atoms[0]) : nameProton(s, atoms[0]);
    if (Math.abs(deviation) > MISFIT * sd) {
      const text = `${label}: ${ppm(Math.abs(deviation), isCarbon ? 1 : 2)} ppm ${deviation > 0 ? 'above' : 'below'} what is expected for ${name}.`;
      doubts.push({ weight: Math.abs(deviation) / sd, remark: { kind: 'fit', tone: 'doubts', text, atoms } });
    } else if (!isCarbon && match.remark !== null) {
      const shape = evidence.protonSignals[observedIndex].multiplicity ?? '';
      doubts.push({
        weight: MISFIT,
        remark: {
          kind: 'fit',
          tone: 'doubts',
          text: `${label} (${shape}): the splitting does not fit the neighbours of this ${name}.`,
          atoms,
        },
      });
    } else if (isCarbon && Math.abs(deviation) <= GOOD_FIT * sd) {
      const gain = anyCarbonCost(observed.shift, evidence.carbonSignals[observedIndex].hydrogens ?? UNKNOWN_HYDROGENS) - Math.log(sd * 2.5);
      if (gain > TELLING_GAIN)
        supports.push({ weight: gain, remark: { kind: 'fit', tone: 'supports', text: `${label} fits ${name}.`, atoms } });
    }
  }
  const strongest = (list: typeof supports): CandidateRemark[] =>
    list
      .sort((a, b) => b.weight - a.weight || (a.remark.text < b.remark.text ? -1 : 1))
      .slice(0, MOST_FITS)
      .map(({ remark }) => remark);
  return [...strongest(doubts), ...strongest(supports)];
}
