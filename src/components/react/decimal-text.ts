/** Decimal numbers as people type them, moved by exact steps: no floating point touches what is kept. */

const DECIMAL = /^[-−]?\d+(?:[.,]\d*)?$|^[-−]?[.,]\d+$/;

/** The number typed, tidied ('12,50' → '12.50', '−3' → '-3'), or null when it is not one. */
export function tidyDecimal(typed: string): string | null {
  const text = typed.replace(/\s+/g, '');
  if (!DECIMAL.test(text)) return null;
  return text.replace('−', '-').replace(',', '.').replace(/^(-?)\./, '$10.').replace(/\.$/, '');
}

function split(decimal: string): { units: bigint; places: number } {
  const [whole = '0', part = ''] = decimal.split('.');
  return { units: BigInt(`${whole}${part}`), places: part.length };
}

function at({ units, places }: { units: bigint; places: number }, to: number): bigint {
  return units * 10n ** BigInt(to - places);
}

function join(units: bigint, places: number): string {
  const digits = (units < 0n ? -units : units).toString().padStart(places + 1, '0');
  const text = places === 0 ? digits : `${digits.slice(0, -places)}.${digits.slice(-places)}`;
  return units < 0n ? `-${text}` : text;
}

/** -1, 0 or 1. Both must be tidy. */
export function compareDecimals(a: string, b: string): -1 | 0 | 1 {
  const x = split(a);
  const y = split(b);
  const places = Math.max(x.places, y.places);
  const [p, q] = [at(x, places), at(y, places)];
  return p < q ? -1 : p > q ? 1 : 0;
}

/**
 * `value` moved by `times` steps and held within `min` and `max` (tidy decimals all). An empty or unreadable value
 * starts at `min`, or at nought.
 */
export function stepDecimal(
  value: string,
  step: string,
  times: number,
  limits: { min?: string | undefined; max?: string | undefined } = {},
): string {
  const from = tidyDecimal(value);
  if (from === null) return limits.min ?? '0';
  const start = split(from);
  const size = split(step);
  const places = Math.max(start.places, size.places);
  let moved = at(start, places) + at(size, places) * BigInt(times);
  let shown = places;
  for (const [limit, beyond] of [
    [limits.min, (edge: bigint) => moved < edge],
    [limits.max, (edge: bigint) => moved > edge],
  ] as const) {
    if (limit === undefined) continue;
    const edge = split(limit);
    const scale = Math.max(shown, edge.places);
    moved *= 10n ** BigInt(scale - shown);
    shown = scale;
    if (beyond(at(edge, scale))) moved = at(edge, scale);
  }
  return join(moved, shown);
}
