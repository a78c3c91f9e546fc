/** The id of the control with this name; `prefix` keeps two forms of one page apart. */
export function fieldId(name: string, prefix = 'f'): string {
  return `${prefix}-${name.replace(/[^A-Za-z0-9]+/g, '-')}`;
}

/** What stands beside a control, as the ids `aria-describedby` names; undefined when nothing does. */
export function describedBy(id: string, parts: { hint?: unknown; error?: unknown }): string | undefined {
  const ids = [parts.error ? `${id}-error` : '', parts.hint ? `${id}-hint` : ''].filter(Boolean);
  return ids.length > 0 ? ids.join(' ') : undefined;
}

/** The words for each way in which a control can be refused before anything is sent. */
export interface FieldMessages {
  required?: string | undefined;
  pattern?: string | undefined;
  maxlength?: string | undefined;
  /** The wrong shape for the control's type: not an address, not a number. */
  type?: string | undefined;
  min?: string | undefined;
  max?: string | undefined;
}

/** A label as the start of a sentence about it; a question is quoted. */
export function named(label: string): string {
  return label.endsWith('?') ? `‘${label}’` : label;
}

/** Those words as the attributes the form script reads, with plain ones where none is given. */
export function messageAttributes(
  label: string,
  messages: FieldMessages,
  has: { required?: boolean | undefined; maxlength?: number | undefined },
): Record<string, string> {
  const words: FieldMessages = {
    ...(has.required ? { required: `${named(label)}: fill this in.` } : {}),
    ...(has.maxlength ? { maxlength: `${named(label)}: at most ${has.maxlength} characters.` } : {}),
    ...messages,
  };
  return Object.fromEntries(
    Object.entries(words).flatMap(([key, text]) => (text === undefined ? [] : [[`data-message-${key}`, text]])),
  );
}
