import { describe, expect, it } from 'vitest';
import { FairScheduler } from '../../../server/compute/fair-scheduler.js';

/** A scheduler whose tasks are released by hand, one after the other. */
function createBench(slots: number) {
  const scheduler = new FairScheduler(slots);
  const started: string[] = [];
  const releases: (() => void)[] = [];
  const schedule = (teamId: string, runId: string, count: number) =>
    Array.from({ length: count }, () =>
      scheduler.schedule({ teamId, runId }, () => {
        started.push(runId);
        return new Promise<string>((resolve) => releases.push(() => resolve(runId)));
      }),
    );
  const releaseOne = async () => {
    releases.shift()?.();
    await new Promise(setImmediate);
  };
  const releaseAll = async () => {
    while (releases.length > 0) await releaseOne();
  };
  return { scheduler, started, schedule, releaseOne, releaseAll };
}

describe('FairScheduler', () => {
  it('never starts more tasks than there are slots', async () => {
    const { started, schedule, releaseOne, releaseAll } = createBench(2);
    const results = schedule('t1', 'a', 5);
    expect(started).toEqual(['a', 'a']);
    await releaseOne();
    expect(started).toHaveLength(3);
    await releaseAll();
    expect(await Promise.all(results)).toEqual(['a', 'a', 'a', 'a', 'a']);
  });

  it('lets teams take turns, and runs inside a team', async () => {
    const { started, schedule, releaseAll } = createBench(1);
    void schedule('t1', 'a1', 4);
    void schedule('t1', 'a2', 4);
    void schedule('t2', 'b1', 4);
    await releaseAll();
    expect(started.slice(0, 8)).toEqual(['a1', 'b1', 'a2', 'b1', 'a1', 'b1', 'a2', 'b1']);
    expect(started).toHaveLength(12);
  });

  it('makes a run that comes late wait for one task at most', async () => {
    const { started, schedule, releaseOne, releaseAll } = createBench(1);
    void schedule('t1', 'long', 100);
    await releaseOne();
    await releaseOne();
    void schedule('t1', 'late', 1);
    await releaseOne();
    expect(started.at(-1)).toBe('late');
    await releaseAll();
  });

  it('skips what a dropped run has waiting and starts the others', async () => {
    const { scheduler, started, schedule, releaseAll } = createBench(1);
    const dropped = schedule('t1', 'a', 3);
    void schedule('t1', 'b', 1);
    scheduler.drop('a');
    await releaseAll();
    expect(await Promise.all(dropped)).toEqual(['a', null, null]);
    expect(started).toEqual(['a', 'b']);
  });

  it('goes on after a task that failed', async () => {
    const scheduler = new FairScheduler(1);
    const failing = scheduler.schedule({ teamId: 't', runId: 'a' }, () => Promise.reject(new Error('broken')));
    const next = scheduler.schedule({ teamId: 't', runId: 'a' }, () => Promise.resolve('next'));
    await expect(failing).rejects.toThrow('broken');
    expect(await next).toBe('next');
  });
});
