#!/usr/bin/env node
import { once } from 'node:events';
import { Interrupt } from './interrupt.js';
import { runCli } from './program.js';

const interrupt = new Interrupt();
process.on('SIGINT', () => {
  // The first Ctrl-C stops the run and prints what it found; whoever presses again does not want to wait.
  if (interrupt.isRequested) process.exit(130);
  interrupt.request();
});
process.on('SIGTERM', () => interrupt.request());
process.stdout.on('error', (error: NodeJS.ErrnoException) => {
  // The reader of a pipe has gone, as with `| head`.
  if (error.code === 'EPIPE') process.exit(0);
  throw error;
});

process.exitCode = await runCli(process.argv.slice(2), {
  write: async (text) => {
    if (!process.stdout.write(text)) await once(process.stdout, 'drain');
  },
  tell: (text) => void process.stderr.write(text),
  input: process.stdin,
  isInteractive: process.stderr.isTTY === true && !process.argv.includes('--json'),
  interrupt,
  openCompute: async (threads) => {
    const { createComputePool } = await import('../compute/pool.js');
    return createComputePool({
      ...(threads === undefined ? {} : { threads }),
      onFault: (error) => void process.stderr.write(`${error.message}\n`),
    });
  },
});
