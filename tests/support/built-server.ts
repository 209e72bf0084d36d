import { type ChildProcess, spawn } from 'node:child_process';
import { once } from 'node:events';
import { mkdir } from 'node:fs/promises';
import { join, resolve } from 'node:path';
import { findFreePort } from '../../server/database/mariadb-process.js';
import { copyPreparedData } from './test-mariadb.js';

export interface BuiltServer {
  readonly url: string;
  readonly process: ChildProcess;
  /** Everything the server has printed so far. */
  readonly output: () => string;
  /** Ends the server as Ctrl-C does and gives its exit code. */
  readonly stop: () => Promise<number | null>;
}

export interface BuiltServerOptions {
  /** Data folder; keep it to start on the same data again. */
  readonly dataDirectory: string;
  readonly environment?: Readonly<Record<string, string>>;
  /** Demo runs are computed at the first start. */
  readonly timeoutMs?: number;
}

const root = resolve(import.meta.dirname, '../..');

/** Starts the built product with a private database of its own, as `npm start` does, and waits until it is ready. */
export async function startBuiltServer({ dataDirectory, environment = {}, timeoutMs = 120_000 }: BuiltServerOptions): Promise<BuiltServer> {
  const port = await findFreePort();
  const database = join(dataDirectory, 'mariadb');
  // Shortens the first start; a folder that has data already is left as it is.
  if ((await mkdir(database, { recursive: true })) !== undefined) await copyPreparedData(database);
  const inherited = Object.fromEntries(Object.entries(process.env).filter(([name]) => /^(PATH|HOME|LANG|TZ|TMPDIR)$/.test(name)));
  const child = spawn(process.execPath, [join(root, 'dist/server/main.js')], {
    env: { ...inherited, PORT: String(port), ISOLOOM_DATA_DIR: dataDirectory, ...environment },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  let output = '';
  const ready = new Promise<void>((resolveReady, reject) => {
    const timer = setTimeout(() => reject(new Error(`The server was not ready in time. It printed:\n${output}`)), timeoutMs);
    const collect = (chunk: Buffer) => {
      output += chunk.toString();
      if (!output.includes('Isoloom is running')) return;
      clearTimeout(timer);
      resolveReady();
    };
    child.stdout.on('data', collect);
    child.stderr.on('data', collect);
    child.once('exit', (code) => {
      clearTimeout(timer);
      reject(new Error(`The server ended with code ${code}. It printed:\n${output}`));
    });
  });
  const stop = async () => {
    if (child.exitCode === null && child.signalCode === null) {
      const exited = once(child, 'exit');
      child.kill('SIGINT');
      await exited;
    }
    return child.exitCode;
  };
  try {
    await ready;
  } catch (error) {
    await stop();
    throw error;
  }
  return { url: `http://127.0.0.1:${port}`, process: child, output: () => output, stop };
}
