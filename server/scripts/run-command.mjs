// @ts-check
import { spawn } from 'node:child_process';

/**
 * Runs a command to its end with our output.
 * @param {string} command
 * @param {readonly string[]} args
 * @param {{ cwd?: string, env?: NodeJS.ProcessEnv, quiet?: boolean }} [options] `quiet` drops what the command prints
 * @returns {Promise<number>} exit code; 127 when the command does not exist
 */
export function run(command, args, { cwd, env, quiet = false } = {}) {
  return new Promise((resolve, reject) => {
    const output = quiet ? 'ignore' : 'inherit';
    const child = spawn(command, args, { ...(cwd ? { cwd } : {}), env: { ...process.env, ...env }, stdio: ['ignore', output, output] });
    child.once('error', (error) => (/** @type {NodeJS.ErrnoException} */ (error).code === 'ENOENT' ? resolve(127) : reject(error)));
    child.once('exit', (code) => resolve(code ?? 1));
  });
}
