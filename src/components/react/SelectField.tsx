import { useId } from 'react';
import { describedByIds, FieldShell } from './FieldShell';

export interface SelectFieldProps {
  label: string;
  labelHidden?: boolean | undefined;
  options: readonly { value: string; label: string; isDisabled?: boolean | undefined }[];
  value: string;
  onChange: (value: string) => void;
  /** The first, empty choice. */
  placeholder?: string | undefined;
  note?: string | undefined;
  hint?: string | undefined;
  error?: string | undefined;
  name?: string | undefined;
  id?: string | undefined;
  isDisabled?: boolean | undefined;
}

/** One of several, with the device's own list. */
export function SelectField(props: SelectFieldProps) {
  const made = useId();
  const id = props.id ?? made;
  return (
    <FieldShell id={id} label={props.label} labelHidden={props.labelHidden} note={props.note} hint={props.hint} error={props.error}>
      <select
        className="input"
        id={id}
        name={props.name}
        value={props.value}
        disabled={props.isDisabled}
        onChange={(event) => props.onChange(event.target.value)}
        aria-invalid={props.error ? true : undefined}
        aria-describedby={describedByIds(id, props)}
      >
        {props.placeholder !== undefined && <option value="">{props.placeholder}</option>}
        {props.options.map((option) => (
          <option key={option.value} value={option.value} disabled={option.isDisabled}>
            {option.label}
          </option>
        ))}
      </select>
    </FieldShell>
  );
}
