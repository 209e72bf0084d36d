import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { Molecule } from 'openchemlib';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { Interrupt } from '../../../server/cli/interrupt.js';
import { type ComputeService, WorkerCrash } from '../../../server/compute/compute-service.js';
import { CliHarness } from './cli-harness.js';

const cli = new CliHarness();
let folder = '';
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'isoloom-cli-'));
});
afterAll(async () => {
  await cli.close();
  rmSync(folder, { recursive: true, force: true });
});

function fileOf(name: string, content: unknown): string {
  const path = join(folder, name);
  writeFileSync(path, typeof content === 'string' ? content : JSON.stringify(content));
  return path;
}
const countOf = async (...args: string[]): Promise<number> => (await cli.run([...args, '--json'])).json().count as number;
interface Candidate {
  rank: number;
  smiles: string;
  idcode: string;
  probability: number;
  score: number;
  terms: Record<string, number>;
}
const codeOf = (smiles: string): string => Molecule.fromSmiles(smiles).getIDCode();

/** p-Cymene, 13C in CDCl3: Babij et al., Org. Process Res. Dev. 2016, 20, 661 (quoted in SCIENCE.md 11). */
const CYMENE = {
  formula: 'C10H14',
  fragments: { required: [{ smiles: '*C(C)C' }] },
  carbonSignals: [
    { shift: 145.89, hydrogens: 0 },
    { shift: 135.14, hydrogens: 0 },
    { shift: 128.98, hydrogens: 1, count: 2 },
    { shift: 126.28, hydrogens: 1, count: 2 },
    { shift: 33.7, hydrogens: 1 },
    { shift: 24.1, hydrogens: 3, count: 2 },
    { shift: 20.95, hydrogens: 3 },
  ],
};

describe('isoloom formula', () => {
  it('prints one JSON document with the fields of the contract', async () => {
    const outcome = await cli.run([
      'formula',
      '--mz',
      '151.0754',
      '--adduct',
      '[M+H]+',
      '--ppm',
      '5',
      '--isotopes',
      '100,9.9,0.8',
      '--json',
    ]);
    expect(outcome.exitCode).toBe(0);
    const { candidates } = outcome.json() as { candidates: Record<string, unknown>[] };
    expect(candidates[0]).toMatchObject({ formula: 'C9H10O2', unsaturation: 5 });
    expect(Object.keys(candidates[0])).toEqual(expect.arrayContaining(['formula', 'ppm', 'unsaturation', 'score']));
    expect(outcome.openedCount).toBe(0);
  });

  it('prints a table for people', async () => {
    const outcome = await cli.run(['formula', '--mz', '194.08038', '--adduct', 'M', '--elements', 'CHNO']);
    expect(outcome.stdout).toMatch(/^formula +ppm +unsaturation +score +remarks\nC8H10N4O2 +0\.02 +6 +-0\.70\n$/);
  });

  it.each([
    [['formula'], 'mz'],
    [['formula', '--mz', 'abc'], 'mz'],
    [['formula', '--mz', '151', '--ppm', '0'], 'ppm'],
    [['formula', '--mz', '151', '--adduct', '[M+Zz]+'], 'adduct'],
    [['formula', '--mz', '151', '--isotopes', '100,x'], 'isotopes'],
    [['formula', '--mz', '151', '--elements', 'CHFe'], 'elements'],
  ])('refuses %j with the field and exit code 2', async (args, path) => {
    const plain = await cli.run(args);
    expect(plain.exitCode).toBe(2);
    expect(plain.stdout).toBe('');
    expect(plain.stderr).toMatch(new RegExp(`^${path}: .*(expected|supported)`));
    expect((await cli.run([...args, '--json'])).json()).toMatchObject({ error: { code: 'badInput', path } });
  });
});

