type Changes = Readonly<Record<string, string | null>>;

/**
 * Parameters of the address with some changed; null removes one. Read from the window, which knows of changes that were
 * written past the router or that React has not rendered yet.
 */
export function addressWith(changes: Changes): URLSearchParams {
  const next = new URLSearchParams(window.location.search);
  for (const [name, value] of Object.entries(changes)) {
    if (value === null) next.delete(name);
    else next.set(name, value);
  }
  return next;
}

/** Changes parameters in place, without a navigation; does nothing once another page is shown. */
export function replaceAddress(pathname: string, changes: Changes): void {
  if (window.location.pathname !== pathname) return;
  window.history.replaceState(window.history.state, '', `${pathname}?${addressWith(changes).toString()}`);
}
