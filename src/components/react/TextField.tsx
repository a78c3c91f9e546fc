import { useId, type HTMLInputTypeAttribute, type Ref } from 'react';
import { describedByIds, FieldShell } from './FieldShell';

export interface TextFieldProps {
  label: string;
  labelHidden?: boolean | undefined;
  value: string;
  onChange: (value: string) => void;
  onBlur?: (() => void) | undefined;
  note?: string | undefined;
  hint?: string | undefined;
  error?: string | undefined;
  name?: string | undefined;
  id?: string | undefined;
  type?: Extract<HTMLInputTypeAttribute, 'text' | 'email' | 'password' | 'search' | 'tel' | 'url'> | undefined;
  inputMode?: 'text' | 'decimal' | 'numeric' | 'email' | undefined;
  autoComplete?: string | undefined;
  isRequired?: boolean | undefined;
  isReadOnly?: boolean | undefined;
  /** Shows '(optional)' after the label. */
  isOptional?: boolean | undefined;
  unit?: string | undefined;
  width?: 'short' | 'medium' | 'full' | undefined;
  /** A paragraph of this many lines. */
  rows?: number | undefined;
  inputRef?: Ref<HTMLInputElement & HTMLTextAreaElement> | undefined;
}

/** One line of text, or with `rows` a paragraph. What was typed is never changed underneath. */
export function TextField(props: TextFieldProps) {
  const made = useId();
  const id = props.id ?? made;
  const common = {
    id,
    name: props.name,
    value: props.value,
    className: ['input', props.width !== 'full' && props.width].filter(Boolean).join(' '),
    onBlur: props.onBlur,
    required: props.isRequired,
    readOnly: props.isReadOnly,
    autoComplete: props.autoComplete,
    inputMode: props.inputMode,
    ref: props.inputRef,
    'aria-invalid': props.error ? true : undefined,
    'aria-describedby': describedByIds(id, props),
  };
  const input =
    props.rows === undefined ? (
      <input {...common} type={props.type ?? 'text'} onChange={(event) => props.onChange(event.target.value)} />
    ) : (
      <textarea {...common} rows={props.rows} onChange={(event) => props.onChange(event.target.value)} />
    );
  return (
    <FieldShell
      id={id}
      label={props.label}
      labelHidden={props.labelHidden}
      note={props.note}
      hint={props.hint}
      error={props.error}
      optional={props.isOptional}
    >
      {props.unit ? (
        <div className="affix">
          {input}
          <span>{props.unit}</span>
        </div>
      ) : (
        input
      )}
    </FieldShell>
  );
}
