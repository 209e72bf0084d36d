import { formatCount } from '../../lib/numbers';
import { layOutBand, type BandFrame } from './band-geometry';
import { BandSvg } from './band-svg';
import { bandFromFunnel, bandFromProgress, describeBand, type Funnel } from './funnel-stages';

const FRAME: BandFrame = { width: 132, height: 36, left: 2, top: 5, pitch: 1.5, threadsPerDecade: 2 };

interface FunnelMiniProps {
  funnel: Funnel | null;
  /** Live figures of a run without a funnel yet. */
  progress?: { readonly constitutionsSeen: number; readonly survivors: number } | null;
  isIncomplete?: boolean;
  keptCount?: number;
}

/** The band of a run, small enough for a list. */
export function FunnelMini({ funnel, progress = null, isIncomplete = false, keptCount }: FunnelMiniProps) {
  if (funnel === null && progress === null) return null;
  const band = funnel === null ? bandFromProgress(progress) : bandFromFunnel(funnel, keptCount);
  return (
    <span role="img" aria-label={describeBand(band, formatCount)} className="inline-block align-middle">
      <BandSvg band={band} geometry={layOutBand(band, FRAME)} frame={FRAME} isIncomplete={isIncomplete} isSmall />
    </span>
  );
}
