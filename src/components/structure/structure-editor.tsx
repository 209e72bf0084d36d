import { lazy, Suspense } from 'react';
import { parseSmiles } from '../../../shared/chemistry/smiles';
import { showToast } from '../../lib/toasts';
import { TextInput } from '../field';
import { LoadingState } from '../states';
import { StructureDrawing } from './structure-drawing';

const LazySurface = lazy(async () => ({ default: (await import('./canvas-editor')).CanvasSurface }));

interface StructureEditorProps {
  label: string;
  /** SMILES; `*` for attachment points in a fragment. */
  value: string;
  onValueChange: (smiles: string) => void;
  /** A fragment has attachment points: atoms can be opened and closed below the surface. */
  kind?: 'structure' | 'fragment';
  error?: string | undefined;
  height?: number;
}

/** Draw a structure or write its SMILES; both show the same thing. The text field serves those who cannot use the surface. */
export function StructureEditor({ label, value, onValueChange, kind = 'structure', error, height = 340 }: StructureEditorProps) {
  const text = value.trim();
  const parsed = text === '' ? null : parseSmiles(text);
  const isReadable = parsed?.ok === true;
  const onAtomClick = async (atom: number) => {
    const { toggleAttachment } = await import('./attachment-points');
    const changed = toggleAttachment(value, atom);
    if (changed === value) showToast('note', 'This atom has no hydrogen that could make room for an open bond.');
    else onValueChange(changed);
  };
  return (
    <div className="space-y-3">
      <div role="group" aria-label={`${label}: drawing surface`} className="rounded-panel border border-selvage bg-cloth p-1">
        <Suspense fallback={<LoadingState label="Loading the drawing surface" className="h-80" />}>
          <LazySurface smiles={value} height={height} onDrawn={onValueChange} />
        </Suspense>
      </div>
      <TextInput
        label={`${label} as SMILES`}
        controlClassName="font-mono text-table"
        spellCheck={false}
        autoComplete="off"
        value={value}
        error={error ?? (parsed?.ok === false ? parsed.message : undefined)}
        hint={kind === 'fragment' ? 'Write * for each attachment point: *C(C)C is isopropyl, C=* asks for a double bond.' : undefined}
        onChange={(event) => onValueChange(event.target.value)}
      />
      {kind === 'fragment' && isReadable ? (
        <div className="flex flex-wrap items-center gap-4 rounded-panel border border-seam p-3">
          <StructureDrawing
            smiles={value}
            width={260}
            height={130}
            alt={`Attachment points of ${value}`}
            onAtomClick={(atom) => void onAtomClick(atom)}
            atomActionLabel={(atom, name) =>
              name === 'attachment point' ? 'Close this attachment point' : `Open a bond at ${name} ${atom + 1}`
            }
          />
          <p className="max-w-[36ch] min-w-0 grow basis-48 text-table text-faded">
            Choose an atom to open a bond there; choose a wave to close it again. Everything else stays as drawn, hydrogens included.
          </p>
        </div>
      ) : null}
    </div>
  );
}
