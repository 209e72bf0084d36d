import { readlinkSync } from 'node:fs';
import { constants, setPriority } from 'node:os';

/**
 * Lowers the priority of the calling thread, so that answering people comes before a run on a machine with few cores.
 * Linux gives every thread a priority of its own, addressed by the thread id; elsewhere nothing is changed.
 *
 * @returns whether the priority was lowered; if not, a run competes with the server on equal terms.
 */
export function yieldToServer(): boolean {
  try {
    // …/task/ID of the thread that reads the link.
    const thread = Number(readlinkSync('/proc/thread-self').split('/').at(-1));
    setPriority(thread, constants.priority.PRIORITY_LOW);
    return true;
  } catch {
    return false;
  }
}
