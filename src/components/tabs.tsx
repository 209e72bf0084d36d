import { useEffect, useId, useRef, type KeyboardEvent, type ReactNode } from 'react';
import { NavLink, useLocation } from 'react-router-dom';
import { classNames } from '../lib/class-names';

const tabClass = (isCurrent: boolean) =>
  classNames(
    '-mb-px inline-flex items-center gap-1.5 border-b-2 px-1 py-2 whitespace-nowrap no-underline transition-colors',
    isCurrent ? 'border-indigo font-semibold text-ink' : 'border-transparent text-faded hover:border-selvage hover:text-ink',
  );
const barClass = 'flex gap-5 overflow-x-auto border-b border-seam';

export interface TabLink {
  to: string;
  label: ReactNode;
  /** A count behind the label. */
  count?: number | undefined;
}

/** Tabs that are addresses: each is a link, back works. */
export function TabLinks({ label, links }: { label: string; links: readonly TabLink[] }) {
  const bar = useRef<HTMLElement>(null);
  const { pathname } = useLocation();
  useEffect(() => {
    // On a narrow screen the bar scrolls; the current tab must not stay outside.
    const current = bar.current?.querySelector<HTMLElement>('[aria-current="page"]');
    if (bar.current !== null && current !== null && current !== undefined)
      bar.current.scrollLeft = current.offsetLeft - (bar.current.clientWidth - current.offsetWidth) / 2;
  }, [pathname]);
  return (
    <nav ref={bar} aria-label={label} className={classNames(barClass, 'relative')}>
      {links.map((link) => (
        <NavLink key={link.to} to={link.to} className={({ isActive }) => tabClass(isActive)}>
          {link.label}
          {link.count === undefined ? null : <span className="tabular text-small font-normal text-faded">{link.count}</span>}
        </NavLink>
      ))}
    </nav>
  );
}

export interface TabItem<K extends string> {
  key: K;
  label: ReactNode;
}

/** Tabs inside one view; arrow keys move between them. The panel is what `children` gives for the current key. */
export function Tabs<K extends string>({
  label,
  items,
  current,
  onSelect,
  children,
}: {
  label: string;
  items: ReadonlyArray<TabItem<K>>;
  current: K;
  onSelect: (key: K) => void;
  children: ReactNode;
}) {
  const id = useId();
  const bar = useRef<HTMLDivElement>(null);
  const onKeyDown = (event: KeyboardEvent) => {
    const index = items.findIndex((item) => item.key === current);
    const step = event.key === 'ArrowRight' ? 1 : event.key === 'ArrowLeft' ? -1 : 0;
    const target =
      event.key === 'Home' ? 0 : event.key === 'End' ? items.length - 1 : step === 0 ? -1 : (index + step + items.length) % items.length;
    const item = items[target];
    if (item === undefined) return;
    event.preventDefault();
    onSelect(item.key);
    bar.current?.querySelectorAll<HTMLElement>('[role="tab"]')[target]?.focus();
  };
  return (
    <div>
      <div ref={bar} role="tablist" aria-label={label} className={barClass} onKeyDown={onKeyDown}>
        {items.map((item) => (
          <button
            key={item.key}
            type="button"
            role="tab"
            id={`${id}-${item.key}`}
            aria-selected={item.key === current}
            aria-controls={`${id}-panel`}
            tabIndex={item.key === current ? 0 : -1}
            className={tabClass(item.key === current)}
            onClick={() => onSelect(item.key)}
          >
            {item.label}
          </button>
        ))}
      </div>
      <div role="tabpanel" id={`${id}-panel`} aria-labelledby={`${id}-${current}`} className="pt-4">
        {children}
      </div>
    </div>
  );
}