describe('isoloom enumerate', () => {
  it.each([
    // SCIENCE.md 2.6.
    ['C6H6', 217],
    ['C4H8O2', 122],
    ['C5H10O2', 400],
    ['C8H18', 18],
    ['C6H8', 159],
  ])('counts %s: %i', async (formula, count) => {
    const { exitCode, json } = await cli.run(['enumerate', formula, '--json']);
    expect(exitCode).toBe(0);
    expect(json()).toMatchObject({ count, multigraphCount: count, complete: true, smiles: [] });
    expect(typeof json().seconds).toBe('number');
  });

  it('prints the bare count', async () => {
    expect((await cli.run(['enumerate', 'C₃H₈O', '--count'])).stdout).toBe('3\n');
  });

  it('lists different structures of the right formula', async () => {
    const outcome = await cli.run(['enumerate', 'C5H8O', '--smiles']);
    const smiles = outcome.stdout.trimEnd().split('\n');
    // SCIENCE.md 2.6.
    expect(smiles).toHaveLength(205);
    expect(new Set(smiles.map(codeOf)).size).toBe(205);
    expect(new Set(smiles.map((text) => Molecule.fromSmiles(text).getMolecularFormula().formula))).toEqual(new Set(['C5H8O']));
    expect(outcome.stderr).toMatch(/205 constitutions/);
  });

  it('merges resonance forms unless told otherwise', async () => {
    // 1,2-Difluorobenzene: the bond between the C–F carbons is single in one Kekulé form and double in the other.
    const file = fileOf('ortho.json', { formula: 'C6H4F2', fragments: { required: [{ smiles: '*c1ccccc1*' }] } });
    expect(await countOf('enumerate', file)).toBe(1);
    expect(await countOf('enumerate', file, '--merge-resonance=false')).toBe(2);
    expect(await countOf('enumerate', file, '--merge-resonance=true')).toBe(1);
    expect((await cli.run(['enumerate', file, '--merge-resonance=maybe'])).stderr).toMatch(/^merge-resonance: expected true or false/);
  });

  it('applies no plausibility rules to a formula alone, but those of a document', async () => {
    const plain = await countOf('enumerate', 'C6H6');
    const document = await countOf('enumerate', fileOf('plausible.json', { formula: 'C6H6' }));
    const switchedOff = await countOf('enumerate', fileOf('all.json', { formula: 'C6H6', options: { plausibility: false } }));
    expect(switchedOff).toBe(plain);
    expect(document).toBeLessThan(plain);
  });

  it('says when a time limit stopped it, and prints what was found', async () => {
    const outcome = await cli.run(['enumerate', 'C14H22O', '--max-seconds', '0.5', '--json']);
    expect(outcome.exitCode).toBe(3);
    expect(outcome.json()).toMatchObject({ complete: false });
  });

  it('stops soon after Ctrl-C and prints what was found', async () => {
    const interrupt = new Interrupt();
    const running = cli.run(['enumerate', 'C14H22O', '--json'], { interrupt });
    await new Promise((resolve) => setTimeout(resolve, 3000));
    const asked = performance.now();
    interrupt.request();
    const outcome = await running;
    expect(performance.now() - asked).toBeLessThan(5000);
    expect(outcome.exitCode).toBe(3);
  });

  it.each([
    ['C9H11O2', /^formula: .*not a whole number.*H10 or H12/],
    ['C3H10', /^formula: .*at most H8/],
    ['C9H10Xx', /^formula: element "Xx" is not supported/],
    ['H2', /^formula: no heavy atom/],
    ['no/such/file.json', /^input: .*no such file/],
    ['missing.json', /^input: .*no such file/],
    ['missing.jsonl', /^input: .*no such file/],
  ])('refuses %s', async (argument, expected) => {
    const outcome = await cli.run(['enumerate', argument]);
    expect(outcome.exitCode).toBe(2);
    expect(outcome.stdout).toBe('');
    expect(outcome.stderr).toMatch(expected);
  });

  it('reports everything that is wrong with a document', async () => {
    const file = fileOf('bad.json', { formula: 'C2H6O', carbonSignals: [{ shift: 'x' }, { shift: 999 }] });
    const outcome = await cli.run(['enumerate', file, '--json']);
    expect(outcome.exitCode).toBe(2);
    expect(outcome.stderr).toBe(
      'carbonSignals[0].shift: expected a number between -50 and 300 ppm\ncarbonSignals[1].shift: expected a number between -50 and 300 ppm\n',
    );
    expect(outcome.json()).toEqual({
      error: {
        code: 'badInput',
        message: 'expected a number between -50 and 300 ppm',
        path: 'carbonSignals[0].shift',
        issues: [
          { path: 'carbonSignals[0].shift', message: 'expected a number between -50 and 300 ppm' },
          { path: 'carbonSignals[1].shift', message: 'expected a number between -50 and 300 ppm' },
        ],
      },
    });
  });

  it('refuses a file that is no JSON', async () => {
    expect((await cli.run(['enumerate', fileOf('text.json', '{"formula": ')])).stderr).toMatch(/^input: not valid JSON/);
  });
});

