import {
  Archive,
  Ban,
  Check,
  CircleAlert,
  CircleDashed,
  CircleDot,
  Clock,
  Hourglass,
  Info,
  Pause,
  ThumbsDown,
  ThumbsUp,
  TriangleAlert,
  type LucideIcon,
} from 'lucide-react';
import type { ReactNode } from 'react';
import type { RunStatus, UnknownStatus, Verdict } from '../../shared/types/states';
import { classNames } from '../lib/class-names';

export type Tone = 'neutral' | 'indigo' | 'verdigris' | 'weld' | 'madder';

const TEXT: Record<Tone, string> = {
  neutral: 'text-faded',
  indigo: 'text-indigo',
  verdigris: 'text-verdigris',
  weld: 'text-weld',
  madder: 'text-madder',
};
const WASH: Record<Tone, string> = {
  neutral: 'bg-fold text-faded',
  indigo: 'bg-indigo-wash text-indigo',
  verdigris: 'bg-verdigris-wash text-verdigris',
  weld: 'bg-weld-wash text-weld',
  madder: 'bg-madder-wash text-madder',
};

/** A short mark on a wash of its dye. */
export function Badge({ tone = 'neutral', children, className }: { tone?: Tone; children: ReactNode; className?: string }) {
  return (
    <span
      className={classNames(
        'inline-flex items-center gap-1 rounded-small px-1.5 text-small font-semibold whitespace-nowrap',
        WASH[tone],
        className,
      )}
    >
      {children}
    </span>
  );
}

/** A state: an icon and a word, coloured the same. */
export function StatusWord({ tone, icon: Icon, children }: { tone: Tone; icon: LucideIcon; children: ReactNode }) {
  return (
    <span className={classNames('inline-flex items-center gap-1.5 align-bottom whitespace-nowrap', TEXT[tone])}>
      <Icon aria-hidden="true" className="size-4 shrink-0" />
      {children}
    </span>
  );
}

interface StatusLook {
  tone: Tone;
  icon: LucideIcon;
  word: string;
}

export const UNKNOWN_STATUS_LOOKS: Record<UnknownStatus, StatusLook> = {
  new: { tone: 'indigo', icon: CircleDashed, word: 'New' },
  inProgress: { tone: 'weld', icon: CircleDot, word: 'In progress' },
  settled: { tone: 'verdigris', icon: Check, word: 'Settled' },
  shelved: { tone: 'neutral', icon: Archive, word: 'Shelved' },
};
export const RUN_STATUS_LOOKS: Record<RunStatus, StatusLook> = {
  queued: { tone: 'neutral', icon: Clock, word: 'Queued' },
  running: { tone: 'indigo', icon: Hourglass, word: 'Running' },
  finished: { tone: 'verdigris', icon: Check, word: 'Finished' },
  stopped: { tone: 'weld', icon: TriangleAlert, word: 'Stopped by a limit' },
  cancelled: { tone: 'neutral', icon: Ban, word: 'Cancelled' },
  failed: { tone: 'madder', icon: CircleAlert, word: 'Failed' },
  interrupted: { tone: 'weld', icon: Pause, word: 'Interrupted' },
};
export const VERDICT_LOOKS: Record<Verdict, StatusLook> = {
  open: { tone: 'neutral', icon: CircleDashed, word: 'Open' },
  supported: { tone: 'verdigris', icon: ThumbsUp, word: 'Supported' },
  refuted: { tone: 'madder', icon: ThumbsDown, word: 'Refuted' },
  confirmed: { tone: 'verdigris', icon: Check, word: 'Confirmed' },
};

function LookWord({ look }: { look: StatusLook }) {
  return (
    <StatusWord tone={look.tone} icon={look.icon}>
      {look.word}
    </StatusWord>
  );
}
export const UnknownStatusWord = ({ status }: { status: UnknownStatus }) => <LookWord look={UNKNOWN_STATUS_LOOKS[status]} />;
export const RunStatusWord = ({ status }: { status: RunStatus }) => <LookWord look={RUN_STATUS_LOOKS[status]} />;
export const VerdictWord = ({ verdict }: { verdict: Verdict }) => <LookWord look={VERDICT_LOOKS[verdict]} />;

/** A remark in the flow of a page: icon, wash, sentence. */
export function Notice({
  tone = 'neutral',
  title,
  children,
  className,
}: {
  tone?: Tone;
  title?: ReactNode;
  children?: ReactNode;
  className?: string;
}) {
  const Icon = tone === 'madder' ? CircleAlert : tone === 'weld' ? TriangleAlert : tone === 'verdigris' ? Check : Info;
  return (
    <div className={classNames('flex items-start gap-2.5 rounded-panel px-3 py-2', WASH[tone], className)}>
      <Icon aria-hidden="true" className="mt-[3px] size-4 shrink-0" />
      <div className="min-w-0 text-ink">
        {title === undefined ? null : <p className="font-semibold">{title}</p>}
        {children}
      </div>
    </div>
  );
}
