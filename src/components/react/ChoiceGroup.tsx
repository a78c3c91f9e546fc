import { useId } from 'react';
import { describedByIds } from './FieldShell';

export interface ChoiceGroupProps<Value extends string> {
  label: string;
  note?: string | undefined;
  hint?: string | undefined;
  error?: string | undefined;
  value: Value | null;
  onChange: (value: Value) => void;
  options: readonly { value: Value; label: string; hint?: string | undefined; isDisabled?: boolean | undefined }[];
  /** How many stand side by side; as many as fit when left out. */
  columns?: 2 | 3 | 4 | 5 | 6 | undefined;
  isDisabled?: boolean | undefined;
  name?: string | undefined;
  id?: string | undefined;
}

/** One of a few, as large buttons: radio buttons underneath, so arrow keys and screen readers know what they are. */
export function ChoiceGroup<Value extends string>(props: ChoiceGroupProps<Value>) {
  const made = useId();
  const id = props.id ?? made;
  const name = props.name ?? made;
  return (
    <fieldset
      className={props.error ? 'field has-error' : 'field'}
      role="radiogroup"
      aria-labelledby={`${id}-label`}
      aria-describedby={describedByIds(id, props)}
      aria-invalid={props.error ? true : undefined}
      disabled={props.isDisabled}
    >
      <div className="label-row">
        <span className="label" id={`${id}-label`}>
          {props.label}
        </span>
        {props.note && (
          <span className="note" id={`${id}-note`}>
            {props.note}
          </span>
        )}
      </div>
      {props.hint && (
        <p className="hint" id={`${id}-hint`}>
          {props.hint}
        </p>
      )}
      {props.error && (
        <p className="field-error" id={`${id}-error`}>
          {props.error}
        </p>
      )}
      <div className={props.columns ? `choice-grid of-${props.columns}` : 'choice-grid'}>
        {props.options.map((option, i) => (
          <label key={option.value}>
            <input
              type="radio"
              id={i === 0 ? id : undefined}
              name={name}
              value={option.value}
              checked={props.value === option.value}
              disabled={option.isDisabled}
              onChange={() => props.onChange(option.value)}
            />
            <span>{option.label}</span>
            {option.hint && <small>{option.hint}</small>}
          </label>
        ))}
      </div>
    </fieldset>
  );
}
