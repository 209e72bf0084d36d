// @ts-check
import { existsSync } from 'node:fs';
import { delimiter, join } from 'node:path';
import { run } from './run-command.mjs';

/**
 * What we need, the Debian packages that bring it, and the programs that show that it is there, whoever installed it
 * (each entry lists the names of one program). Of MariaDB only the programs: the package `mariadb-server` would also
 * set up a database service for the whole machine, which we do not use.
 */
const needs = {
  MariaDB: {
    packages: ['mariadb-server-core', 'mariadb-client-core'],
    programs: [['mariadbd'], ['mariadb-install-db'], ['my_print_defaults']],
  },
  Chromium: { packages: ['chromium'], programs: [['chromium']] },
  Redis: { packages: ['redis-server'], programs: [['redis-server']] },
  nauty: { packages: ['nauty'], programs: [['geng', 'nauty-geng']] },
};

/** @typedef {keyof typeof needs} Need */

/**
 * Installs what is missing from Debian's packages, if this user may. Otherwise one line says what to install.
 * @param {readonly Need[]} names
 * @param {{ isRequired: boolean }} options an unmet need is an error when it is required, else a warning
 */
export async function ensureDebianPackages(names, { isRequired }) {
  const missing = names.filter((name) => !isInstalled(name));
  if (missing.length === 0) return;
  const packages = missing.flatMap((name) => needs[name].packages);
  const prefix = await rootPrefix();
  if (prefix !== null && findProgram('apt-get') !== null) {
    console.log(`Installing ${missing.join(' and ')} from Debian's packages …`);
    if (await installAll(prefix, packages)) return;
  }
  const advice = `${missing.join(' and ')} not found. Install on Debian as root with: apt-get install ${packages.join(' ')}`;
  if (isRequired) throw new Error(advice);
  console.warn(advice);
}

/** @param {Need} name */
function isInstalled(name) {
  return needs[name].programs.every((alternatives) => alternatives.some((program) => findProgram(program) !== null));
}

/**
 * @param {readonly string[]} prefix
 * @param {readonly string[]} packages
 */
async function installAll(prefix, packages) {
  const [command = '', ...rest] = [...prefix, 'env', 'DEBIAN_FRONTEND=noninteractive', 'apt-get', '-y', '-qq', '-o', 'Dpkg::Use-Pty=0'];
  await run(command, [...rest, 'update']);
  return (await run(command, [...rest, 'install', '--no-install-recommends', ...packages])) === 0;
}

/** What to put before a command that needs root; null when this user may not. Never asks for a password. */
async function rootPrefix() {
  if (process.getuid?.() === 0) return [];
  return (await run('sudo', ['-n', 'true'], { quiet: true })) === 0 ? ['sudo', '-n'] : null;
}

/**
 * Debian keeps servers in sbin, which is not on the path of every user.
 * @param {string} name
 */
function findProgram(name) {
  const folders = [...(process.env.PATH ?? '').split(delimiter), '/usr/sbin', '/usr/local/sbin', '/usr/bin', '/usr/local/bin'];
  return folders.map((folder) => join(folder, name)).find((path) => existsSync(path)) ?? null;
}
