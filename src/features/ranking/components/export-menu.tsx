import { Download } from 'lucide-react';
import { useEffect, useId, useRef, useState } from 'react';
import { Button } from '../../../components/button';
import { callEndpoint, endpointUrl } from '../../../lib/api-client';
import { errorMessage } from '../../../lib/api-error';
import { formatCount } from '../../../lib/numbers';
import { showToast } from '../../../lib/toasts';

const FORMATS = [
  { format: 'sdf', name: 'SDF', detail: 'structures with coordinates (V2000) and figures' },
  { format: 'smiles', name: 'SMILES', detail: 'one structure a line, with rank' },
  { format: 'csv', name: 'CSV', detail: 'rank, SMILES, probability, terms, misfits' },
] as const;

/** Files of the kept candidates. */
export function ExportMenu({ runId, keptCount }: { runId: string; keptCount: number }) {
  const id = useId();
  const frame = useRef<HTMLDivElement>(null);
  const [isOpen, setIsOpen] = useState(false);
  useEffect(() => {
    if (!isOpen) return undefined;
    const onPointerDown = (event: PointerEvent) => {
      if (event.target instanceof Node && frame.current?.contains(event.target) !== true) setIsOpen(false);
    };
    document.addEventListener('pointerdown', onPointerDown);
    return () => document.removeEventListener('pointerdown', onPointerDown);
  }, [isOpen]);

  const save = async (format: (typeof FORMATS)[number]['format']) => {
    setIsOpen(false);
    try {
      // The browser fetches the file itself and cannot renew an old session: this call does it first.
      await callEndpoint('me');
    } catch (error) {
      showToast('problem', errorMessage(error));
      return;
    }
    window.location.assign(endpointUrl('exportCandidates', { params: { runId }, query: { format } }));
  };
  return (
    <div
      ref={frame}
      className="relative"
      onKeyDown={(event) => {
        if (event.key === 'Escape') setIsOpen(false);
      }}
      onBlur={(event) => {
        if (event.relatedTarget instanceof Node && !event.currentTarget.contains(event.relatedTarget)) setIsOpen(false);
      }}
    >
      <Button
        icon={<Download aria-hidden="true" className="size-4" />}
        aria-expanded={isOpen}
        aria-controls={id}
        onClick={() => setIsOpen(!isOpen)}
      >
        Export
      </Button>
      {isOpen ? (
        <ul
          id={id}
          aria-label={`Export ${formatCount(keptCount)} candidates as`}
          className="absolute right-0 z-20 mt-1 w-72 rounded-panel border border-selvage bg-cloth p-1"
        >
          {FORMATS.map(({ format, name, detail }) => (
            <li key={format}>
              <button type="button" className="w-full rounded-small px-3 py-1.5 text-left hover:bg-fold" onClick={() => void save(format)}>
                <span className="block font-semibold">{name}</span>
                <span className="block text-small text-faded">{detail}</span>
              </button>
            </li>
          ))}
        </ul>
      ) : null}
    </div>
  );
}
