import { CanvasEditor, Molecule } from 'openchemlib';
import { useEffect, useRef } from 'react';
import { ATTACHMENT, parseStructure, writeStructure } from './parse-structure';

/** The library's tool bar in CSS pixels; a lower surface would cut its last tools off. */
const TOOLBAR_HEIGHT = 364;

/** A SMILES for the surface, attachment points lettered as in the text. */
function moleculeFor(smiles: string): Molecule {
  if (smiles.trim() === '') return new Molecule(32, 32);
  const molecule = parseStructure(smiles);
  for (let atom = 0; atom < molecule.getAllAtoms(); atom++) {
    if (molecule.getAtomicNo(atom) === ATTACHMENT) molecule.setAtomCustomLabel(atom, '*');
  }
  return molecule;
}

/** The drawing surface; in its own chunk. `smiles` goes in when it differs from what was drawn last. */
export function CanvasSurface({ smiles, height, onDrawn }: { smiles: string; height: number; onDrawn: (smiles: string) => void }) {
  const host = useRef<HTMLDivElement>(null);
  const editor = useRef<CanvasEditor>(null);
  const lastDrawn = useRef<string | null>(null);
  const onDrawnRef = useRef(onDrawn);
  useEffect(() => {
    onDrawnRef.current = onDrawn;
  });

  useEffect(() => {
    if (host.current === null) return undefined;
    const created = new CanvasEditor(host.current, { initialMode: 'molecule' });
    editor.current = created;
    lastDrawn.current = null;
    created.setOnChangeListener((event) => {
      if (!event.isUserEvent || event.type !== 'molecule') return;
      const drawn = writeStructure(created.getMolecule());
      lastDrawn.current = drawn;
      onDrawnRef.current(drawn);
    });
    return () => {
      created.removeOnChangeListener();
      created.destroy();
      editor.current = null;
    };
  }, []);

  useEffect(() => {
    if (editor.current === null || smiles === lastDrawn.current) return;
    try {
      editor.current.setMolecule(moleculeFor(smiles));
      lastDrawn.current = smiles;
    } catch {
      // Half-typed text: the last drawing stays, and the text field says what is wrong.
      lastDrawn.current = null;
    }
  }, [smiles]);

  // The library draws on white only; in the dark its picture is turned around, hues kept.
  return (
    <div
      ref={host}
      className="w-full overflow-hidden rounded-small dark:hue-rotate-180 dark:invert-[0.88]"
      style={{ height: Math.max(height, TOOLBAR_HEIGHT) }}
    />
  );
}
