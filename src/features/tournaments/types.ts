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

/** How far one event is, from one statement. */
export interface EventCounts {
  /** Readings of parts of teams that take part. */
  kept: number;
  /** Teams that did not start or are disqualified. */
  out: number;
  /** How many teams have so many parts: `full[2]` teams have two. */
  full: Record<number, number>;
  lastKeptAt: string | null;
}

/** Counts of a tournament by division and event. */
export interface TournamentCounts {
  /** Confirmed teams by division. */
  confirmed: Record<string, number>;
  /** Teams in any state by division. */
  entered: Record<string, number>;
  events: Record<string, EventCounts>;
}
