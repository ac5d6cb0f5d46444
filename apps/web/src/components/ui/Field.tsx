import { type ReactNode, useId } from 'react';
import { office } from '../../lib/words/office.en.ts';

/** What the control inside a field carries, so that label, hint and error are read with it. */
export interface ControlProps {
  id: string;
  'aria-describedby': string | undefined;
  'aria-invalid': boolean | undefined;
}

/** A labelled control with a hint and an error: `<Field label="Name">{(p) => <input className="input" {...p} />}</Field>`. */
export function Field({
  label,
  hint,
  error,
  optional = false,
  className = '',
  children,
}: {
  label: string;
  hint?: string;
  error?: string | null;
  optional?: boolean;
  className?: string;
  children: (control: ControlProps) => ReactNode;
}) {
  const id = useId();
  const notes = [hint ? `${id}-hint` : null, error ? `${id}-error` : null].filter((part) => part !== null);
  return (
    <div className={`flex flex-col gap-1 ${className}`}>
      <label htmlFor={id} className="text-sm font-medium">
        {label}
        {optional && <span className="font-normal text-ink-faint"> {office.mayBeLeftOut}</span>}
      </label>
      {children({
        id,
        'aria-describedby': notes.join(' ') || undefined,
        'aria-invalid': error ? true : undefined,
      })}
      {hint && (
        <p id={`${id}-hint`} className="text-sm text-ink-faint">
          {hint}
        </p>
      )}
      {error && (
        <p id={`${id}-error`} className="text-sm font-medium text-stop">
          {error}
        </p>
      )}
    </div>
  );
}
