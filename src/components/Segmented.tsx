import type { ReactNode } from 'react';

/** One choice of a few. Locked keeps the choice readable and says nothing can be chosen now. */
export function Segmented<T extends string | number>({
  label,
  options,
  value,
  onChange,
  locked = false,
}: {
  label: string;
  options: { value: T; label: ReactNode; locked?: boolean; className?: string }[];
  value: T | null;
  onChange: (value: T) => void;
  locked?: boolean;
}) {
  return (
    <fieldset className={`seg ${locked ? 'locked' : ''}`} aria-label={label}>
      {options.map((option) => (
        <button
          key={option.value}
          type="button"
          className={option.className}
          aria-pressed={option.value === value}
          disabled={locked || option.locked}
          onClick={() => onChange(option.value)}
        >
          {option.label}
        </button>
      ))}
    </fieldset>
  );
}
