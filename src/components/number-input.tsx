import { useState, type ComponentProps, type ReactNode } from 'react';
import { classNames } from '../lib/class-names';
import { parseNumberText } from '../lib/numbers';
import { Field } from './field';

interface NumberInputProps extends Omit<ComponentProps<'input'>, 'value' | 'onChange' | 'type' | 'id' | 'className'> {
  label: ReactNode;
  hint?: ReactNode;
  error?: string | undefined;
  isLabelHidden?: boolean;
  className?: string;
  controlClassName?: string;
  /** null = empty; NaN = the text is no number, which every number schema refuses. */
  value: number | null;
  onValueChange: (value: number | null) => void;
  /** Written behind the field: ppm, Hz, s. */
  unit?: string;
}

/** A number as text, so that half-typed and wrong input stays visible and gets a message instead of vanishing. */
export function NumberInput({
  label,
  hint,
  error,
  isLabelHidden = false,
  className,
  controlClassName,
  value,
  onValueChange,
  unit,
  ...input
}: NumberInputProps) {
  const [text, setText] = useState(value === null || Number.isNaN(value) ? '' : String(value));
  const read = parseNumberText(text);
  const textValue = read.kind === 'number' ? read.value : read.kind === 'empty' ? null : Number.NaN;
  // The value was changed from outside (pasted, restored): show it instead of what was typed.
  const shown = value === null ? '' : Number.isNaN(value) ? text : String(value);
  if (!Object.is(textValue, value) && shown !== text) setText(shown);
  return (
    <Field
      label={label}
      hint={hint}
      error={read.kind === 'notNumber' ? (error ?? 'expected a number') : error}
      isLabelHidden={isLabelHidden}
      {...(className === undefined ? {} : { className })}
    >
      {(control) => (
        <span className="relative block">
          <input
            type="text"
            inputMode="decimal"
            autoComplete="off"
            className={classNames('control tabular', unit !== undefined && 'pr-12', controlClassName)}
            {...input}
            {...control}
            value={text}
            onChange={(event) => {
              const next = parseNumberText(event.target.value);
              setText(event.target.value);
              onValueChange(next.kind === 'number' ? next.value : next.kind === 'empty' ? null : Number.NaN);
            }}
          />
          {unit === undefined ? null : (
            <span aria-hidden="true" className="pointer-events-none absolute inset-y-0 right-3 flex items-center text-table text-faded">
              {unit}
            </span>
          )}
        </span>
      )}
    </Field>
  );
}
