import { Maximize2 } from 'lucide-react';
import { lazy, Suspense, useState } from 'react';
import { classNames } from '../../lib/class-names';
import { CopyButton } from '../copy-button';
import { Dialog } from '../dialog';
import { IconButton } from '../icon-button';

/** A glow behind atoms: indigo for selection and observed data, madder for conflict, weld for doubt. */
export interface AtomHalo {
  readonly atoms: readonly number[];
  readonly tone: 'indigo' | 'madder' | 'weld' | 'verdigris';
  readonly isFaint?: boolean;
}

export interface StructureDrawingProps {
  /** Atom numbers everywhere follow the order of atoms in this SMILES, from 0; people see them from 1. */
  smiles: string;
  /** Box in CSS pixels; the structure is fitted into it and never blown up beyond a readable size. */
  width?: number;
  height?: number;
  /** What the drawing shows, for screen readers; the SMILES when absent. */
  alt?: string;
  hasAtomNumbers?: boolean;
  halos?: readonly AtomHalo[];
  /** Atom under the pointer or with focus, null when it leaves. */
  onAtomHover?: (atom: number | null) => void;
  /** Makes every atom a button. */
  onAtomClick?: (atom: number) => void;
  atomActionLabel?: (atom: number, name: string) => string;
  className?: string;
}

const LazySvg = lazy(async () => ({ default: (await import('./structure-svg')).StructureSvg }));

/** A structure as crisp SVG in the ink of the theme. `isExpandable` adds a button to see it large, with atom numbers. */
export function StructureDrawing({ isExpandable = false, ...drawing }: StructureDrawingProps & { isExpandable?: boolean }) {
  const [isLarge, setIsLarge] = useState(false);
  const { width = 200, height = 150, className } = drawing;
  const svg = (
    <Suspense fallback={<div aria-hidden="true" className={className} style={{ width, height, maxWidth: '100%' }} />}>
      <LazySvg {...drawing} />
    </Suspense>
  );
  if (!isExpandable) return svg;
  return (
    <div className={classNames('group/drawing relative', className)} style={{ width, maxWidth: '100%' }}>
      {svg}
      <IconButton
        label="Show larger"
        icon={<Maximize2 className="size-3.5" />}
        className="absolute top-0 right-0 opacity-0 group-hover/drawing:opacity-100 focus-visible:opacity-100"
        onClick={() => setIsLarge(true)}
      />
      {isLarge ? (
        <Dialog
          title="Structure"
          width="wide"
          onClose={() => setIsLarge(false)}
          footer={<CopyButton text={drawing.smiles} label="Copy SMILES" />}
        >
          <div className="flex justify-center">
            <Suspense fallback={null}>
              <LazySvg {...drawing} width={880} height={520} hasAtomNumbers className="" />
            </Suspense>
          </div>
          <p className="mt-3 text-center font-mono text-small break-all text-faded">{drawing.smiles}</p>
        </Dialog>
      ) : null}
    </div>
  );
}
