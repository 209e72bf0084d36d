import type { ReactNode } from 'react';
import { StructureDrawing } from '../structure/structure-drawing';

/** A fragment as a picture with its name; a button when something can be done with it. */
export function FragmentTile({
  name,
  smiles,
  onPick,
  actionLabel,
  actions,
}: {
  name: string;
  smiles: string;
  onPick?: () => void;
  actionLabel?: string;
  actions?: ReactNode;
}) {
  const picture = (
    <>
      <StructureDrawing smiles={smiles} width={132} height={84} alt={smiles} />
      <span className="mt-1 line-clamp-2 min-h-9 text-center text-small leading-[18px]">{name}</span>
    </>
  );
  const look = 'flex w-full flex-col items-center rounded-panel border border-seam bg-cloth p-2';
  return (
    <div className="group/tile relative">
      {onPick === undefined ? (
        <div className={look}>{picture}</div>
      ) : (
        <button
          type="button"
          aria-label={actionLabel ?? name}
          className={`${look} transition-colors hover:border-indigo hover:bg-indigo-wash`}
          onClick={onPick}
        >
          {picture}
        </button>
      )}
      {actions === undefined ? null : <div className="absolute top-1 right-1">{actions}</div>}
    </div>
  );
}
