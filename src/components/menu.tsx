import { useEffect, useId, useRef, useState, type ReactNode } from 'react';
import { classNames } from '../lib/class-names';

interface MenuProps {
  /** Name of the button for screen readers. */
  label: string;
  trigger: ReactNode;
  triggerClassName?: string;
  /** Where the panel opens. */
  placement: 'right-up' | 'left-down' | 'right-down';
  children: (close: () => void) => ReactNode;
}

const PLACEMENTS = { 'right-up': 'left-full bottom-0 ml-2', 'left-down': 'right-0 top-full mt-1', 'right-down': 'left-0 top-full mt-1' };

/** A button that discloses links and choices; Escape and a click elsewhere close it. */
export function Menu({ label, trigger, triggerClassName, placement, children }: MenuProps) {
  const [isOpen, setIsOpen] = useState(false);
  const root = useRef<HTMLDivElement>(null);
  const button = useRef<HTMLButtonElement>(null);
  const panelId = useId();
  const close = () => setIsOpen(false);
  useEffect(() => {
    if (!isOpen) return undefined;
    const onPointerDown = (event: PointerEvent) => {
      if (event.target instanceof Node && root.current?.contains(event.target) !== true) setIsOpen(false);
    };
    const onKeyDown = (event: KeyboardEvent) => {
      if (event.key !== 'Escape') return;
      setIsOpen(false);
      button.current?.focus();
    };
    document.addEventListener('pointerdown', onPointerDown);
    document.addEventListener('keydown', onKeyDown);
    return () => {
      document.removeEventListener('pointerdown', onPointerDown);
      document.removeEventListener('keydown', onKeyDown);
    };
  }, [isOpen]);
  return (
    <div
      ref={root}
      className="relative"
      onBlur={(event) => {
        if (event.relatedTarget !== null && !event.currentTarget.contains(event.relatedTarget)) close();
      }}
    >
      <button
        ref={button}
        type="button"
        aria-label={label}
        aria-expanded={isOpen}
        aria-controls={panelId}
        className={triggerClassName}
        onClick={() => setIsOpen(!isOpen)}
      >
        {trigger}
      </button>
      <div
        id={panelId}
        hidden={!isOpen}
        className={classNames('absolute z-30 w-64 rounded-panel border border-selvage bg-cloth py-1', PLACEMENTS[placement])}
      >
        {isOpen ? children(close) : null}
      </div>
    </div>
  );
}

export const menuItemClass =
  'flex w-full items-center gap-2.5 px-3 py-1.5 text-left text-ink no-underline hover:bg-fold focus-visible:outline-offset-[-2px]';
