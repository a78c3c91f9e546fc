import { useId } from 'react';
import { describedByIds } from './FieldShell';

export interface CheckFieldProps {
  label: string;
  checked: boolean;
  onChange: (checked: boolean) => void;
  hint?: string | undefined;
  error?: string | undefined;
  isDisabled?: boolean | undefined;
  name?: string | undefined;
  id?: string | undefined;
}

/** Yes or no. */
export function CheckField(props: CheckFieldProps) {
  const made = useId();
  const id = props.id ?? made;
  return (
    <div className={props.error ? 'field has-error' : 'field'}>
      {props.error && (
        <p className="field-error" id={`${id}-error`}>
          {props.error}
        </p>
      )}
      <div className="choice">
        <input
          type="checkbox"
          id={id}
          name={props.name}
          checked={props.checked}
          disabled={props.isDisabled}
          onChange={(event) => props.onChange(event.target.checked)}
          aria-invalid={props.error ? true : undefined}
          aria-describedby={describedByIds(id, props)}
        />
        <label htmlFor={id}>{props.label}</label>
        {props.hint && (
          <p className="hint" id={`${id}-hint`}>
            {props.hint}
          </p>
        )}
      </div>
    </div>
  );
}
