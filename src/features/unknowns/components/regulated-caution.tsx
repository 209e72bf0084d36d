import { Notice } from '../../../components/status-word';

/** SCIENCE.md 10: shown wherever the purpose of an unknown is a regulated one. */
export function RegulatedCaution() {
  return (
    <Notice tone="weld" title="Regulated purpose" className="text-table">
      A ranking is not an identification. Regulated identification belongs to an accredited laboratory and the guidance in force there (for
      drug impurities ICH Q3A, Q3B and M7; for residues EU 2021/808). Confirm against an authentic standard.
    </Notice>
  );
}
