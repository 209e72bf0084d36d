type Listener = () => void;

const listeners = new Set<Listener>();

/** Called by the api client when a session has ended and could not be renewed. */
export function announceSessionExpired(): void {
  for (const listener of listeners) listener();
}

/** Returns the function that ends the subscription. */
export function onSessionExpired(listener: Listener): () => void {
  listeners.add(listener);
  return () => listeners.delete(listener);
}
