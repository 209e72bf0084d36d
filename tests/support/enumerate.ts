import { evidenceDocument, type EvidenceInput } from '../../shared/schemas/evidence.js';
import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { constitutionKey } from '../../workers/graph/constitution-key.js';
import { createSearch, enumerateShard, planShards } from '../../workers/enumeration/search.js';

/** Runs a whole search in this thread and returns counts, and on request keys and copies of the graphs. */
export function enumerateAll(
  input: EvidenceInput,
  options: { shards?: number; keep?: boolean; order?: (indexes: number[]) => number[] } = {},
): { constitutions: number; multigraphs: number; keys: string[]; graphs: MolecularGraph[]; shardCount: number } {
  // Counts are of everything that the formula allows, unless a test asks for the rules.
  const evidence = evidenceDocument.parse({ ...input, options: { plausibility: false, ...input.options } });
  const search = createSearch(evidence);
  const shards = planShards(search, options.shards ?? 1);
  const indexes = shards.map((_, index) => index);
  let constitutions = 0;
  let multigraphs = 0;
  const keys: string[] = [];
  const graphs: MolecularGraph[] = [];
  for (const index of options.order?.(indexes) ?? indexes) {
    enumerateShard(search, shards[index], {
      onConstitution(graph) {
        constitutions++;
        if (options.keep !== true) return;
        keys.push(constitutionKey(graph, evidence.options.mergeResonanceForms));
        graphs.push(copyGraph(graph));
      },
      onMultigraphs: (count) => (multigraphs += count),
      shouldStop: () => false,
      stopRequested: () => false,
    });
  }
  return { constitutions, multigraphs, keys, graphs, shardCount: shards.length };
}

export function copyGraph(graph: MolecularGraph): MolecularGraph {
  return {
    atomCount: graph.atomCount,
    atomicNumbers: graph.atomicNumbers.slice(),
    hydrogens: graph.hydrogens.slice(),
    charges: graph.charges.slice(),
    bondOrders: graph.bondOrders.slice(),
  };
}
