import { useId, useLayoutEffect, useRef, useState } from 'react';
import { HYBRIDISATIONS, type CarbonWindow } from '../../../../shared/schemas/evidence';
import { Button } from '../../../components/button';
import { Checkbox, Select } from '../../../components/field';
import { classNames } from '../../../lib/class-names';
import {
  DERIVED,
  describeWindow,
  heteroText,
  hybridisationName,
  NO_WINDOW,
  readWindowText,
  windowText,
  type WindowText,
} from '../lib/window-text';

const NUMBERS = ['0', '1', '2', '3', '4'].map((value) => ({ value, label: value }));
const EVERYTHING: CarbonWindow = { hybridisations: [...HYBRIDISATIONS], heteroNeighbours: { min: 0, max: 4 } };
const MARGIN_PX = 8;

interface WindowCellProps {
  /** Spoken name of the row: "row 3". */
  row: string;
  /** Shift as typed. */
  shift: string;
  text: WindowText;
  /** What the shift says; null while it is no number, or where windows are switched off. */
  derived: CarbonWindow | null;
  isReadOnly: boolean;
  onChange: (text: WindowText) => void;
}

/** What a signal says of its carbon, as a small button that opens it for editing. */
export function WindowCell({ row, shift, text, derived, isReadOnly, onChange }: WindowCellProps) {
  const id = useId();
  const button = useRef<HTMLButtonElement>(null);
  const panel = useRef<HTMLDivElement>(null);
  const [isOpen, setIsOpen] = useState(false);
  const own = readWindowText(text);
  const window = own === undefined ? derived : own;
  const source = own === undefined ? 'from the shift' : own === null ? 'switched off' : 'set by hand';
  const spoken = window === null ? (own === null ? 'none' : 'not used') : describeWindow(window);
  // Where it stands depends on how tall it is, which is known once it is filled.
  useLayoutEffect(() => {
    const at = button.current?.getBoundingClientRect();
    const box = panel.current;
    if (!isOpen || at === undefined || box === null) return;
    const fits = at.bottom + box.offsetHeight + MARGIN_PX <= innerHeight;
    box.style.top = `${fits ? at.bottom + 4 : Math.max(MARGIN_PX, at.top - box.offsetHeight - 4)}px`;
    box.style.left = `${Math.max(MARGIN_PX, Math.min(at.left, innerWidth - box.offsetWidth - MARGIN_PX))}px`;
    box.querySelector<HTMLElement>('input, select, button')?.focus();
  }, [isOpen]);
  return (
    <>
      <button
        ref={button}
        type="button"
        popoverTarget={id}
        aria-label={`Window, ${row}: ${spoken}, ${source}`}
        aria-expanded={isOpen}
        title={`${spoken}, ${source}`}
        className={classNames(
          'tabular flex h-7 w-full items-center gap-1 rounded-small border px-1.5 text-left text-small whitespace-nowrap hover:border-selvage',
          own === undefined ? 'border-dashed border-seam text-faded' : 'border-indigo text-ink',
        )}
      >
        {window === null ? <span>{own === null ? 'none' : '–'}</span> : <WindowChips window={window} />}
      </button>
      <div
        ref={panel}
        id={id}
        popover="auto"
        role="dialog"
        aria-label={`Window of the signal at ${shift} ppm`}
        onToggle={(event) => setIsOpen(event.newState === 'open')}
        className="fixed inset-auto m-0 w-[272px] rounded-panel border border-seam bg-cloth p-4 text-body text-ink"
      >
        {isOpen ? (
          <WindowEditor shift={shift} window={window} derived={derived} text={text} isReadOnly={isReadOnly} onChange={onChange} />
        ) : null}
      </div>
    </>
  );
}

/** Short enough for a cell: only what the window allows. */
function WindowChips({ window }: { window: CarbonWindow }) {
  const isAny = window.hybridisations.length === HYBRIDISATIONS.length;
  const hetero = heteroText(window);
  return (
    <>
      <span className="truncate">{isAny ? 'any' : window.hybridisations.map(hybridisationName).join(' ')}</span>
      {hetero === 'any' ? null : <span className="ml-auto shrink-0">X {hetero}</span>}
    </>
  );
}

function WindowEditor({
  shift,
  window,
  derived,
  text,
  isReadOnly,
  onChange,
}: Pick<WindowCellProps, 'shift' | 'derived' | 'text' | 'isReadOnly' | 'onChange'> & { window: CarbonWindow | null }) {
  const shown = window ?? EVERYTHING;
  const { hybridisations, heteroNeighbours } = shown;
  const set = (next: CarbonWindow) => onChange(windowText(next));
  const setMin = (min: number) => set({ ...shown, heteroNeighbours: { min, max: Math.max(min, heteroNeighbours.max) } });
  const setMax = (max: number) => set({ ...shown, heteroNeighbours: { min: Math.min(max, heteroNeighbours.min), max } });
  return (
    <fieldset disabled={isReadOnly} className="space-y-3">
      <legend className="mb-2 font-semibold">Carbon at δ {shift}</legend>
      <div role="group" aria-label="Hybridisation" className="flex gap-5">
        {HYBRIDISATIONS.map((name) => {
          const isOn = hybridisations.includes(name);
          return (
            <Checkbox
              key={name}
              label={hybridisationName(name)}
              checked={isOn}
              // A carbon has some hybridisation: the last one stays.
              disabled={isOn && hybridisations.length === 1}
              onChange={() =>
                set({
                  ...shown,
                  hybridisations: HYBRIDISATIONS.filter((other) => (other === name ? !isOn : hybridisations.includes(other))),
                })
              }
            />
          );
        })}
      </div>
      <div className="grid grid-cols-2 gap-3">
        <Select
          label="Heteroatoms from"
          options={NUMBERS}
          value={String(heteroNeighbours.min)}
          onValueChange={(value) => setMin(Number(value))}
        />
        <Select label="to" options={NUMBERS} value={String(heteroNeighbours.max)} onValueChange={(value) => setMax(Number(value))} />
      </div>
      <p className="text-small text-faded">
        {derived === null ? 'No window follows from this shift.' : `The shift says: ${describeWindow(derived)}.`}
      </p>
      {isReadOnly ? null : (
        <div className="flex gap-2">
          <Button size="small" disabled={text === DERIVED} onClick={() => onChange(DERIVED)}>
            As the shift says
          </Button>
          <Button size="small" disabled={text === NO_WINDOW} onClick={() => onChange(NO_WINDOW)}>
            No window
          </Button>
        </div>
      )}
    </fieldset>
  );
}
