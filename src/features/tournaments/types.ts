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

/** What the rail of a tournament's staff pages shows. */
export interface TournamentNavigation {
  events: number;
  handedIn: number;
  teams: number;
  releases: number;
  /** The events this person leads, by name. */
  mine: { slug: string; name: string; letter: string }[];
}
