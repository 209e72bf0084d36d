import type { BranchCut, Funnel, FunnelStage } from '../../shared/jobs/contract.js';

const STAGE_NAMES: Readonly<Record<FunnelStage, string>> = {
  constitutions: 'constitutions',
  excludedFragments: 'excluded fragments',
  ringSizes: 'ring sizes',
  plausibility: 'plausibility',
  signals: 'signals',
  ranked: 'ranked',
};
/** Rejection reasons shown for each stage. */
const REASONS_SHOWN = 5;

/** Whole number with thin groups: 24 938. */
export function groupDigits(value: number): string {
  return String(value).replace(/\B(?=(\d{3})+$)/g, ' ');
}

/** A number with its noun: 1 candidate, 24 938 candidates. */
export const countOf = (value: number, noun: string, plural = `${noun}s`): string => `${groupDigits(value)} ${value === 1 ? noun : plural}`;

/** Columns padded to equal width; numbers (by column) to the right. Trailing blanks are cut. */
export function alignColumns(rows: ReadonlyArray<readonly string[]>, rightAligned: readonly number[] = []): string {
  const widths: number[] = [];
  for (const row of rows) row.forEach((cell, i) => (widths[i] = Math.max(widths[i] ?? 0, cell.length)));
  return rows
    .map((row) =>
      row
        .map((cell, i) => (rightAligned.includes(i) ? cell.padStart(widths[i]!) : cell.padEnd(widths[i]!)))
        .join('  ')
        .trimEnd(),
    )
    .map((line) => `${line}\n`)
    .join('');
}

/** How many constitutions each stage let through, and the most frequent reasons for the rest. */
export function describeFunnel(funnel: Funnel): string {
  const rows = funnel.flatMap(({ stage, passed, rejections }) => [
    [STAGE_NAMES[stage], groupDigits(passed), ''],
    ...rejections.slice(0, REASONS_SHOWN).map(({ text, count }) => ['', `−${groupDigits(count)}`, text]),
  ]);
  return alignColumns(rows, [1]);
}

/** Branches that were cut while structures were being built; nothing where none was. */
export function describeCuts(cuts: readonly BranchCut[]): string {
  if (cuts.length === 0) return '';
  const rows = cuts.map(({ text, count }) => ['', countOf(count, 'branch', 'branches'), text]);
  return `cut while building\n${alignColumns(rows, [1])}`;
}

export const formatSeconds = (seconds: number): string => `${seconds < 10 ? seconds.toFixed(2) : seconds.toFixed(1)} s`;
