import { describe, expect, it } from 'vitest';
import { FairScheduler } from '../../../server/compute/fair-scheduler.js';
import { runSize } from '../../../server/compute/share.js';

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

  it('gives every team the same, however many runs it has, and the runs of a team the same', async () => {
    const { started, schedule, releaseAll } = createBench(1);
    void schedule('t1', 'a1', 20);
    void schedule('t1', 'a2', 20);
    void schedule('t2', 'b1', 20);
    await releaseAll();
    const count = (runId: string) => started.slice(0, 24).filter((id) => id === runId).length;
    expect(count('b1')).toBeGreaterThanOrEqual(11);
    expect(count('b1')).toBeLessThanOrEqual(13);
    expect(Math.abs(count('a1') - count('a2'))).toBeLessThanOrEqual(1);
    expect(started).toHaveLength(60);
  });

  it('gives a small run more than a large one of its team, without stopping the large one or taking from other teams', async () => {
    const { scheduler, started, schedule, releaseAll } = createBench(1);
    // Shards of a second each: an hour weighs 1/12, twenty seconds 1/5.
    scheduler.setSize('large', runSize(3_600, 3_600));
    scheduler.setSize('small', runSize(20, 20));
    scheduler.setSize('other', runSize(60, 60));
    void schedule('t1', 'large', 60);
    void schedule('t2', 'other', 60);
    void schedule('t1', 'small', 20);
    await releaseAll();
    const untilSmallIsDone = started.slice(0, started.lastIndexOf('small') + 1);
    const count = (runId: string) => untilSmallIsDone.filter((id) => id === runId).length;
    expect(count('large')).toBeGreaterThanOrEqual(7);
    expect(count('large')).toBeLessThanOrEqual(10);
    expect(Math.abs(count('other') - count('small') - count('large'))).toBeLessThanOrEqual(2);
  });

  it('shares time, not shards: the short ones of a small run do not wait for long ones', async () => {
    const { scheduler, started, schedule, releaseAll } = createBench(1);
    scheduler.setSize('hours', runSize(7_200, 192));
    scheduler.setSize('second', runSize(1, 100));
    void schedule('t1', 'hours', 10);
    void schedule('t2', 'second', 100);
    await releaseAll();
    expect(started.slice(0, started.lastIndexOf('second')).filter((id) => id === 'hours').length).toBeLessThanOrEqual(2);
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
