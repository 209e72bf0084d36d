import { once } from 'node:events';
import type { Response } from 'express';
import type { z } from 'zod';
import { EVIDENCE_LIMITS } from '../../../shared/schemas/evidence.js';
import type { exportQuery } from '../../../shared/schemas/runs.js';
import type { AppContext } from '../../app-context.js';
import { layOutStructures } from '../../commands/lay-out-structures.js';
import { ConflictError } from '../../errors.js';
import { EXPORT_TYPES, exportCandidates, exportFileName } from '../../exports/export-candidates.js';
import type { Run } from '../../models/run.js';
import { listByRank } from '../../queries/candidates.js';

/** Sends the candidates of a run as a file, piece by piece. */
export async function sendCandidates(
  context: AppContext,
  run: Run,
  { format, limit }: z.output<typeof exportQuery>,
  response: Response,
): Promise<void> {
  if (run.keptCount === 0) throw new ConflictError('noCandidates', 'This run has no candidates to export.');
  const origin = { code: run.unknown?.code ?? 'unknown', runNumber: run.number, complete: run.complete };
  const pieces = exportCandidates(
    { origin, read: (start, count) => listByRank(run.id, start, count), layOut: (smiles) => layOutStructures(context, smiles) },
    format,
    limit ?? EVIDENCE_LIMITS.keep,
  );
  // The first piece before the headers: a failure up to there is answered as such.
  let piece = await pieces.next();
  response.setHeader('Content-Disposition', `attachment; filename="${exportFileName(origin, format)}"`);
  response.setHeader('Content-Type', EXPORT_TYPES[format].contentType);
  while (piece.done !== true && !response.destroyed) {
    if (!response.write(piece.value)) await Promise.race([once(response, 'drain'), once(response, 'close')]);
    piece = await pieces.next();
  }
  response.end();
}
