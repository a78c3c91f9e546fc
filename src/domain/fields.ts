/**
 * Zod builders for values that people type. Each field gives one message, in words, and keeps numbers as canonical text or as
 * whole numbers. Built on `zod/mini`, which is a third of the full package in the browser.
 */
import * as z from 'zod/mini';
import { compareExact, exact, hasAtMostDecimals, readDecimal, type Exact } from './exact';

/** One message beside one field; `path` is the field's name with dots for nesting, '' for the whole. */
export interface FieldMessage {
  path: string;
  message: string;
}

/** A value that passed, or what to say beside which field. */
export type Checked<T> = { ok: true; value: T } | { ok: false; fields: FieldMessage[] };

/** Runs a schema and gives its messages as fields, the first for each path. The form and the server both use this. */
export function checkValue<T>(schema: z.ZodMiniType<T>, value: unknown): Checked<T> {
  const result = schema.safeParse(value);
  if (result.success) return { ok: true, value: result.data };
  const fields = new Map<string, FieldMessage>();
  for (const { path, message } of result.error.issues) {
    const name = path.map(String).join('.');
    if (!fields.has(name)) fields.set(name, { path: name, message });
  }
  return { ok: false, fields: [...fields.values()] };
}

/** What an object with fields that do not belong is answered. */
export const UNKNOWN_FIELDS = 'Something here does not belong to this form. Load the page again.';

export interface DecimalRule {
  /** Said when it is no number or has too many decimals. */
  what: string;
  /** Said when it is a number outside the limits. */
  range?: string;
  least?: Exact;
  most?: Exact;
  /** The least itself is too small. */
  above?: boolean;
  places?: number;
  /** A further test, answered by `range`. */
  fits?: (value: Exact) => boolean;
}

/**
 * A number kept as decimal text: what was typed becomes canonical ("12,50" is kept as "12.5"), `places` decimals at most
 * (default 1), `least` (default 0) to `most`.
 */
export function decimalField(rule: DecimalRule): z.ZodMiniType<string> {
  const least = rule.least ?? exact(0);
  const places = rule.places ?? 1;
  return z.string(rule.what).check(
    z.overwrite((typed) => readDecimal(typed) ?? typed),
    (ctx) => {
      const text = readDecimal(ctx.value);
      const value = text === null ? null : exact(text);
      const refuse = (message: string): void => {
        ctx.issues.push({ code: 'custom', message, input: ctx.value });
      };
      if (value === null || !hasAtMostDecimals(value, Math.max(places, 0))) return refuse(rule.what);
      const low = compareExact(value, least);
      const inside = (rule.above === true ? low > 0 : low >= 0) && (rule.most === undefined || compareExact(value, rule.most) <= 0);
      if (!inside || rule.fits?.(value) === false) refuse(rule.range ?? rule.what);
    },
  );
}

/** A whole number from `least` to `most`, kept as a number. One message for every way to be wrong. */
export function wholeField(least: number, most: number, message: string): z.ZodMiniType<number> {
  return z.int(message).check(z.minimum(least, message), z.maximum(most, message));
}

/** Plain text without control characters (line ends and tabs are fine), trimmed, at most `most` characters. */
export function textField(most: number, messages: { required?: string; tooLong: string }): z.ZodMiniType<string> {
  return z.string(messages.required ?? messages.tooLong).check(z.trim(), (ctx) => {
    const refuse = (message: string): void => {
      ctx.issues.push({ code: 'custom', message, input: ctx.value });
    };
    if (/[\u0000-\u0008\u000b\u000c\u000e-\u001f\u007f]/.test(ctx.value)) refuse('This holds a character that can’t be kept. Type it again.');
    else if (messages.required !== undefined && ctx.value === '') refuse(messages.required);
    else if (ctx.value.length > most) refuse(messages.tooLong);
  });
}

/** One of a few words. */
export function choiceField<const T extends readonly [string, ...string[]]>(choices: T, message: string): z.ZodMiniType<T[number]> {
  return z.enum(choices, message);
}

/** All of `choices`, each once, in the order chosen. */
export function orderField<const T extends string>(choices: readonly T[], message: string): z.ZodMiniType<T[]> {
  const isChoice = (value: unknown): value is T => (choices as readonly unknown[]).includes(value);
  return z.array(z.custom<T>(isChoice, message), message).check((ctx) => {
    if (ctx.value.length !== choices.length || new Set(ctx.value).size !== choices.length) {
      ctx.issues.push({ code: 'custom', message, input: ctx.value });
    }
  });
}
