import { Search } from 'lucide-react';
import { useEffect, useId, useRef, useState } from 'react';

/** A search text that is applied a moment after the last key, or at once with Enter. */
export function SearchField({ label, value, onApply }: { label: string; value: string; onApply: (text: string) => void }) {
  const id = useId();
  const [text, setText] = useState(value);
  const [applied, setApplied] = useState(value);
  const onApplyRef = useRef(onApply);
  useEffect(() => {
    onApplyRef.current = onApply;
  });
  // Back and forward change the address from outside.
  if (applied !== value) {
    setApplied(value);
    setText(value);
  }
  useEffect(() => {
    if (text.trim() === value) return undefined;
    const timer = setTimeout(() => onApplyRef.current(text.trim()), 250);
    return () => clearTimeout(timer);
  }, [text, value]);
  return (
    <div role="search" className="relative w-full tablet:w-72">
      <label htmlFor={id} className="sr-only">
        {label}
      </label>
      <Search aria-hidden="true" className="pointer-events-none absolute top-1/2 left-2.5 size-4 -translate-y-1/2 text-faded" />
      <input
        id={id}
        type="search"
        className="control pl-8"
        placeholder={label}
        maxLength={120}
        value={text}
        onChange={(event) => setText(event.target.value)}
        onKeyDown={(event) => {
          if (event.key === 'Enter') onApply(text.trim());
        }}
      />
    </div>
  );
}
