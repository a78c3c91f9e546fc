/** Where the field lies: least, quartiles, median, most. Exact. */
import { compareExact, type Exact } from '../exact';

export interface Quartiles {
  count: number;
  least: Exact;
  lower: Exact;
  median: Exact;
  upper: Exact;
  most: Exact;
}

/**
 * Quartiles by linear interpolation between order statistics at position 1 + (n − 1)p: type 7 of Hyndman and Fan, "Sample
 * Quantiles in Statistical Packages", The American Statistician 50 (1996) 361–365. It is what a spreadsheet's QUARTILE gives, so
 * a coach can check it.
 * @returns null for an empty field.
 */
export function quartiles(values: readonly Exact[]): Quartiles | null {
  const sorted = [...values].sort(compareExact);
  const n = sorted.length;
  if (n === 0) return null;
  const at = (fourths: number): Exact => {
    const position = (n - 1) * fourths;
    const low = sorted[Math.floor(position / 4)] as Exact;
    const high = sorted[Math.ceil(position / 4)] as Exact;
    return low.add(high.sub(low).mul(position % 4, 4));
  };
  return { count: n, least: at(0), lower: at(1), median: at(2), upper: at(3), most: at(4) };
}
