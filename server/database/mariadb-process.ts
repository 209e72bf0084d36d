import { spawn, type ChildProcess } from 'node:child_process';
import { randomBytes } from 'node:crypto';
import { closeSync, existsSync, openSync } from 'node:fs';
import { mkdir, readFile, rename, rm, writeFile } from 'node:fs/promises';
import { connect, createServer } from 'node:net';
import { tmpdir } from 'node:os';
import { delimiter, join } from 'node:path';

/** A MariaDB server of our own that is accepting connections on 127.0.0.1. */
export interface MariadbProcess {
  readonly port: number;
  readonly process: ChildProcess;
  /** Asks the server to shut down and resolves once it has gone. Safe to call twice. */
  readonly stop: () => Promise<void>;
}

export interface MariadbStartOptions {
  /** Folder made by `installMariadb`. */
  readonly directory: string;
  readonly port: number;
  /** Statements, one a line, run before the first connection is accepted. */
  readonly initStatements: readonly string[];
  /** False trades the safety of the last second for speed: tests only. */
  readonly durable: boolean;
}

export class MariadbError extends Error {
  override readonly name = 'MariadbError';
}

/** Linux refuses longer paths of unix sockets (sun_path has 108 bytes). */
const LONGEST_SOCKET_PATH = 107;
const START_TIMEOUT_MS = 60_000;
const STOP_TIMEOUT_MS = 30_000;

/** Debian keeps servers in sbin, which is not on the path of every user. */
export function findExecutable(name: string): string | null {
  const folders = [...(process.env.PATH ?? '').split(delimiter), '/usr/sbin', '/usr/local/sbin', '/usr/local/bin', '/usr/bin'];
  return (
    folders
      .filter((folder) => folder !== '')
      .map((folder) => join(folder, name))
      .find((path) => existsSync(path)) ?? null
  );
}

function requireExecutable(name: string): string {
  const path = findExecutable(name);
  if (path === null)
    throw new MariadbError(
      `${name} was not found. Install MariaDB (on Debian as root: apt-get install mariadb-server-core mariadb-client-core) or set DATABASE_URL.`,
    );
  return path;
}

/** The server refuses to run as root unless told so by name. */
function userArguments(): string[] {
  return process.getuid?.() === 0 ? ['--user=root'] : [];
}

/** The password goes in by an init file, so that no account without one ever exists on the network. */
export function createPassword(): string {
  return randomBytes(24).toString('base64url');
}

export async function findFreePort(): Promise<number> {
  return await new Promise((resolve, reject) => {
    const probe = createServer();
    probe.once('error', reject);
    probe.listen(0, '127.0.0.1', () => {
      const address = probe.address();
      probe.close(() =>
        address !== null && typeof address === 'object' ? resolve(address.port) : reject(new MariadbError('No free port was found.')),
      );
    });
  });
}

/** True when nothing listens on the port of 127.0.0.1. */
export async function isPortFree(port: number): Promise<boolean> {
  return await new Promise((resolve) => {
    const probe = createServer();
    probe.once('error', () => resolve(false));
    probe.listen(port, '127.0.0.1', () => probe.close(() => resolve(true)));
  });
}

/** Makes an empty data folder in `directory/data`; an interrupted installation leaves nothing behind. Takes 4 to 6 s. */
export async function installMariadb(directory: string): Promise<void> {
  const target = join(directory, 'data');
  if (existsSync(target)) return;
  await mkdir(directory, { recursive: true, mode: 0o700 });
  const unfinished = join(directory, `data-unfinished-${process.pid}`);
  await rm(unfinished, { recursive: true, force: true });
  const output = await runToEnd(requireExecutable('mariadb-install-db'), [
    '--no-defaults',
    `--datadir=${unfinished}`,
    '--skip-test-db',
    // The name of a machine need not resolve, least of all in a container: accounts are by address.
    '--force',
    '--innodb-log-file-size=16M',
    ...userArguments(),
  ]);
  if (output.exitCode !== 0) {
    await rm(unfinished, { recursive: true, force: true });
    throw new MariadbError(`mariadb-install-db failed with code ${output.exitCode}:\n${lastLines(output.text)}`);
  }
  await rename(unfinished, target);
}

