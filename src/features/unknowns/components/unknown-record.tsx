import { ChevronDown } from 'lucide-react';
import { useState } from 'react';
import { Formula } from '../../../components/chemistry-text';
import { Badge } from '../../../components/status-word';
import { Time } from '../../../components/time';
import { classNames } from '../../../lib/class-names';
import type { UnknownDetail } from '../../../lib/unknown-queries';
import { KnownEvidence } from './known-evidence';
import { RecordActions, RecordStatus } from './record-actions';
import { RegulatedCaution } from './regulated-caution';

/** Left side of an unknown: who it is and what is known. On a phone it folds above the work. */
export function UnknownRecord({ unknown }: { unknown: UnknownDetail }) {
  const [isOpen, setIsOpen] = useState(false);
  return (
    <aside aria-label="Record" className="desk:sticky desk:top-7 desk:max-h-[calc(100dvh-3.5rem)] desk:overflow-y-auto desk:pr-1">
      <p className="flex flex-wrap items-center gap-2 text-faded">
        <span className="font-mono text-table">{unknown.code}</span>
        {unknown.isDemo ? <Badge tone="weld">Invented data</Badge> : null}
      </p>
      <h1 className="mt-0.5 text-title break-words">{unknown.title}</h1>
      <div className="mt-1 flex flex-wrap items-center justify-between gap-x-4 gap-y-2">
        {unknown.formula === null ? (
          <span className="text-faded">No formula yet</span>
        ) : (
          <Formula formula={unknown.formula} className="text-lead" />
        )}
        <div className="min-w-0">
          <RecordStatus unknown={unknown} />
        </div>
      </div>
      <button
        type="button"
        aria-expanded={isOpen}
        aria-controls="record-body"
        className="mt-3 flex w-full items-center justify-between border-y border-seam py-2 text-table font-semibold desk:hidden"
        onClick={() => setIsOpen(!isOpen)}
      >
        What we know
        <ChevronDown aria-hidden="true" className={classNames('size-4 transition-transform', isOpen && 'rotate-180')} />
      </button>
      <div id="record-body" className={classNames('mt-4 space-y-5 desk:block', !isOpen && 'hidden')}>
        <RecordActions unknown={unknown} />
        <section aria-label="What we know" className="border-t border-seam pt-4">
          <h2 className="mb-2 hidden text-body desk:block">What we know</h2>
          <KnownEvidence unknown={unknown} />
        </section>
        {unknown.purpose === 'regulated' ? <RegulatedCaution /> : null}
        {unknown.description === '' ? null : (
          <section aria-label="Description" className="border-t border-seam pt-4">
            <p className="text-table whitespace-pre-line">{unknown.description}</p>
          </section>
        )}
        <p className="border-t border-seam pt-3 text-small text-faded">
          Created by {unknown.createdBy.name}, <Time iso={unknown.createdAt} isDayOnly />
          <br />
          Changed <Time iso={unknown.updatedAt} />
        </p>
      </div>
    </aside>
  );
}
