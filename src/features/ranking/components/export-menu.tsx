import { Download } from 'lucide-react';
import { Menu, menuItemClass } from '../../../components/menu';
import { callEndpoint, endpointUrl } from '../../../lib/api-client';
import { errorMessage } from '../../../lib/api-error';
import { showToast } from '../../../lib/toasts';

const FORMATS = [
  { format: 'sdf', name: 'SDF', detail: 'structures with coordinates (V2000)' },
  { format: 'smiles', name: 'SMILES', detail: 'one structure a line' },
  { format: 'csv', name: 'CSV', detail: 'a table for a spreadsheet' },
] as const;
type Format = (typeof FORMATS)[number]['format'];

async function save(runId: string, format: Format): Promise<void> {
  try {
    // The browser fetches the file itself and cannot renew an old session: this call does it first.
    await callEndpoint('me');
  } catch (error) {
    showToast('problem', errorMessage(error));
    return;
  }
  window.location.assign(endpointUrl('exportCandidates', { params: { runId }, query: { format } }));
}

/** Files of the kept candidates. */
export function ExportMenu({ runId }: { runId: string }) {
  return (
    <Menu
      label="Export"
      placement="left-down"
      triggerClassName="inline-flex min-h-9 items-center gap-2 rounded-panel border border-selvage bg-cloth px-4 py-1.5 font-semibold hover:bg-fold"
      trigger={
        <>
          <Download aria-hidden="true" className="size-4" />
          Export
        </>
      }
    >
      {(close) =>
        FORMATS.map(({ format, name, detail }) => (
          <button
            key={format}
            type="button"
            className={menuItemClass}
            onClick={() => {
              close();
              void save(runId, format);
            }}
          >
            <span>
              <span className="block font-semibold">{name}</span>
              <span className="block text-small text-faded">{detail}</span>
            </span>
          </button>
        ))
      }
    </Menu>
  );
}
