import { ChevronDown, CircleAlert } from 'lucide-react';
import { useId, type ComponentProps, type ReactNode } from 'react';
import { classNames } from '../lib/class-names';

/** What a control inside a field must carry, so that label, hint and error belong to it. */
export interface FieldControl {
  id: string;
  'aria-invalid': true | undefined;
  'aria-describedby': string | undefined;
}

interface FieldProps {
  label: ReactNode;
  /** Shown below the control; what belongs here, in what unit. */
  hint?: ReactNode;
  /** What is wrong and what it should be. */
  error?: string | undefined;
  /** Keeps the label for screen readers only, for controls whose place says what they are. */
  isLabelHidden?: boolean;
  className?: string | undefined;
}

/** Label, control, hint and inline error as one. */
export function Field({
  label,
  hint,
  error,
  isLabelHidden = false,
  className,
  children,
}: FieldProps & { children: (control: FieldControl) => ReactNode }) {
  const id = useId();
  const hintId = `${id}-hint`;
  const errorId = `${id}-error`;
  const describedBy = [hint === undefined ? null : hintId, error === undefined ? null : errorId].filter((part) => part !== null).join(' ');
  return (
    <div className={classNames('min-w-0', className)}>
      <label htmlFor={id} className={isLabelHidden ? 'sr-only' : 'mb-1 block text-table font-semibold'}>
        {label}
      </label>
      {children({
        id,
        'aria-invalid': error === undefined ? undefined : true,
        'aria-describedby': describedBy === '' ? undefined : describedBy,
      })}
      <InlineError id={errorId} message={error} />
      {hint === undefined ? null : (
        <p id={hintId} className="mt-1 text-small text-faded">
          {hint}
        </p>
      )}
    </div>
  );
}

/** The line under a control that says what to change. */
export function InlineError({ id, message }: { id?: string; message: string | undefined }) {
  if (message === undefined) return null;
  return (
    <p id={id} role="alert" className="mt-1 flex items-start gap-1.5 text-small text-madder">
      <CircleAlert aria-hidden="true" className="mt-0.5 size-3.5 shrink-0" />
      <span className="block first-letter:uppercase">{message}</span>
    </p>
  );
}

type WithField<P> = Omit<P, 'id' | 'aria-invalid' | 'aria-describedby' | 'className'> & FieldProps & { controlClassName?: string };

export function TextInput({
  label,
  hint,
  error,
  isLabelHidden = false,
  className,
  controlClassName,
  ...input
}: WithField<ComponentProps<'input'>>) {
  return (
    <Field label={label} hint={hint} error={error} isLabelHidden={isLabelHidden} className={className}>
      {(control) => <input type="text" className={classNames('control', controlClassName)} {...input} {...control} />}
    </Field>
  );
}

export function TextArea({
  label,
  hint,
  error,
  isLabelHidden = false,
  className,
  controlClassName,
  rows = 3,
  ...input
}: WithField<ComponentProps<'textarea'>>) {
  return (
    <Field label={label} hint={hint} error={error} isLabelHidden={isLabelHidden} className={className}>
      {(control) => <textarea rows={rows} className={classNames('control resize-y', controlClassName)} {...input} {...control} />}
    </Field>
  );
}

export interface SelectOption<V extends string = string> {
  value: V;
  label: string;
}

export function Select<V extends string>({
  label,
  hint,
  error,
  isLabelHidden = false,
  className,
  controlClassName,
  options,
  onValueChange,
  onChange,
  ...input
}: WithField<Omit<ComponentProps<'select'>, 'children'>> & {
  options: ReadonlyArray<SelectOption<V>>;
  onValueChange?: (value: V) => void;
}) {
  return (
    <Field label={label} hint={hint} error={error} isLabelHidden={isLabelHidden} className={className}>
      {(control) => (
        <span className="relative block">
          <select
            className={classNames('control appearance-none pr-8', controlClassName)}
            {...input}
            {...control}
            onChange={(event) => {
              onChange?.(event);
              const chosen = options.find((option) => option.value === event.target.value);
              if (chosen !== undefined) onValueChange?.(chosen.value);
            }}
          >
            {options.map((option) => (
              <option key={option.value} value={option.value}>
                {option.label}
              </option>
            ))}
          </select>
          <ChevronDown aria-hidden="true" className="pointer-events-none absolute top-1/2 right-2.5 size-4 -translate-y-1/2 text-faded" />
        </span>
      )}
    </Field>
  );
}

export function Checkbox({
  label,
  hint,
  className,
  ...input
}: Omit<ComponentProps<'input'>, 'type'> & { label: ReactNode; hint?: ReactNode }) {
  const id = useId();
  return (
    <div className={className}>
      <label htmlFor={id} className="inline-flex items-start gap-2">
        <input
          id={id}
          type="checkbox"
          className="mt-[3px] size-4 shrink-0 accent-indigo"
          aria-describedby={hint === undefined ? undefined : `${id}-hint`}
          {...input}
        />
        <span>{label}</span>
      </label>
      {hint === undefined ? null : (
        <p id={`${id}-hint`} className="ml-6 text-small text-faded">
          {hint}
        </p>
      )}
    </div>
  );
}
