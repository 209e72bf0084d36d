/**
 * Live counters that shards of one run share with the server: 64-bit slots in a SharedArrayBuffer.
 * Slot 0 is a flag read every few thousand steps; the others only grow.
 */
export const COUNTER_SLOTS = { cancelled: 0, constitutionsSeen: 1, survivors: 2, shardsDone: 3 } as const;

export function createCounters(): SharedArrayBuffer {
  return new SharedArrayBuffer(8 * 8);
}
export function addToCounter(counters: SharedArrayBuffer, slot: keyof typeof COUNTER_SLOTS, amount: number): void {
  Atomics.add(new BigInt64Array(counters), COUNTER_SLOTS[slot], BigInt(amount));
}
export function readCounter(counters: SharedArrayBuffer, slot: keyof typeof COUNTER_SLOTS): number {
  return Number(Atomics.load(new BigInt64Array(counters), COUNTER_SLOTS[slot]));
}
export function cancelRun(counters: SharedArrayBuffer): void {
  Atomics.store(new BigInt64Array(counters), COUNTER_SLOTS.cancelled, 1n);
}
export function isCancelled(counters: SharedArrayBuffer): boolean {
  return Atomics.load(new BigInt64Array(counters), COUNTER_SLOTS.cancelled) === 1n;
}
