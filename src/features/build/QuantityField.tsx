import { useEffect, useState } from 'react';
import { figure } from '../../../shared/arm/units';
import { Field } from '../../components/Field';
import { parseQuantity } from '../../components/quantity';

/**
 * A quantity in the unit the trade writes; other units may be typed and are converted in sight
 * ("0.335 rad" becomes 19.2°). Written back only while it is a number.
 */
export function QuantityField({
  label,
  unit,
  value,
  decimals = 1,
  error,
  help,
  disabled,
  onChange,
}: {
  label: string;
  unit: string;
  value: number;
  decimals?: number;
  error?: string | null;
  help?: string;
  disabled?: boolean;
  onChange: (value: number) => void;
}) {
  const shown = figure(value, decimals).replace('−', '-');
  const [typed, setTyped] = useState(shown);
  const [converted, setConverted] = useState<string | null>(null);
  const parsed = parseQuantity(typed, unit);
  // Undo, a restored revision or another field may change the value under us.
  useEffect(() => {
    setTyped((now) => {
      const current = parseQuantity(now, unit);
      return current && Math.abs(current.value - value) < 10 ** -decimals / 2 ? now : shown;
    });
  }, [value, shown, unit, decimals]);
  return (
    <Field
      label={label}
      unit={unit}
      text={false}
      disabled={disabled}
      inputMode="text"
      value={typed}
      error={parsed === null ? `a number, in ${unit}` : error}
      help={converted ? `${converted} is ${figure(value, decimals)} ${unit}` : help}
      onChange={(event) => {
        setTyped(event.target.value);
        const next = parseQuantity(event.target.value, unit);
        if (!next) return;
        setConverted(next.convertedFrom);
        onChange(next.value);
      }}
      onBlur={() => parsed && setTyped(shown)}
    />
  );
}
