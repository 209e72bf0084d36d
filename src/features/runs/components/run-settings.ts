import { EVIDENCE_LIMITS } from '../../../../shared/schemas/evidence';
import { formatCount } from '../../../lib/numbers';

export interface RunSettingsDraft {
  /** null = empty field, NaN = no number. */
  readonly keep: number | null;
  readonly maxSeconds: number | null;
  readonly maxConstitutions: number | null;
}
export interface RunSettingsCheck {
  readonly keep: string | undefined;
  readonly maxSeconds: string | undefined;
  readonly maxConstitutions: string | undefined;
}

/**
 * What is wrong with the settings of a run, field by field.
 *
 * @param candidatesPerRun - the quota; a run may not keep more.
 */
export function checkRunSettings(draft: RunSettingsDraft, candidatesPerRun: number): RunSettingsCheck {
  const most = Math.min(EVIDENCE_LIMITS.keep, candidatesPerRun);
  const isKeepGood = draft.keep !== null && Number.isInteger(draft.keep) && draft.keep >= 1 && draft.keep <= most;
  const isTimeGood = draft.maxSeconds === null || (draft.maxSeconds >= 1 && draft.maxSeconds <= EVIDENCE_LIMITS.seconds);
  const { maxConstitutions } = draft;
  const isCountGood =
    maxConstitutions === null ||
    (Number.isInteger(maxConstitutions) && maxConstitutions >= 1 && maxConstitutions <= EVIDENCE_LIMITS.constitutions);
  return {
    keep: isKeepGood ? undefined : `expected a whole number between 1 and ${formatCount(most)}, the most your quota allows`,
    maxSeconds: isTimeGood ? undefined : `expected 1 to ${formatCount(EVIDENCE_LIMITS.seconds)} seconds, or nothing for no limit`,
    maxConstitutions: isCountGood ? undefined : 'expected a whole number from 1 on, or nothing for no limit',
  };
}

/** Names of the figures that the server gives for a refusal. */
const FIGURE_NAMES: Readonly<Record<string, string>> = {
  usedCpuSeconds: 'CPU time used this month',
  reservedCpuSeconds: 'CPU time reserved by running runs',
  cpuSecondsPerMonth: 'CPU time a month',
  limitCpuSeconds: 'CPU time a month',
  candidatesPerRun: 'Candidates a run',
  keep: 'Candidates asked for',
  runsAtOnce: 'Runs at once',
  runningCount: 'Runs going on',
};

/** `limitCpuSeconds: 3600` as "CPU time a month" and its value; a name not known here is spelt out. */
export function describeFigure(name: string, value: number): { readonly label: string; readonly value: string } {
  const spelt = name.replace(/([A-Z])/g, (letter) => ` ${letter.toLowerCase()}`);
  const label = FIGURE_NAMES[name] ?? spelt.charAt(0).toUpperCase() + spelt.slice(1);
  const isTime = /seconds/i.test(name);
  return { label, value: isTime ? `${formatCount(value)}\u2009s` : formatCount(value) };
}
