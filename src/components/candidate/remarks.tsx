import { CircleCheck, Info, TriangleAlert, type LucideIcon } from 'lucide-react';
import type { z } from 'zod';
import type { remarkSchema } from '../../../shared/schemas/runs';
import { classNames } from '../../lib/class-names';

export type Remark = z.infer<typeof remarkSchema>;

const LOOKS: Readonly<Record<Remark['tone'], { icon: LucideIcon; colour: string; word: string }>> = {
  supports: { icon: CircleCheck, colour: 'text-verdigris', word: 'Supports' },
  doubts: { icon: TriangleAlert, colour: 'text-weld', word: 'Doubts' },
  notes: { icon: Info, colour: 'text-faded', word: 'Note' },
};

/** One remark: icon for its tone, then the sentence. */
export function RemarkLine({ remark, isClipped = false }: { remark: Remark; isClipped?: boolean }) {
  const { icon: Icon, colour, word } = LOOKS[remark.tone];
  return (
    <span className="flex min-w-0 items-start gap-1.5" title={isClipped ? remark.text : undefined}>
      <Icon aria-hidden="true" className={classNames('mt-[3px] size-3.5 shrink-0', colour)} />
      <span className="sr-only">{word}: </span>
      <span className={classNames('min-w-0', isClipped && 'truncate')}>{remark.text}</span>
    </span>
  );
}
