import initRDKitModule, { type MainModule } from '@rdkit/rdkit';
import { elementOf } from '../../shared/chemistry/elements.js';
import type { MolecularGraph } from '../../shared/types/molecular-graph.js';

let loading: Promise<MainModule> | null = null;

/** RDKit as an independent reference; loaded once a test file. */
export function loadRdkit(): Promise<MainModule> {
  loading ??= initRDKitModule();
  return loading;
}

/** Valence of an atom whose hydrogens do not follow from the default one (P–H of phosphorus 5); 0 = they do. */
function writtenValence({ atomCount: n, atomicNumbers, hydrogens, bondOrders }: MolecularGraph, atom: number): number {
  if (atomicNumbers[atom] !== 15 || hydrogens[atom] === 0) return 0;
  return bondOrders.subarray(atom * n, (atom + 1) * n).reduce((sum, order) => sum + order, hydrogens[atom]);
}

/** V2000 molfile without coordinates. */
export function molfileOf(graph: MolecularGraph): string {
  const n = graph.atomCount;
  const bonds: string[] = [];
  const charges: string[] = [];
  const column = (value: number): string => String(value).padStart(3);
  for (let i = 0; i < n; i++) {
    if (graph.charges[i] !== 0) charges.push(`${String(i + 1).padStart(4)}${String(graph.charges[i]).padStart(4)}`);
    for (let j = i + 1; j < n; j++) {
      const order = graph.bondOrders[i * n + j];
      if (order !== 0) bonds.push(`${column(i + 1)}${column(j + 1)}${column(order)}  0`);
    }
  }
  const atoms = Array.from(
    graph.atomicNumbers,
    (z, i) =>
      `    0.0000    0.0000    0.0000 ${elementOf(z).symbol.padEnd(3)} 0  0  0  0  0${column(writtenValence(graph, i))}  0  0  0  0  0  0`,
  );
  const charged = charges.length === 0 ? [] : [`M  CHG${column(charges.length)}${charges.join('')}`];
  return [
    '',
    '',
    '',
    `${column(n)}${column(bonds.length)}  0  0  0  0  0  0  0  0999 V2000`,
    ...atoms,
    ...bonds,
    ...charged,
    'M  END',
    '',
  ].join('\n');
}

/** RDKit's canonical SMILES of a graph, aromatic rings perceived. */
export function rdkitSmiles(rdkit: MainModule, graph: MolecularGraph): string {
  const molecule = rdkit.get_mol(molfileOf(graph));
  if (molecule === null) throw new Error('RDKit cannot read the molecule');
  const smiles = molecule.get_smiles();
  molecule.delete();
  return smiles;
}
