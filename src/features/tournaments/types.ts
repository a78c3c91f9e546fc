/** One line of the day as the public sees it, times as HH:MM on the wall. */
export interface DayPlanLine {
  label: string;
  from: string;
  to: string;
}

/** A division's mark: one letter and one shape. */
export interface DivisionRow {
  id: string;
  slug: string;
  name: string;
  letter: string;
  shape: 'round' | 'square';
  position: number;
}
