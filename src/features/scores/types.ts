import type { TeamStatus } from '~/domain/ranking/places';

/** One value as it stands. */
export interface KeptPart {
  value: unknown;
  /** 1 for the first; a device says which one it typed against. */
  version: number;
  keptAt: string;
  keptBy: string;
}

/** What is kept of one team in one event, by part. */
export type KeptParts = Record<string, KeptPart>;

/** A finding that was settled, and how. */
export interface SettlementRow {
  id: string;
  eventId: string;
  teamId: string | null;
  kind: string;
  fingerprint: string;
  outcome: SettlementOutcome;
  reason: string;
  settledAt: string;
  settledBy: string;
}

/** How what is missing can be settled. */
export const SETTLEMENT_OUTCOMES = ['did-not-start', 'counts-as-nothing'] as const;
export type SettlementOutcome = (typeof SETTLEMENT_OUTCOMES)[number];

/** Something about one team that somebody must settle before the event can be accepted. */
export interface MissingFinding {
  kind: 'missing';
  teamId: string;
  /** Of the facts as they stand: other facts are another finding. */
  fingerprint: string;
  /** 'The written test is missing.' */
  words: string;
  settlement: SettlementRow | null;
}

/** One team of an event: what was kept, how it counts, where it stands. */
export interface FieldRow {
  teamId: string;
  number: number;
  label: string;
  name: string;
  schoolId: string;
  schoolName: string;
  status: TeamStatus;
  statusNote: string;
  kept: KeptParts;
  /** Names of the parts that are not there and not settled. */
  missing: string[];
  finding: MissingFinding | null;
  /** What enters score and rank: kept, or nothing where it was settled so. */
  counted: Record<string, unknown>;
  complete: boolean;
  place: number | null;
  points: number | null;
  exact: string | null;
  display: string | null;
}

/** The field of one event. */
export interface Field {
  rows: FieldRow[];
  /** In the order of the ranking. */
  ranked: FieldRow[];
  /** Teams with nothing missing, or settled, or not taking part. */
  complete: number;
  /** Readings there, and how many there should be (parts times teams that take part). */
  kept: number;
  expected: number;
  /** Findings that nobody settled yet. */
  open: MissingFinding[];
  settled: MissingFinding[];
}

/** One value of a part's history, newest first. */
export interface Revision {
  part: string;
  version: number;
  value: unknown;
  reason: string;
  keptAt: string;
  keptBy: string;
}

/** A team as the entry form shows it. */
export interface EntryTeam {
  id: string;
  number: number;
  label: string;
  name: string;
  schoolName: string;
  kept: KeptParts;
}

/** What the entry form needs: the rules as they stand, and everything kept. */
export interface EntryState {
  event: { slug: string; name: string; moduleKey: string; state: 'open' | 'handed-in' | 'accepted'; division: { name: string; letter: string; shape: 'round' | 'square' }; room: string };
  setup: unknown;
  setupVersion: number;
  locked: boolean;
  teams: EntryTeam[];
  /** When the server put this together. */
  asOf: string;
}

/** The answer to a kept reading. */
export interface KeptAnswer {
  version: number;
  keptAt: string;
  /** Somebody had kept the same value already. */
  agreed?: boolean;
}
