/**
 * What a kind of event gives. Everything here is pure: no React, no clock, no database, no floats in scores. The same functions
 * answer in the form, on the server and in the release. Set-ups and parts are plain JSON, so that they can be stored and sent.
 *
 * A module's functions take values that its own schemas let through; handing them anything else is a mistake of the caller.
 */
import type { ZodMiniType } from 'zod/mini';
import type { CsvCell } from '~/domain/csv';
import type { Exact } from '~/domain/exact';
import type { Checked } from '~/domain/fields';
import type { TeamStatus } from '~/domain/ranking/places';

/** A line of a summary: 'Box' – '1,000 × 600 mm'. */
export interface Line {
  label: string;
  value: string;
}

/** Something unlikely in a set-up: kept, but said. */
export interface SetupFinding {
  /** Stable, for settling it with a reason. */
  code: string;
  message: string;
  /** The field it is about, with dots for nesting. */
  field: string;
}

/** The complete set-up of one event. */
export interface EventSetup<Setup> {
  /** Takes the complete set-up and gives it back in canonical form; messages are for volunteers. Never partial. */
  schema: ZodMiniType<Setup>;
  /** A set-up to start from. It passes the schema. */
  defaults(): Setup;
  findings(setup: Setup): SetupFinding[];
  /** For the people who run the event. */
  summary(setup: Setup): Line[];
}

/** One column of a part's CSV file. */
export interface PartCsvField {
  key: string;
  header: string;
  /** Shown in the template. */
  example: string;
}

/** How a part comes in by CSV. Columns may depend on the set-up. */
export interface PartCsv<Setup, Value> {
  fields(setup: Setup): PartCsvField[];
  /** `cells` by field key, '' when empty. Messages have the field's key as path. */
  parseCsvRow(setup: Setup, cells: Readonly<Record<string, string>>): Checked<Value>;
  /** A kept value in the order of `fields`, for a template that is already filled in. */
  toCsvCells(setup: Setup, value: Value): CsvCell[];
}

/** One thing that is entered, kept and corrected on its own. */
export interface EventPart<Setup, Key extends string, Value> {
  key: Key;
  name: string;
  /** Takes one complete value and gives it back in canonical form; messages are for volunteers, paths as typed. */
  schema(setup: Setup): ZodMiniType<Value>;
  /** The value in a few words. */
  describe(setup: Setup, value: Value): string;
  /** The value and what is worked out from it (both ways round, say), for the people who run the event. */
  workings(setup: Setup, value: Value): Line[];
  /** What a value that was never kept counts as, once the office settles it so. It passes the schema. */
  nothing(setup: Setup): Value;
  csv: PartCsv<Setup, Value> | null;
}

/** One line of a score, for whoever asks where the points were. Ratios are text "p/q". */
export interface ScoreDetail {
  key: string;
  label: string;
  display: string;
  /** The exact value, null where there is none (no spot). */
  exact: string | null;
  /** What it is out of, exactly; null where that makes no sense (a distance). */
  outOf: string | null;
}

/** A part that no longer fits the set-up, which was changed after it was kept. */
export interface PartFault<Key extends string> {
  part: Key;
  message: string;
}

export interface EventScore<Key extends string> {
  /** Nothing is missing and nothing is at fault. */
  complete: boolean;
  missing: Key[];
  faults: PartFault<Key>[];
  /** Null until complete. */
  score: Exact | null;
  display: string | null;
  /** Lines for the parts that are there. */
  details: ScoreDetail[];
}

/** One team of an event, as it is ranked. Parts that are not there yet are left out. */
export interface EventTeam<Parts> {
  id: string;
  status: TeamStatus;
  parts: Partial<Parts>;
}

/**
 * A ranked row. Order: scored and complete by place, then scored but incomplete, then dns, then dq; input order among equals.
 * An incomplete row has neither place nor points.
 */
export interface EventRow {
  id: string;
  status: TeamStatus;
  complete: boolean;
  place: number | null;
  points: number | null;
  score: Exact | null;
  display: string | null;
}

export interface ResultColumn {
  key: string;
  header: string;
  type: 'number' | 'text';
}

/** The axis on which scores are drawn. */
export interface ScoreScale {
  /** 'Score' or 'Points', for a table's heading. */
  label: string;
  /** Decimal text. */
  least: string;
  most: string;
}

/** The union of a module's parts, each with its own value type. */
export type PartsOf<Setup, Parts> = { [Key in keyof Parts & string]: EventPart<Setup, Key, Parts[Key]> }[keyof Parts & string];

/**
 * A kind of event. `Setup` is its set-up, `Parts` maps each part's key to its value (a type, not an interface, so that it fits
 * the registry's Record).
 *
 * Written with method syntax on purpose: that is what lets every module stand in the registry as {@link AnyEventModule}.
 */
export interface EventModule<Setup, Parts extends Record<string, unknown>, Key extends string = string> {
  /** Stable, stored; also the folder's name. */
  key: Key;
  name: string;
  /** How the event is done, for the public: 'built on the spot, written'. */
  manner: string;
  setup: EventSetup<Setup>;
  /** All of them, in the order they are entered. Keys are unique. */
  parts: readonly PartsOf<Setup, Parts>[];
  /** One team's score. Never throws for values its schemas have let through under any set-up. */
  score(setup: Setup, parts: Partial<Parts>): EventScore<keyof Parts & string>;
  rank(setup: Setup, teams: readonly EventTeam<Parts>[]): EventRow[];
  scoreScale(setup: Setup): ScoreScale;
  /** How equal scores are settled, one step a line, in order. */
  tieBreakWords(setup: Setup): string[];
  /** What the coach's CSV says of this event, besides place and score. */
  resultColumns(setup: Setup): ResultColumn[];
  /** In the order of `resultColumns`; null for what is missing. */
  resultCells(setup: Setup, parts: Partial<Parts>): CsvCell[];
  /** What anyone may know of the set-up. Allow-listed: a new field is private until it is put here. */
  publicSetup(setup: Setup): Line[];
  /** Invented set-ups that differ in what they reward; each passes the schema. */
  sampleSetups(): { name: string; setup: Setup }[];
  /** Invented teams that fit any set-up, to show what it does. Always the same ones. */
  sampleTeams(setup: Setup): EventTeam<Parts>[];
}

/**
 * A module whose types are forgotten, as the registry hands it out. Put a stored set-up or part through the module's schema
 * first: what comes out is what its other functions take.
 */
export interface AnyEventModule extends EventModule<unknown, Record<string, unknown>> {
  key: string;
}
