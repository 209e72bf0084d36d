import type { CandidateOrder, CandidateRow } from '../../../lib/queries/candidate-queries';
import type { CandidateRows } from '../api/use-candidate-rows';

/** What both views of the candidates share: one list, one selection, the same actions. */
export interface CandidateListProps {
  readonly rows: CandidateRows;
  readonly total: number;
  readonly order: CandidateOrder;
  readonly selectedIndex: number | null;
  /** Positions on screen, half-open, so that their pages get loaded. */
  readonly onShown: (start: number, end: number) => void;
  readonly onSelect: (index: number) => void;
  readonly onOpen: (candidate: CandidateRow) => void;
  /** A link to the candidate is followed. */
  readonly onLeave: (candidate: CandidateRow) => void;
  readonly onKeep: (candidate: CandidateRow) => void;
  readonly onOrder: (order: CandidateOrder) => void;
  readonly isKept: (candidate: CandidateRow) => boolean;
  /** Candidate that is just being kept. */
  readonly keepingId: string | null;
  readonly canKeep: boolean;
}
