import { EVIDENCE_LIMITS } from '../../shared/schemas/evidence.js';
import type { InputIssue } from '../../shared/schemas/problem.js';
import { BadInputError } from './cli-error.js';

/** Options as text, before anything is checked: every wrong one is reported, not only the first. */
export type RawOptions = Readonly<Record<string, string | boolean | undefined>>;

export const MAX_THREADS = 256;
export const MAX_SECONDS = EVIDENCE_LIMITS.seconds;
export const MAX_COUNT = EVIDENCE_LIMITS.constitutions;

/** Reads the options of one command and gathers what is wrong with them. */
export class OptionReader {
  readonly #raw: RawOptions;
  readonly #issues: InputIssue[] = [];

  constructor(raw: RawOptions) {
    this.#raw = raw;
  }

  has(name: string): boolean {
    return this.#raw[name] === true;
  }

  text(name: string): string | undefined {
    const value = this.#raw[name];
    return typeof value === 'string' ? value : undefined;
  }

  /** @param flag - name as people type it, for the message. */
  number(name: string, flag: string, low: number, high: number, kind: 'number' | 'whole number' = 'number'): number | undefined {
    const text = this.text(name);
    if (text === undefined) return undefined;
    const value = text.trim() === '' ? NaN : Number(text);
    if (Number.isFinite(value) && value >= low && value <= high && (kind === 'number' || Number.isInteger(value))) return value;
    this.report(flag, `expected a ${kind} between ${low} and ${high}`);
    return undefined;
  }

  boolean(name: string, flag: string): boolean | undefined {
    const value = this.#raw[name];
    if (value === undefined || typeof value === 'boolean') return value;
    if (value === 'true' || value === 'false') return value === 'true';
    this.report(flag, 'expected true or false');
    return undefined;
  }

  report(path: string, message: string): void {
    this.#issues.push({ path, message });
  }

  /** @throws BadInputError with every issue found so far. */
  check(): void {
    if (this.#issues.length > 0) throw new BadInputError(this.#issues);
  }
}
