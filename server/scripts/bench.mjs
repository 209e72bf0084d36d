// @ts-check
/** `npm run bench -- NAME [arguments]`: runs tests/bench/NAME.ts; without a name it lists what there is. */
import { existsSync } from 'node:fs';
import { readdir } from 'node:fs/promises';
import { join, resolve } from 'node:path';
import { run } from './run-command.mjs';

const folder = resolve(import.meta.dirname, '../../tests/bench');
const [name, ...args] = process.argv.slice(2);
const file = join(folder, `${name}.ts`);
if (name === undefined || !/^[a-z0-9-]+$/.test(name) || !existsSync(file)) {
  const names = (await readdir(folder).catch(() => [])).filter((entry) => entry.endsWith('.ts')).map((entry) => entry.slice(0, -3));
  console.error(`Usage: npm run bench -- NAME [arguments]\nBenchmarks: ${names.join(', ') || 'none yet'}`);
  process.exit(2);
}
process.exit(await run(process.execPath, ['--import', 'tsx', file, ...args]));