describe('isoloom rank', () => {
  it('puts p-cymene first, with the fields of the contract', async () => {
    const outcome = await cli.run(['rank', fileOf('cymene.json', CYMENE), '--top', '3', '--json']);
    expect(outcome.exitCode).toBe(0);
    const { candidates, ...rest } = outcome.json() as { candidates: Candidate[] };
    expect(rest).toMatchObject({ complete: true, count: expect.any(Number), funnel: expect.any(Array), seconds: expect.any(Number) });
    expect(codeOf(candidates[0].smiles)).toBe(codeOf('CC(C)c1ccc(C)cc1'));
    expect(candidates.length).toBeLessThanOrEqual(3);
    expect(candidates.map(({ rank }) => rank)).toEqual(candidates.map((_, i) => i + 1));
    expect(Object.keys(candidates[0]).sort()).toEqual(['idcode', 'probability', 'rank', 'score', 'smiles', 'terms']);
  });

  it('gives the same ranking on one thread and on two, and however many are asked for', async () => {
    const file = fileOf('acetate.json', {
      formula: 'C5H10O2',
      // Isopropyl acetate, same source as p-cymene.
      carbonSignals: [
        { shift: 170.63, hydrogens: 0 },
        { shift: 67.64, hydrogens: 1 },
        { shift: 21.84, hydrogens: 3, count: 2 },
        { shift: 21.42, hydrogens: 3 },
      ],
    });
    const rankingOf = async (...options: string[]): Promise<Candidate[]> =>
      (await cli.run(['rank', file, '--json', ...options])).json().candidates as Candidate[];
    const onTwo = await rankingOf('--threads', '2');
    expect(await rankingOf('--threads', '1')).toEqual(onTwo);
    expect(await rankingOf('--top', '2')).toEqual(onTwo.slice(0, 2));
    expect(codeOf(onTwo[0].smiles)).toBe(codeOf('CC(C)OC(C)=O'));
  });

  it('shows people a table and a caution', async () => {
    const outcome = await cli.run(['rank', fileOf('people.json', CYMENE), '--top', '1']);
    expect(outcome.stdout).toMatch(/C10H14: \d+ candidates?,/);
    expect(outcome.stdout).toMatch(/rank +probability +score/);
    expect(outcome.stdout).toMatch(/none of these: +\d/);
    expect(outcome.stderr).toMatch(/not an identification/);
  });
});

