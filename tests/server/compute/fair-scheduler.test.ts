import { describe, expect, it } from 'vitest';
import { FairScheduler, type Lane } from '../../../server/compute/fair-scheduler.js';

/** A run with a number of tasks; each is released by hand. */
function createLane(teamId: string, runId: string, taskCount: number, started: string[], releases: (() => void)[]): Lane {
  let left = taskCount;
  return {
    teamId,
    runId,
    take: () => {
      if (left === 0) return null;
      left -= 1;
      return () => {
        started.push(runId);
        return new Promise((resolve) => releases.push(resolve));
      };
    },
  };
}

async function drain(releases: (() => void)[]): Promise<void> {
  while (releases.length > 0) {
    releases.shift()?.();
    await new Promise(setImmediate);
  }
}

describe('FairScheduler', () => {
  it('never starts more tasks than there are slots', async () => {
    const started: string[] = [];
    const releases: (() => void)[] = [];
    const scheduler = new FairScheduler(2);
    scheduler.add(createLane('t1', 'a', 5, started, releases));
    expect(started).toEqual(['a', 'a']);
    releases.shift()?.();
    await new Promise(setImmediate);
    expect(started).toHaveLength(3);
    await drain(releases);
    expect(started).toHaveLength(5);
  });

  it('lets teams take turns, and runs inside a team', async () => {
    const started: string[] = [];
    const releases: (() => void)[] = [];
    const scheduler = new FairScheduler(1);
    scheduler.add(createLane('t1', 'a1', 4, started, releases));
    scheduler.add(createLane('t1', 'a2', 4, started, releases));
    scheduler.add(createLane('t2', 'b1', 4, started, releases));
    await drain(releases);
    expect(started.slice(0, 9)).toEqual(['a1', 'b1', 'a2', 'b1', 'a1', 'b1', 'a2', 'b1', 'a1']);
    expect(started).toHaveLength(12);
  });

  it('makes a run that comes late wait for one task at most', async () => {
    const started: string[] = [];
    const releases: (() => void)[] = [];
    const scheduler = new FairScheduler(1);
    scheduler.add(createLane('t1', 'long', 100, started, releases));
    for (let i = 0; i < 3; i++) {
      releases.shift()?.();
      await new Promise(setImmediate);
    }
    scheduler.add(createLane('t1', 'late', 1, started, releases));
    releases.shift()?.();
    await new Promise(setImmediate);
    expect(started.at(-1)).toBe('late');
    await drain(releases);
  });

  it('starts nothing of a run that was removed', async () => {
    const started: string[] = [];
    const releases: (() => void)[] = [];
    const scheduler = new FairScheduler(1);
    scheduler.add(createLane('t1', 'a', 3, started, releases));
    scheduler.remove('a');
    await drain(releases);
    expect(started).toEqual(['a']);
  });
});
