import { Notice } from '../status-word';

/** Shown with every ranking of an unknown whose people stated a regulated purpose. */
export function RegulatedNotice({ className }: { className?: string }) {
  return (
    <Notice tone="weld" title="Regulated purpose" {...(className === undefined ? {} : { className })}>
      <p>
        A ranking is no regulated identification. Drug impurities (ICH Q3A, Q3B, M7), residues (EU 2021/808), forensic, clinical and
        anti-doping work belong to an accredited laboratory (ISO/IEC 17025, ISO 15189) and the guidance in force.
      </p>
    </Notice>
  );
}