describe('batches', () => {
  const lines = [
    JSON.stringify({ id: 'a', evidence: { formula: 'C4H10O', options: { plausibility: false } } }),
    '{"formula": "C2H7O"}',
    'not json',
    '',
    JSON.stringify({ id: 'd', note: { any: 1 }, evidence: { formula: 'C3H8', carbonSignals: [{ shift: 'x' }] } }),
    JSON.stringify({ formula: 'C5H12' }),
  ];

  it('answers line by line in input order, passes keys through and goes on after bad lines', async () => {
    const outcome = await cli.run(['enumerate', fileOf('batch.jsonl', lines.join('\n'))]);
    const answers = outcome.jsonLines();
    expect(answers).toHaveLength(5);
    // C4H10O: SCIENCE.md 2.6.
    expect(answers[0]).toMatchObject({ id: 'a', count: 7 });
    expect(answers[1]).toMatchObject({ error: { code: 'badInput', path: 'formula' } });
    expect(answers[2]).toMatchObject({ error: { code: 'badInput', path: '' } });
    expect(answers[3]).toMatchObject({ id: 'd', note: { any: 1 }, error: { path: 'carbonSignals[0].shift' } });
    expect(answers[4]).toMatchObject({ count: 3 });
    expect(outcome.exitCode).toBe(2);
    expect(outcome.openedCount).toBe(1);
  });

  it('ranks a batch from standard input', async () => {
    const input = `${JSON.stringify({ id: 1, evidence: CYMENE })}\r\n${JSON.stringify({ id: 2, evidence: { formula: 'C2H6O' } })}`;
    const outcome = await cli.run(['rank', '-', '--top', '1', '--max-seconds', '60'], { input });
    expect(outcome.exitCode).toBe(0);
    expect(outcome.jsonLines().map(({ id, complete, candidates }) => [id, complete, (candidates as Candidate[]).length])).toEqual([
      [1, true, 1],
      [2, true, 1],
    ]);
  });

  it('predicts one SMILES a line', async () => {
    const outcome = await cli.run(['predict', '-'], { input: 'CCO ethanol\n\nC(\nC[Se]C\n*C\nCC(C)=O\n' });
    const answers = outcome.jsonLines();
    expect(outcome.exitCode).toBe(2);
    expect(answers).toHaveLength(5);
    expect(answers[0]).toMatchObject({
      name: 'ethanol',
      carbons: [
        { hydrogens: 2, atoms: [1] },
        { hydrogens: 3, atoms: [0] },
      ],
    });
    expect(answers[1]).toMatchObject({ smiles: 'C(', error: { code: 'badInput', path: 'smiles' } });
    expect(answers[2]).toMatchObject({ error: { code: 'badInput', path: 'smiles' } });
    expect(answers[3]).toMatchObject({ error: { code: 'badInput', path: 'smiles' } });
    expect((answers[4].carbons as unknown[]).length).toBe(2);
  });

  it('refuses an empty batch', async () => {
    const outcome = await cli.run(['rank', '-']);
    expect(outcome.exitCode).toBe(2);
    expect(outcome.stderr).toMatch(/^input: no lines to read/);
  });
});

describe('isoloom predict and estimate', () => {
  it('predicts a structure', async () => {
    const outcome = await cli.run(['predict', 'CC(=O)OCC', '--json']);
    const { carbons, protons } = outcome.json() as {
      carbons: { atoms: number[]; shift: number; sd: number; hydrogens: number }[];
      protons: { count: number; multiplicity: string }[];
    };
    expect(carbons.flatMap(({ atoms }) => atoms).sort()).toEqual([0, 1, 4, 5]);
    expect(protons.map(({ count, multiplicity }) => `${count}${multiplicity}`).sort()).toEqual(['2q', '3s', '3t']);
    const table = await cli.run(['predict', 'CC(=O)OCC']);
    expect(table.stdout).toMatch(/^13C, ppm\n/);
    expect(table.stdout).toMatch(/\n1H, ppm\n/);
  });

  it('refuses a structure that it cannot read', async () => {
    const outcome = await cli.run(['predict', 'c1cccn1']);
    expect(outcome.exitCode).toBe(2);
    expect(outcome.stderr).toMatch(/^smiles: position 6: .*\[nH\]/);
  });

  it('stops at a number of constitutions with exit code 3 and what was found', async () => {
    const stopped = await cli.run(['enumerate', 'C8H16O', '--max-count', '100', '--threads', '1', '--json']);
    expect(stopped.exitCode).toBe(3);
    expect(stopped.json()).toMatchObject({ count: 100, complete: false, cuts: [] });
    // Reference counts (oracles): 1684.
    const whole = await cli.run(['enumerate', 'C8H16O', '--max-count', '1684', '--json']);
    expect(whole.exitCode).toBe(0);
    expect(whole.json()).toMatchObject({ count: 1684, complete: true });
    const told = await cli.run(['rank', 'C8H16O', '--max-count', '100', '--top', '3']);
    expect(told.exitCode).toBe(3);
    expect(told.stdout).toContain('the list is incomplete');
  });

  it('estimates the whole cost of a ranking, and what would make it smaller', async () => {
    const outcome = await cli.run(['estimate', 'C9H10O2', '--mode', 'rank', '--json']);
    expect(outcome.exitCode).toBe(0);
    const { cpuSeconds, cpuSecondsLow, cpuSecondsHigh, hints, seconds } = outcome.json() as Record<string, number> & {
      hints: { kind: string; factor: number }[];
    };
    expect(cpuSecondsLow).toBeLessThan(cpuSeconds);
    expect(cpuSecondsHigh).toBeGreaterThan(cpuSeconds);
    expect(seconds).toBeLessThan(2.5);
    expect(hints.map(({ kind }) => kind)).toContain('attachedHydrogens');
    const told = await cli.run(['estimate', 'C20H30O5N2']);
    expect(told.stdout).toMatch(/constitutions .*\n.* on one core .*\nhopeless as it is/);
    expect((await cli.run(['estimate', 'C5H8', '--mode', 'list'])).exitCode).toBe(2);
  });

  it('estimates within its own interval of the truth', async () => {
    const outcome = await cli.run(['estimate', 'C7H14O', '--json']);
    const { estimate, low, high } = outcome.json() as Record<string, number>;
    expect(outcome.exitCode).toBe(0);
    expect(low).toBeLessThanOrEqual(estimate);
    expect(high).toBeGreaterThanOrEqual(estimate);
    // SCIENCE.md 2.6: 596.
    expect(low).toBeLessThanOrEqual(596);
    expect(high).toBeGreaterThanOrEqual(596);
  });
});

