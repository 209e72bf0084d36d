import { findFormulas, FORMULA_SEARCH_LIMITS } from '../../../shared/chemistry/formula-search.js';
import type { CliContext } from '../cli-context.js';
import { BadInputError, EXIT, type ExitCode } from '../cli-error.js';
import { OptionReader, type RawOptions } from '../options.js';
import { alignColumns } from '../text-output.js';

const DEFAULT_PPM = 5;
const DEFAULT_LIMIT = 50;

/** `isoloom formula`: molecular formulas for an accurate mass. */
export async function formulaCommand(raw: RawOptions, context: CliContext): Promise<ExitCode> {
  const options = new OptionReader(raw);
  const mz = options.number('mz', 'mz', 1, FORMULA_SEARCH_LIMITS.mz);
  const ppm = options.number('ppm', 'ppm', 0.01, FORMULA_SEARCH_LIMITS.ppm) ?? DEFAULT_PPM;
  const limit = options.number('limit', 'limit', 1, FORMULA_SEARCH_LIMITS.candidates, 'whole number') ?? DEFAULT_LIMIT;
  if (options.text('mz') === undefined) options.report('mz', 'expected the observed m/z, as in --mz 151.0754');
  options.check();

  // Text that is no number becomes NaN, which the search refuses with the right field.
  const isotopes = options
    .text('isotopes')
    ?.split(/[,;]/)
    .map((height) => (height.trim() === '' ? NaN : Number(height)));
  const elements = options.text('elements')?.match(/[A-Z][a-z]?|[^\s,A-Z]+/g);
  const result = findFormulas({
    mz: mz!,
    adduct: options.text('adduct') ?? '[M+H]+',
    ppm,
    limit,
    ...(isotopes === undefined ? {} : { isotopes }),
    ...(elements === undefined || elements === null ? {} : { elements }),
  });
  if (!result.ok) throw new BadInputError(result.issues);
  if (options.has('json')) {
    await context.write(`${JSON.stringify({ candidates: result.candidates })}\n`);
    return EXIT.done;
  }
  if (result.candidates.length === 0) {
    await context.write('no formula in the window; widen --ppm or check the ion given by --adduct\n');
    return EXIT.done;
  }
  const rows = result.candidates.map(({ formula, ppm: deviation, unsaturation, score, remarks }) => [
    formula,
    deviation.toFixed(2),
    String(unsaturation),
    score.toFixed(2),
    remarks.join('; '),
  ]);
  await context.write(alignColumns([['formula', 'ppm', 'unsaturation', 'score', 'remarks'], ...rows], [1, 2, 3]));
  return EXIT.done;
}
