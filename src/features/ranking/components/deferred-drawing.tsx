import { useEffect, useState } from 'react';
import { StructureDrawing } from '../../../components/structure/structure-drawing';

/** Laying out a structure takes a few milliseconds: rows that only fly past while scrolling are not drawn. */
const DRAW_AFTER_MS = 70;

export function DeferredDrawing({ smiles, width, height, alt }: { smiles: string; width: number; height: number; alt: string }) {
  const [isDue, setIsDue] = useState(false);
  useEffect(() => {
    const timer = setTimeout(() => setIsDue(true), DRAW_AFTER_MS);
    return () => clearTimeout(timer);
  }, []);
  if (!isDue) return <div aria-hidden="true" style={{ width, height, maxWidth: '100%' }} />;
  return <StructureDrawing smiles={smiles} width={width} height={height} alt={alt} />;
}
