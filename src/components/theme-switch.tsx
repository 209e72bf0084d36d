import { Monitor, Moon, Sun } from 'lucide-react';
import { useId, useSyncExternalStore } from 'react';
import { classNames } from '../lib/class-names';
import { chooseTheme, themeStore, type ThemeChoice } from '../lib/theme';

const CHOICES: ReadonlyArray<{ value: ThemeChoice; label: string; icon: typeof Sun }> = [
  { value: 'system', label: 'System', icon: Monitor },
  { value: 'light', label: 'Light', icon: Sun },
  { value: 'dark', label: 'Dark', icon: Moon },
];

/** Light, dark, or as the system says; kept in this browser. */
export function ThemeSwitch() {
  const current = useSyncExternalStore(themeStore.subscribe, themeStore.read);
  const name = useId();
  return (
    <fieldset className="flex rounded-panel border border-selvage">
      <legend className="sr-only">Theme</legend>
      {CHOICES.map(({ value, label, icon: Icon }) => (
        <label
          key={value}
          className={classNames(
            'flex min-h-8 flex-1 items-center justify-center gap-1.5 border-l border-seam px-2 text-table first-of-type:border-l-0 first-of-type:rounded-l-panel last:rounded-r-panel has-focus-visible:outline-2 has-focus-visible:outline-indigo',
            current === value ? 'bg-indigo-wash font-semibold text-indigo' : 'text-faded hover:bg-fold',
          )}
        >
          <input
            type="radio"
            className="sr-only"
            name={name}
            value={value}
            checked={current === value}
            onChange={() => chooseTheme(value)}
          />
          <Icon aria-hidden="true" className="size-4" />
          {label}
        </label>
      ))}
    </fieldset>
  );
}
