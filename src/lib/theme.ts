export type ThemeChoice = 'system' | 'light' | 'dark';

const STORAGE_KEY = 'isoloom.theme';
const listeners = new Set<() => void>();

function readStored(): ThemeChoice {
  const stored = localStorage.getItem(STORAGE_KEY);
  return stored === 'light' || stored === 'dark' ? stored : 'system';
}

/** Sets the theme on the document; called before the first paint. */
export function applyTheme(): void {
  const choice = readStored();
  if (choice === 'system') delete document.documentElement.dataset['theme'];
  else document.documentElement.dataset['theme'] = choice;
}

export function chooseTheme(choice: ThemeChoice): void {
  if (choice === 'system') localStorage.removeItem(STORAGE_KEY);
  else localStorage.setItem(STORAGE_KEY, choice);
  applyTheme();
  for (const listener of listeners) listener();
}

export const themeStore = {
  subscribe(listener: () => void): () => void {
    listeners.add(listener);
    return () => listeners.delete(listener);
  },
  read: readStored,
};
