import type { CliContext } from './cli-context.js';
import type { LocalProgress } from './local-run.js';
import { formatSeconds, groupDigits } from './text-output.js';

const CLEAR_LINE = '\r\u001b[K';

/** One line on a terminal that is rewritten while a run is under way; nothing elsewhere. */
export function createProgressLine(context: CliContext): {
  readonly show: ((progress: LocalProgress) => void) | undefined;
  readonly clear: () => void;
} {
  if (!context.isInteractive) return { show: undefined, clear: () => undefined };
  return {
    show: ({ constitutionsSeen, survivors, shardsDone, shardCount, seconds }) =>
      context.tell(
        `${CLEAR_LINE}${groupDigits(constitutionsSeen)} constitutions, ${groupDigits(survivors)} kept, shard ${shardsDone} of ${shardCount}, ${formatSeconds(seconds)}`,
      ),
    clear: () => context.tell(CLEAR_LINE),
  };
}
