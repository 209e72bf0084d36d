import type { PredictedSpectra } from '../../../shared/jobs/contract.js';
import type { ComputeService } from '../../compute/compute-service.js';
import { runBatch } from '../batch.js';
import type { CliContext } from '../cli-context.js';
import { EXIT, type ExitCode } from '../cli-error.js';
import { abortable } from '../local-run.js';
import { OptionReader, type RawOptions } from '../options.js';
import { alignColumns } from '../text-output.js';
import { withCompute } from '../with-compute.js';

/** Lines that wait for their prediction: enough to keep the thread busy. */
const LINES_UNDER_WAY = 32;

/** `isoloom predict`: 13C and 1H signals of a structure, or of one SMILES a line from standard input. */
export async function predictCommand(argument: string, raw: RawOptions, context: CliContext): Promise<ExitCode> {
  const options = new OptionReader(raw);
  const solvent = options.text('solvent') ?? 'CDCl3';
  const predict = (compute: ComputeService, smiles: string) =>
    abortable(context.interrupt, (signal) => compute.runJob('predict', { smiles, solvent }, { signal }));

  return withCompute(context, 1, async (compute) => {
    if (argument === '-') {
      return runBatch(
        argument,
        context,
        async (line) => {
          const { smiles, name } = splitLine(line);
          return { document: { ...name, ...(await predict(compute, smiles)) }, exitCode: EXIT.done };
        },
        (line) => ({ ...splitLine(line).name, smiles: splitLine(line).smiles }),
        LINES_UNDER_WAY,
      );
    }
    const predicted = await predict(compute, argument.trim());
    if (options.has('json')) await context.write(`${JSON.stringify(predicted)}\n`);
    else {
      for (const note of predicted.notes) context.tell(`note: ${note}\n`);
      await context.write(describeSpectra(predicted));
    }
    return EXIT.done;
  });
}

/** SMILES files often carry a name behind the SMILES; it is passed through. */
function splitLine(line: string): { smiles: string; name: { name?: string } } {
  const [smiles = '', ...words] = line.trim().split(/\s+/);
  return { smiles, name: words.length === 0 ? {} : { name: words.join(' ') } };
}

function describeSpectra({ carbons, protons }: PredictedSpectra): string {
  const carbonRows = carbons.map(({ atoms, shift, sd, hydrogens, basis }) => [
    shift.toFixed(1),
    `± ${sd.toFixed(1)}`,
    `CH${hydrogens}`.replace('CH0', 'C').replace('CH1', 'CH'),
    atoms.join(','),
    basis,
  ]);
  const protonRows = protons.map(({ atoms, shift, sd, count, multiplicity, couplings, basis }) => [
    shift.toFixed(2),
    `± ${sd.toFixed(2)}`,
    `${count} H`,
    multiplicity,
    couplings.map((coupling) => coupling.toFixed(1)).join(', '),
    atoms.join(','),
    basis,
  ]);
  return `13C, ppm\n${alignColumns([['shift', '', 'type', 'atoms', 'basis'], ...carbonRows], [0])}\n1H, ppm\n${alignColumns([['shift', '', 'count', 'pattern', 'J / Hz', 'atoms', 'basis'], ...protonRows], [0])}`;
}
