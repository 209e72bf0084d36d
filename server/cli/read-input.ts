import { createReadStream } from 'node:fs';
import { readFile, stat } from 'node:fs/promises';
import { parseEvidence } from '../../shared/chemistry/check-evidence.js';
import { checkFormula, formatHill, parseFormula } from '../../shared/chemistry/formula.js';
import { evidenceDocument, type EvidenceDocument } from '../../shared/schemas/evidence.js';
import { BadInputError } from './cli-error.js';
import type { CliContext } from './cli-context.js';

const MAX_DOCUMENT_BYTES = 4_000_000;
const MAX_LINE_LENGTH = 1_000_000;

/** What a command line argument stands for. */
export type InputKind = 'formula' | 'document' | 'batch';

/** A file of one document a line, or standard input, is a batch; what ends in .json is a document; the rest a formula. */
export function kindOfInput(argument: string): InputKind {
  if (argument === '-' || /\.(jsonl|ndjson)$/i.test(argument)) return 'batch';
  return /\.json$/i.test(argument) || /[/\\]/.test(argument) ? 'document' : 'formula';
}

/** Evidence of a formula alone: nothing observed, no plausibility rules. */
export function evidenceOfFormula(text: string): EvidenceDocument {
  const issues = checkFormula(text);
  if (issues.length > 0) throw new BadInputError(issues);
  const parsed = parseFormula(text);
  return evidenceDocument.parse({ formula: parsed.ok ? formatHill(parsed.counts) : text, options: { plausibility: false } });
}

export interface ReadEvidence {
  readonly evidence: EvidenceDocument;
  readonly notes: readonly string[];
}

/** Checks an evidence document that was JSON. */
export function evidenceOfJson(json: unknown): ReadEvidence {
  const read = parseEvidence(json);
  if (!read.ok) throw new BadInputError(read.issues);
  return { evidence: read.document, notes: read.notes };
}

function parseJson(text: string, path: string): unknown {
  try {
    return JSON.parse(text) as unknown;
  } catch (error) {
    throw new BadInputError([
      {
        path,
        message: `not valid JSON (${error instanceof Error ? error.message : 'unreadable'}); expected an evidence document such as {"formula": "C9H10O2"}`,
      },
    ]);
  }
}

function unreadable(path: string, error: unknown): BadInputError {
  const code = (error as NodeJS.ErrnoException).code;
  const reason =
    code === 'ENOENT' ? 'no such file' : code === 'EISDIR' ? 'is a folder' : code === 'EACCES' ? 'not readable' : String(error);
  return new BadInputError([
    { path: 'input', message: `${path}: ${reason}; expected the path of an evidence document, or a formula such as C9H10O2` },
  ]);
}

/** Reads the evidence document of a file. */
export async function readEvidenceFile(path: string): Promise<ReadEvidence> {
  let text: string;
  try {
    const { size } = await stat(path);
    if (size > MAX_DOCUMENT_BYTES)
      throw new BadInputError([
        { path: 'input', message: `${path} is larger than ${MAX_DOCUMENT_BYTES / 1e6} MB; expected one evidence document` },
      ]);
    text = await readFile(path, 'utf8');
  } catch (error) {
    throw error instanceof BadInputError ? error : unreadable(path, error);
  }
  return evidenceOfJson(parseJson(text, 'input'));
}

/** Reads a formula or a file, whichever the argument is. */
export async function readEvidenceArgument(argument: string): Promise<ReadEvidence> {
  return kindOfInput(argument) === 'formula' ? { evidence: evidenceOfFormula(argument), notes: [] } : readEvidenceFile(argument);
}

/** One line of a batch: the document itself, or an object with an `evidence` key. */
export function evidenceOfLine(line: string): ReadEvidence {
  const json = parseJson(line, '');
  return evidenceOfJson(isWrapper(json) ? json.evidence : json);
}

/** Keys beside `evidence`, which are passed through; none where a line is no such object. */
export function passedThrough(line: string): Record<string, unknown> {
  let json: unknown;
  try {
    json = JSON.parse(line);
  } catch {
    // `evidenceOfLine` reports it.
    return {};
  }
  if (!isWrapper(json)) return {};
  const { evidence: _evidence, ...others } = json;
  return others;
}

function isWrapper(json: unknown): json is Record<string, unknown> {
  return typeof json === 'object' && json !== null && !Array.isArray(json) && 'evidence' in json;
}

/** Lines of a file, or of standard input for `-`, without blank ones; nothing is read ahead of what is asked for. */
export async function* readLines(argument: string, context: CliContext): AsyncGenerator<string> {
  const source: AsyncIterable<string | Buffer> = argument === '-' ? context.input : createReadStream(argument);
  const decoder = new TextDecoder();
  let rest = '';
  try {
    for await (const piece of source) {
      rest += typeof piece === 'string' ? piece : decoder.decode(piece, { stream: true });
      const lines = rest.split(/\r\n|\n/);
      rest = lines.pop() ?? '';
      if (rest.length > MAX_LINE_LENGTH)
        throw new BadInputError([
          { path: 'input', message: `a line is longer than ${MAX_LINE_LENGTH} characters; expected one document a line` },
        ]);
      for (const line of lines) if (line.trim() !== '') yield line;
    }
  } catch (error) {
    throw error instanceof BadInputError ? error : unreadable(argument, error);
  }
  if (rest.trim() !== '') yield rest;
}