describe('the program itself', () => {
  it('explains itself', async () => {
    const help = await cli.run(['--help']);
    expect(help.exitCode).toBe(0);
    for (const command of ['formula', 'enumerate', 'estimate', 'predict', 'rank']) expect(help.stdout).toContain(command);
    expect((await cli.run([])).exitCode).toBe(2);
  });

  it.each([[['weave']], [['enumerate']], [['rank', 'a.json', '--tops', '3']], [['predict', 'C', 'C']]])(
    'refuses the arguments %j',
    async (args) => {
      const outcome = await cli.run([...args, '--json']);
      expect(outcome.exitCode).toBe(2);
      expect(outcome.stderr).toMatch(/^arguments: /);
      expect(outcome.json()).toMatchObject({ error: { code: 'badInput', path: 'arguments' } });
    },
  );

  it.each([
    ['enumerate', '--threads', '0'],
    ['enumerate', '--max-seconds', 'soon'],
    ['rank', '--top', '1.5'],
    ['estimate', '--seed', '-1'],
  ])('refuses %s %s %s', async (command, option, value) => {
    const outcome = await cli.run([command, 'C2H6', `${option}=${value}`]);
    expect(outcome.exitCode).toBe(2);
    expect(outcome.stderr).toMatch(new RegExp(`^${option.slice(2)}: expected a`));
  });

  it('owns up to its own faults with exit code 1', async () => {
    const broken: ComputeService = {
      threadCount: 1,
      runJob: () => Promise.reject(new WorkerCrash('out of memory')),
      close: () => Promise.resolve(),
    };
    const outcome = await cli.run(['enumerate', 'C2H6', '--json'], { compute: broken });
    expect(outcome.exitCode).toBe(1);
    expect(outcome.json()).toEqual({ error: { code: 'internal', message: 'out of memory', path: '' } });
  });

  it('keeps standard output to the JSON document when run as a program', () => {
    const start = (...args: string[]) =>
      spawnSync(process.execPath, ['--import', 'tsx', 'server/cli/main.ts', ...args], { encoding: 'utf8' });
    const counted = start('enumerate', 'C4H10O', '--json');
    expect(counted.status).toBe(0);
    expect(counted.stderr).toBe('');
    expect(JSON.parse(counted.stdout)).toMatchObject({ count: 7 });
    const refused = start('enumerate', 'C4H11O', '--json');
    expect(refused.status).toBe(2);
    expect(JSON.parse(refused.stdout)).toMatchObject({ error: { code: 'badInput', path: 'formula' } });
    expect(refused.stderr).toMatch(/^formula: /);
  }, 60_000);
});
