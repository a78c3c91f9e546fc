/** One event as it stood at the release. */
export interface ReleasedEvent {
  id: string;
  slug: string;
  name: string;
  moduleKey: string;
  isTrial: boolean;
  /** Teams of the division, whatever their status. */
  fieldSize: number;
  /** Of the scored teams' scores, as shown (two decimals); null with fewer than one scored team. */
  quartiles: { q1: string; median: string; q3: string } | null;
  /** Columns of the parts of a score, in order. */
  columns: { key: string; header: string; type: 'number' | 'text' }[];
}

/** How one team did in one event. */
export interface ReleasedPlace {
  eventId: string;
  status: 'scored' | 'dns' | 'dq';
  place: number | null;
  /** What the place counts in the sum. */
  points: number;
  /** The score as shown, two decimals; null when there is none. */
  display: string | null;
  /** The exact score as 'p/q'; null when there is none. */
  exact: string | null;
  /** The parts of the score, in the order of the event's columns. */
  cells: (string | number | null)[];
  /** Left out of the total as one of the worst. */
  dropped: boolean;
}

export interface ReleasedTeam {
  teamId: string;
  number: number;
  name: string;
  schoolId: string;
  schoolName: string;
  place: number;
  total: number;
  goesOn: boolean;
  /** Stands at the cut beside an equal: a person must decide who goes on. */
  cutTie: boolean;
  events: ReleasedPlace[];
}

export interface ReleasedDivision {
  id: string;
  slug: string;
  name: string;
  letter: string;
  shape: 'round' | 'square';
  events: ReleasedEvent[];
  rows: ReleasedTeam[];
}

/** A release, whole and frozen. */
export interface ReleaseSnapshot {
  format: 1;
  rules: { dropWorst: number; advance: number; perSchool: number };
  divisions: ReleasedDivision[];
}
