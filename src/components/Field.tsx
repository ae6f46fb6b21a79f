import { type InputHTMLAttributes, type ReactNode, useId } from 'react';

interface FieldProps {
  label: string;
  help?: string;
  error?: string | null;
  className?: string;
}

/** Label above, unit in its own cell, help or the error below. */
export function Field({
  label,
  help,
  error,
  unit,
  text = true,
  className = '',
  ...input
}: FieldProps & { unit?: string; text?: boolean } & InputHTMLAttributes<HTMLInputElement>) {
  const id = useId();
  const says = error ?? help;
  return (
    <div className={`field ${error ? 'bad' : ''} ${className}`}>
      <label htmlFor={id}>{label}</label>
      <div className={`entry ${text ? 'text' : ''}`}>
        <input
          id={id}
          aria-invalid={error ? true : undefined}
          aria-describedby={says ? `${id}-says` : undefined}
          {...input}
        />
        {unit && <span className="unit">{unit}</span>}
      </div>
      {says && (
        <span className="says" id={`${id}-says`} role={error ? 'alert' : undefined}>
          {says}
        </span>
      )}
    </div>
  );
}

export function SelectField({
  label,
  value,
  onChange,
  children,
  help,
  disabled,
  className = '',
}: FieldProps & {
  value: string;
  onChange: (value: string) => void;
  children: ReactNode;
  disabled?: boolean;
}) {
  const id = useId();
  return (
    <div className={`field ${className}`}>
      <label htmlFor={id}>{label}</label>
      <div className="entry">
        <select id={id} value={value} disabled={disabled} onChange={(event) => onChange(event.target.value)}>
          {children}
        </select>
      </div>
      {help && <span className="says">{help}</span>}
    </div>
  );
}
