import type { ReactNode } from 'react';

/** What stands around every control: label, note, hint and error, tied to it by id. */
export interface FieldShellProps {
  id: string;
  label: string;
  labelHidden?: boolean | undefined;
  /** Short words at the right of the label: the range, what was handed out. */
  note?: string | undefined;
  hint?: string | undefined;
  error?: string | undefined;
  optional?: boolean | undefined;
  children: ReactNode;
}

/** The ids a control names in aria-describedby. */
export function describedByIds(id: string, parts: { note?: unknown; hint?: unknown; error?: unknown }): string | undefined {
  const ids = [parts.error && `${id}-error`, parts.note && `${id}-note`, parts.hint && `${id}-hint`].filter(Boolean);
  return ids.length > 0 ? ids.join(' ') : undefined;
}

export function FieldShell({ id, label, labelHidden = false, note, hint, error, optional = false, children }: FieldShellProps) {
  return (
    <div className={error ? 'field has-error' : 'field'}>
      <div className="label-row">
        <label className={labelHidden ? 'label sr-only' : 'label'} htmlFor={id}>
          {label}
          {optional && <span className="optional"> (optional)</span>}
        </label>
        {note && (
          <span className="note" id={`${id}-note`}>
            {note}
          </span>
        )}
      </div>
      {hint && (
        <p className="hint" id={`${id}-hint`}>
          {hint}
        </p>
      )}
      {error && (
        <p className="field-error" id={`${id}-error`}>
          {error}
        </p>
      )}
      {children}
    </div>
  );
}
