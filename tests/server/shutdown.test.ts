import { expect, it } from 'vitest';
import { createShutdown } from '../../server/shutdown.js';

it('closes everything once, newest first, and goes on after a step that fails or hangs', async () => {
  const closed: string[] = [];
  const failures: string[] = [];
  const shutdown = createShutdown((step) => failures.push(step), 20);
  shutdown.add('database', () => void closed.push('database'));
  shutdown.add('hanging', () => new Promise(() => undefined));
  shutdown.add('failing', () => {
    throw new Error('no');
  });
  shutdown.add('server', async () => void closed.push('server'));
  await Promise.all([shutdown.run(), shutdown.run()]);
  await shutdown.run();
  expect(closed).toEqual(['server', 'database']);
  expect(failures).toEqual(['failing', 'hanging']);
});

it('closes what a start under way added too late', async () => {
  const closed: string[] = [];
  const shutdown = createShutdown(() => undefined);
  await shutdown.run();
  shutdown.add('database', () => void closed.push('database'));
  await shutdown.run();
  expect(closed).toEqual(['database']);
});
