import { execFileSync } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { join, resolve } from 'node:path';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { compositionOf, parseSmiles } from '../../../shared/chemistry/smiles.js';
import { evidenceDocument } from '../../../shared/schemas/evidence.js';
import { fill, FILL_STRIDE } from '../../../workers/enumeration/fill.js';
import type { FillLayout } from '../../../workers/enumeration/layout.js';
import { createLayout } from '../../../workers/enumeration/distributions.js';
import { createSearch } from '../../../workers/enumeration/search.js';
import { createTemporaryFolder } from '../../support/config.js';
import { referenceFill } from '../../support/reference-fill.js';

const root = resolve(import.meta.dirname, '../../..');

const MOST = 400;

/** The first leaves in the order in which they come, then those of the first prefixes of two rows. */
function filledBy(run: typeof fill, layout: FillLayout): string[] {
  const found: string[] = [];
  let room = MOST;
  const onLeaf = (matrix: Uint8Array): boolean => {
    let text = '';
    for (let i = 0; i < layout.open; i++) text += matrix.slice(i * FILL_STRIDE, i * FILL_STRIDE + layout.open).join('');
    found.push(text);
    return --room === 0;
  };
  run(layout, [], 0, { onLeaf, shouldStop: () => false });
  const prefixes: number[][] = [];
  run(layout, [], 2, { onLeaf: () => false, onPrefix: (prefix) => prefixes.push(prefix), shouldStop: () => false });
  for (const prefix of prefixes.slice(-10)) {
    found.push(prefix.join());
    room = MOST;
    run(layout, prefix, 0, { onLeaf, shouldStop: () => false });
  }
  return found;
}

describe('the compiled inner loop of the fill', () => {
  it('is what its source compiles to: run `npm run wasm` after a change', () => {
    const { scripts } = JSON.parse(readFileSync(join(root, 'package.json'), 'utf8')) as { scripts: { wasm: string } };
    const output = join(createTemporaryFolder(), 'fill.wasm');
    const [, ...words] = scripts.wasm.split(' ');
    const compiler = join(root, 'node_modules/assemblyscript/bin/asc.js');
    execFileSync(process.execPath, [compiler, ...words.map((word) => (word.endsWith('.wasm') ? output : word))], { cwd: root });
    expect(readFileSync(output).equals(readFileSync(join(root, 'workers/enumeration/fill.wasm')))).toBe(true);
  }, 60_000);

  it('gives the same matrices in the same order as the reference in plain TypeScript', () => {
    const fragment = fc.constantFrom(
      '*c1cccc(*)c1',
      '*C(=O)O*',
      '*C(C)C',
      '*C#N',
      '*CC*',
      '*=C(*)*',
      '*c1ccc(*)c(*)c1',
      '*C(*)=C(*)*',
      '*N(*)N*',
    );
    const problemCase = fc.record({
      carbons: fc.integer({ min: 0, max: 4 }),
      oxygens: fc.integer({ min: 0, max: 2 }),
      nitrogens: fc.integer({ min: 0, max: 2 }),
      hydrogens: fc.integer({ min: 0, max: 10 }),
      required: fc.array(fc.record({ smiles: fragment, count: fc.integer({ min: 1, max: 2 }) }), { maxLength: 2 }),
    });
    let compared = 0;
    fc.assert(
      fc.property(problemCase, ({ carbons, oxygens, nitrogens, hydrogens, required }) => {
        const formula = { C: carbons, H: hydrogens, N: nitrogens, O: oxygens };
        for (const { smiles, count } of required) {
          const read = parseSmiles(smiles);
          if (!read.ok) throw new Error(read.message);
          for (const [symbol, amount] of compositionOf(read.graph)) formula[symbol as keyof typeof formula] += amount * count;
        }
        const text = Object.entries(formula)
          .map(([symbol, count]) => (count === 0 ? '' : `${symbol}${count}`))
          .join('');
        if (text === '' || formula.C + formula.N + formula.O > 11) return;
        const search = createSearch(evidenceDocument.parse({ formula: text, fragments: { required }, options: { plausibility: false } }));
        for (const { problem, distribution } of search.branches) {
          const layout = createLayout(problem, distribution);
          const reference = filledBy(referenceFill, layout);
          expect(filledBy(fill, layout)).toEqual(reference);
          compared += reference.length;
        }
      }),
      { numRuns: 60, seed: 20261201 },
    );
    expect(compared).toBeGreaterThan(2_000);
  }, 120_000);
});
