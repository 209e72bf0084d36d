import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { createRequire } from 'node:module';
import { dirname, join } from 'node:path';
import { loadConfig } from '../config/config.js';
import { lockDataFolder } from '../database/data-folder-lock.js';
import { findFreePort, isPortFree } from '../database/mariadb-process.js';
import { startPrivateMariadb } from '../database/private-mariadb.js';
import { runUntilSignal } from '../run-until-signal.js';
import type { Shutdown } from '../shutdown.js';

const USUAL_CLIENT_PORT = 5173;

/**
 * `npm run dev`: the private database, the API (started again when a source of it changes) and Vite's development
 * server for the client, which hands /api on to the API. Both are processes of their own: each has its own idea of what
 * to do on a signal, and the database stops after them.
 */
runUntilSignal({
  start: async (shutdown, stop) => {
    const config = loadConfig({ NODE_ENV: 'development', ...process.env });
    const databaseUrl = config.databaseUrl ?? (await openPrivateDatabase(config.dataDirectory, shutdown));
    const clientPort = (await isPortFree(USUAL_CLIENT_PORT)) ? USUAL_CLIENT_PORT : await findFreePort();
    const environment = {
      ...process.env,
      NODE_ENV: 'development',
      DATABASE_URL: databaseUrl,
      PUBLIC_URL: process.env.PUBLIC_URL ?? `http://127.0.0.1:${clientPort}`,
    };
    const startProcess = (name: string, args: readonly string[]) => {
      // A group of its own: Ctrl-C reaches this process alone, which then stops everything in order.
      const child = spawn(process.execPath, args, { detached: true, stdio: ['ignore', 'inherit', 'inherit'], env: environment });
      const ended = once(child, 'exit');
      shutdown.add(name, async () => {
        child.kill('SIGTERM');
        await ended;
      });
      void ended.then(() => stop(1));
    };
    startProcess('client', [viteProgram(), '--port', String(clientPort), '--strictPort']);
    startProcess('API', ['--watch', '--watch-preserve-output', '--import', 'tsx', 'server/main.ts']);
  },
  explain: (error) => (error instanceof Error ? error.message : error),
});

async function openPrivateDatabase(dataDirectory: string, shutdown: Shutdown): Promise<string> {
  shutdown.add('data folder', await lockDataFolder(dataDirectory));
  const database = await startPrivateMariadb(dataDirectory);
  shutdown.add('database', database.stop);
  return database.url;
}

/** Its own file: a signal to `npx` would not reach it. */
function viteProgram(): string {
  return join(dirname(createRequire(import.meta.url).resolve('vite/package.json')), 'bin', 'vite.js');
}
