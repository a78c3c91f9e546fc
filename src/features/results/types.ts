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
  /** The heading of its scores: 'Score' or 'Points'. */
  scoreLabel: string;
  /** Who was scored, of the field. */
  scored: number;
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
  /** The parts of the score, in the order of the event's columns; numbers as exact decimal text. */
  cells: (string | null)[];
  /** Left out of the total as one of the worst. */
  dropped: boolean;
}

export interface ReleasedTeam {
  teamId: string;
  number: number;
  name: string;
  schoolId: string;
  schoolName: string;
  /** Null where no event of the division counts. */
  place: number | null;
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

/** A release without its contents. */
export interface ReleaseRow {
  id: string;
  number: number;
  publicLine: string;
  releasedAt: Date;
  releasedBy: string;
  publicFrom: Date;
}

/** A release with its contents. */
export interface Release extends ReleaseRow {
  snapshot: ReleaseSnapshot;
}

/** What stands in the way of a release, each with where it is put right. */
export interface Obstacle {
  words: string;
  eventSlug: string | null;
}
