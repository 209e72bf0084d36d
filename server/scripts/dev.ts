import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { createServer } from 'vite';
import { loadConfig } from '../config/config.js';
import { lockDataFolder } from '../database/data-folder-lock.js';
import { startPrivateMariadb } from '../database/private-mariadb.js';
import { createShutdown } from '../shutdown.js';

/**
 * `npm run dev`: the private database, the API (started again when a source of it changes) and Vite's development
 * server for the client, which hands /api on to the API.
 */
const shutdown = createShutdown((step, error) => console.error(`Could not stop the ${step} cleanly:`, error));
let isStopping = false;

async function stop(exitCode: number): Promise<never> {
  isStopping = true;
  await shutdown.run();
  process.exit(exitCode);
}

async function start(): Promise<void> {
  const config = loadConfig({ NODE_ENV: 'development', ...process.env });
  let databaseUrl = config.databaseUrl;
  if (databaseUrl === null) {
    const release = await lockDataFolder(config.dataDirectory);
    shutdown.add('data folder', release);
    const database = await startPrivateMariadb(config.dataDirectory);
    shutdown.add('database', database.stop);
    databaseUrl = database.url;
  }
  const vite = await createServer();
  await vite.listen();
  shutdown.add('client', () => vite.close());
  const address = vite.resolvedUrls?.local[0];
  // A group of its own: Ctrl-C reaches this process alone, and the database stops after its client.
  const api = spawn(process.execPath, ['--watch', '--watch-preserve-output', '--import', 'tsx', 'server/main.ts'], {
    detached: true,
    stdio: ['ignore', 'inherit', 'inherit'],
    env: { ...process.env, NODE_ENV: 'development', DATABASE_URL: databaseUrl, PUBLIC_URL: process.env.PUBLIC_URL ?? address },
  });
  const apiEnded = once(api, 'exit');
  shutdown.add('API', async () => {
    api.kill('SIGTERM');
    await apiEnded;
  });
  void apiEnded.then(() => {
    if (!isStopping) void stop(1);
  });
  console.log(`\nClient with live reload: ${address}\n`);
}

for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) {
  process.on(signal, () => {
    if (!isStopping) void stop(0);
  });
}
try {
  await start();
} catch (error) {
  console.error(error instanceof Error ? error.message : error);
  await stop(1);
}