/** Starts the server and waits until it greets a connection. */
export async function startMariadb({ directory, port, initStatements, durable }: MariadbStartOptions): Promise<MariadbProcess> {
  const initFile = join(directory, 'init.sql');
  await writeFile(initFile, initStatements.map((statement) => `${statement};\n`).join(''), { mode: 0o600 });
  const logFile = join(directory, 'mariadb.log');
  const log = openSync(logFile, 'w', 0o600);
  const child = spawn(
    requireExecutable('mariadbd'),
    [
      '--no-defaults',
      `--datadir=${join(directory, 'data')}`,
      `--socket=${socketPath(directory)}`,
      `--pid-file=${pidFile(directory)}`,
      `--port=${port}`,
      '--bind-address=127.0.0.1',
      '--skip-name-resolve',
      '--character-set-server=utf8mb4',
      '--collation-server=utf8mb4_unicode_ci',
      '--default-time-zone=+00:00',
      '--innodb-log-file-size=16M',
      '--innodb-buffer-pool-size=64M',
      '--max-connections=200',
      `--init-file=${initFile}`,
      ...(durable ? [] : ['--innodb-flush-log-at-trx-commit=0', '--performance-schema=OFF']),
      ...userArguments(),
    ],
    // A group of its own: Ctrl-C in the terminal reaches us alone, and we stop the database after its last client.
    { detached: true, stdio: ['ignore', log, log] },
  );
  closeSync(log);
  const exited = new Promise<void>((resolve) => {
    child.once('exit', () => resolve());
    child.once('error', () => resolve());
  });
  const stop = () => stopChild(child, exited);
  try {
    await waitForGreeting(port, exited);
    // It has been read, and it holds the password.
    await rm(initFile, { force: true });
  } catch (error) {
    await stop();
    const text = await readFile(logFile, 'utf8').catch(() => '');
    throw new MariadbError(`MariaDB did not start on port ${port}: ${(error as Error).message}\n${lastLines(text)}`);
  }
  return { port, process: child, stop };
}

/** Stops a server that outlived the process that started it; true when there was one. */
export async function stopOrphan(directory: string): Promise<boolean> {
  const pid = Number(await readFile(pidFile(directory), 'utf8').catch(() => ''));
  if (!Number.isInteger(pid) || pid <= 0) return false;
  // A process number may have been given to somebody else since: the command line says whose it is.
  const commandLine = await readFile(`/proc/${pid}/cmdline`, 'utf8').catch(() => '');
  if (!commandLine.split('\0').includes(`--datadir=${join(directory, 'data')}`)) return false;
  process.kill(pid, 'SIGTERM');
  const deadline = Date.now() + STOP_TIMEOUT_MS;
  while (existsSync(`/proc/${pid}`) && Date.now() < deadline) await delay(50);
  return true;
}

function pidFile(directory: string): string {
  return join(directory, 'm.pid');
}

function socketPath(directory: string): string {
  const path = join(directory, 's.sock');
  return Buffer.byteLength(path) <= LONGEST_SOCKET_PATH ? path : join(tmpdir(), `isoloom-${randomBytes(6).toString('hex')}.sock`);
}

async function stopChild(child: ChildProcess, exited: Promise<void>): Promise<void> {
  if (child.pid === undefined || child.exitCode !== null || child.signalCode !== null) return;
  child.kill('SIGTERM');
  const hardStop = setTimeout(() => child.kill('SIGKILL'), STOP_TIMEOUT_MS);
  await exited;
  clearTimeout(hardStop);
}

async function waitForGreeting(port: number, exited: Promise<void>): Promise<void> {
  let hasExited = false;
  void exited.then(() => (hasExited = true));
  const deadline = Date.now() + START_TIMEOUT_MS;
  while (!(await receivesGreeting(port))) {
    if (hasExited) throw new MariadbError('the process ended');
    if (Date.now() > deadline) throw new MariadbError('it did not answer within a minute');
    await delay(50);
  }
  // Somebody else's server on this port would greet as well, while ours has just failed to bind.
  await delay(50);
  if (hasExited) throw new MariadbError('the process ended');
}

async function receivesGreeting(port: number): Promise<boolean> {
  return await new Promise((resolve) => {
    const socket = connect({ host: '127.0.0.1', port });
    const finish = (isReady: boolean) => {
      socket.destroy();
      resolve(isReady);
    };
    socket.setTimeout(1000, () => finish(false));
    socket.once('data', () => finish(true));
    socket.once('error', () => finish(false));
    socket.once('close', () => finish(false));
  });
}

async function runToEnd(file: string, args: readonly string[]): Promise<{ exitCode: number | null; text: string }> {
  return await new Promise((resolve, reject) => {
    const child = spawn(file, args, { stdio: ['ignore', 'pipe', 'pipe'] });
    let text = '';
    const collect = (chunk: Buffer) => (text += chunk.toString());
    child.stdout.on('data', collect);
    child.stderr.on('data', collect);
    child.once('error', reject);
    child.once('close', (exitCode) => resolve({ exitCode, text }));
  });
}

function lastLines(text: string): string {
  return text.trimEnd().split('\n').slice(-8).join('\n');
}

async function delay(milliseconds: number): Promise<void> {
  await new Promise((resolve) => setTimeout(resolve, milliseconds));
}
