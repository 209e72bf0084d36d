import { existsSync, readFileSync } from 'node:fs';
import { resolve } from 'node:path';
import { gunzipSync } from 'node:zlib';
import { parseSmiles } from '../../shared/chemistry/smiles.js';
import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { MAX_ATOMS } from '../../workers/graph/analysis.js';

/** Folder of the open NMR data (nmrshiftdb2), beside the checkout; it is never part of it. */
const DATA_FOLDER = resolve(import.meta.dirname, '../../../shared/data/nmr');

export interface ObservedCarbon {
  readonly shift: number;
  readonly hydrogens: number | null;
  readonly nAtoms: number | null;
  readonly atoms: readonly number[] | null;
}
export interface ObservedProton {
  readonly shift: number;
  readonly count: number | null;
  readonly multiplicity: string | null;
  readonly atoms: readonly number[] | null;
}
export interface NmrRecord {
  readonly id: number;
  readonly inchikey: string;
  readonly smiles: string;
  readonly heavyAtoms: number;
  readonly carbonAssignment: string | null;
  readonly carbonsComplete: boolean | null;
  readonly protonsComplete: boolean | null;
  readonly carbons: readonly ObservedCarbon[] | null;
  readonly protons: readonly ObservedProton[] | null;
  readonly graph: MolecularGraph;
  /** 0–9 by the skeleton part of the InChIKey, so that stereoisomers stay together. */
  readonly fold: number;
}

/** FNV-1a over the first 14 characters of an InChIKey, modulo 10. */
export function foldOf(inchikey: string): number {
  let hash = 0x811c9dc5;
  for (let i = 0; i < 14; i++) hash = Math.imul(hash ^ inchikey.charCodeAt(i), 0x01000193) >>> 0;
  return hash % 10;
}

/** Reads a data file; null when the data are not there. Records that the product would refuse are left out. */
export function readNmrData(file: 'train.jsonl.gz' | 'cases-train.jsonl.gz'): NmrRecord[] | null {
  const path = resolve(DATA_FOLDER, file);
  if (!existsSync(path)) return null;
  const records: NmrRecord[] = [];
  for (const line of gunzipSync(readFileSync(path)).toString('utf8').split('\n')) {
    if (line === '') continue;
    const record = JSON.parse(line) as Omit<NmrRecord, 'graph' | 'fold'>;
    if (record.heavyAtoms > MAX_ATOMS) continue;
    const parsed = parseSmiles(record.smiles);
    if (!parsed.ok || parsed.graph.atomCount !== record.heavyAtoms || parsed.attachments.length > 0) continue;
    records.push({ ...record, graph: parsed.graph, fold: foldOf(record.inchikey) });
  }
  return records;
}
