import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { pino } from 'pino';
import { connectRedis } from '../../server/compute/redis/redis-connection.js';
import { findExecutable, findFreePort } from '../../server/database/mariadb-process.js';

export interface TestRedis {
  readonly url: string;
  readonly stop: () => Promise<void>;
}

const program = findExecutable('redis-server');

/**
 * Whether the tests of the queue on Redis can run. Where every test has to, a missing Redis fails them instead.
 */
export const hasRedis = program !== null || Boolean(process.env.CI);
if (!hasRedis) console.warn('Skipped: the queue on Redis. Install it on Debian as root with: apt-get install redis-server');

/** Starts a Redis of its own for one test file, on 127.0.0.1 and a free port, that keeps nothing. */
export async function startTestRedis(): Promise<TestRedis> {
  if (program === null) throw new Error('redis-server was not found; npm test installs it from the Debian package redis-server.');
  const directory = await mkdtemp(join(tmpdir(), 'isoloom-redis-'));
  const port = await findFreePort();
  const args = ['--port', String(port), '--bind', '127.0.0.1', '--dir', directory, '--save', '', '--appendonly', 'no'];
  const child = spawn(program, [...args, '--maxmemory-policy', 'noeviction', '--daemonize', 'no'], { stdio: 'ignore' });
  const exited = once(child, 'exit');
  const stop = async () => {
    child.kill('SIGTERM');
    await exited;
    await rm(directory, { recursive: true, force: true });
  };
  const url = `redis://127.0.0.1:${port}`;
  for (let attempt = 1; ; attempt++) {
    try {
      const connection = await connectRedis(url, pino({ level: 'silent' }));
      connection.disconnect();
      return { url, stop };
    } catch (error) {
      if (attempt === 50) {
        await stop();
        throw error;
      }
      await new Promise((resolve) => setTimeout(resolve, 100));
    }
  }
}
