import { getHeapStatistics } from 'node:v8';

/** Asking for the heap takes some microseconds. */
const LOOK_EVERY_MS = 100;

/** Heap of a thread in which a shard ends itself, megabytes; the pool sets it below the limit at which the thread would be killed. */
export const SHARD_HEAP_VARIABLE = 'ISOLOOM_SHARD_HEAP_MB';

/**
 * Watches the memory of this thread. A shard keeps its memory flat whatever it builds; one that does not has gone astray,
 * and it is better to keep what it has found than to lose its thread.
 *
 * @param limitBytes - of the heap and what hangs on it; Infinity = no limit.
 * @param readBytes - of the present.
 * @returns whether the limit has been passed; looks about ten times a second, however often it is asked.
 */
export function createMemoryGuard(
  limitBytes: number = limitOfThread(),
  readBytes: () => number = usedBytes,
  now: () => number = () => performance.now(),
): () => boolean {
  let lookedMs = -Infinity;
  let isOver = false;
  return () => {
    if (isOver || now() - lookedMs < LOOK_EVERY_MS) return isOver;
    lookedMs = now();
    isOver = readBytes() > limitBytes;
    return isOver;
  };
}

function limitOfThread(): number {
  const megabytes = Number(process.env[SHARD_HEAP_VARIABLE]);
  return megabytes > 0 ? megabytes * 2 ** 20 : Infinity;
}

function usedBytes(): number {
  const { used_heap_size: heap, external_memory: outside } = getHeapStatistics();
  return heap + outside;
}
