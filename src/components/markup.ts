/**
 * HTML built as one string, for tables too big for a component per cell.
 * Everything put in is escaped unless it is itself `Markup`.
 */
export class Markup {
  constructor(readonly html: string) {}
  toString(): string {
    return this.html;
  }
}

export type MarkupValue = Markup | string | number | null | undefined | false | readonly MarkupValue[];

const ENTITIES: Record<string, string> = { '&': '&amp;', '<': '&lt;', '>': '&gt;', '"': '&quot;', "'": '&#39;' };

/** Text made safe for content and for quoted attributes. */
export function escapeHtml(text: string): string {
  return /[&<>"']/.test(text) ? text.replace(/[&<>"']/g, (c) => ENTITIES[c] as string) : text;
}

function put(value: MarkupValue): string {
  if (value instanceof Markup) return value.html;
  if (typeof value === 'string') return escapeHtml(value);
  if (typeof value === 'number') return String(value);
  if (Array.isArray(value)) return value.map(put).join('');
  return '';
}

/** Tagged template: markup`<td>${name}</td>` escapes the name; lists are joined; null, undefined and false vanish. */
export function markup(strings: TemplateStringsArray, ...values: MarkupValue[]): Markup {
  let html = strings[0] as string;
  for (let i = 0; i < values.length; i += 1) html += put(values[i]) + (strings[i + 1] as string);
  return new Markup(html);
}

/** Text that is HTML already and known to be safe. */
export function raw(html: string): Markup {
  return new Markup(html);
}
