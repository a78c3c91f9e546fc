import { useId, type KeyboardEvent, type Ref } from 'react';
import { Button } from './Button';
import { compareDecimals, stepDecimal, tidyDecimal } from './decimal-text';
import { describedByIds, FieldShell } from './FieldShell';

export interface DecimalFieldProps {
  label: string;
  labelHidden?: boolean | undefined;
  /** What was typed, as typed; a decimal number when it can be read as one. */
  value: string;
  onChange: (value: string) => void;
  onBlur?: (() => void) | undefined;
  note?: string | undefined;
  hint?: string | undefined;
  error?: string | undefined;
  unit?: string | undefined;
  /** By how much the buttons and arrow keys move it; with Shift, ten times as much. */
  step?: string | undefined;
  min?: string | undefined;
  max?: string | undefined;
  big?: boolean | undefined;
  isOptional?: boolean | undefined;
  isDisabled?: boolean | undefined;
  name?: string | undefined;
  id?: string | undefined;
  inputRef?: Ref<HTMLInputElement> | undefined;
}

function StepSign({ plus = false }: { plus?: boolean }) {
  return (
    <svg width="18" height="18" viewBox="0 0 18 18" stroke="currentColor" strokeWidth="2.5" aria-hidden="true">
      <path d={plus ? 'M2 9h14M9 2v14' : 'M2 9h14'} />
    </svg>
  );
}

/**
 * A measured number: a text field with a numeric keypad, and a button on each side. Text that is no number
 * stays where it is, for the error beside it to speak of.
 */
export function DecimalField(props: DecimalFieldProps) {
  const { label, value, onChange, step = '1', min, max, unit, big = false, isDisabled = false } = props;
  const made = useId();
  const id = props.id ?? made;
  const tidy = tidyDecimal(value);
  const atLeast = tidy !== null && min !== undefined && compareDecimals(tidy, min) <= 0;
  const atMost = tidy !== null && max !== undefined && compareDecimals(tidy, max) >= 0;
  const move = (times: number) => onChange(stepDecimal(value, step, times, { min, max }));
  const onKeyDown = (event: KeyboardEvent) => {
    const direction = event.key === 'ArrowUp' ? 1 : event.key === 'ArrowDown' ? -1 : 0;
    if (direction === 0) return;
    event.preventDefault();
    move(direction * (event.shiftKey ? 10 : 1));
  };
  return (
    <FieldShell
      id={id}
      label={label}
      labelHidden={props.labelHidden}
      note={props.note}
      hint={props.hint}
      error={props.error}
      optional={props.isOptional}
    >
      <div className={big ? 'stepper big' : 'stepper'}>
        <Button onPress={() => move(-1)} isDisabled={isDisabled || atLeast} aria-label={`${label}: ${step} less`}>
          <StepSign />
        </Button>
        <div className={props.error ? 'value invalid' : 'value'}>
          <input
            ref={props.inputRef}
            id={id}
            name={props.name}
            type="text"
            inputMode="decimal"
            autoComplete="off"
            value={value}
            disabled={isDisabled}
            onChange={(event) => onChange(event.target.value)}
            onBlur={props.onBlur}
            onKeyDown={onKeyDown}
            aria-invalid={props.error ? true : undefined}
            aria-describedby={[describedByIds(id, props), unit && `${id}-unit`].filter(Boolean).join(' ') || undefined}
          />
          <span id={`${id}-unit`}>{unit}</span>
        </div>
        <Button onPress={() => move(1)} isDisabled={isDisabled || atMost} aria-label={`${label}: ${step} more`}>
          <StepSign plus />
        </Button>
      </div>
    </FieldShell>
  );
}
