import type { CsvCell } from '~/domain/csv';
import { groupThousands } from '~/domain/exact';
import { getEventModule } from '~/event-modules/registry';
import { readStatus, STATUS_PART, STATUS_WORDS } from '~/event-modules/status-part';
import { now } from '~/server/clock';
import { withScope } from '~/server/database';
import { AppError, notFound } from '~/server/errors';
import type { Scope } from '~/server/scope';
import { getTeamInScope, listTeams } from '../entries/queries';
import { canLead, requireLeader } from '../events/policy';
import { getEventBySlug, listEvents } from '../events/queries';
import type { EventRow } from '../events/types';
import { eventField, setupOf } from '../results/queries';
import { canDirect, requireDirector } from '../tournaments/policy';
import { teamLabel } from './assembly';
import { everyRevision, keptReadings, listRevisions } from './queries';
import type { EntryState, Field, FieldRow } from './types';

/** What the entry form shows and needs. @throws AppError not-found, not-allowed */
export async function loadEntry(scope: Scope, slug: string): Promise<EntryState> {
  return withScope(scope, async (tx) => {
    const event = await getEventBySlug(tx, scope, slug);
    requireLeader(scope, event);
    const [teams, kept] = await Promise.all([
      listTeams(tx, scope, { tournamentId: event.tournamentId, divisionId: event.division.id }),
      keptReadings(tx, scope, { eventId: event.id }),
    ]);
    const mine = kept.get(event.id);
    return {
      event: {
        slug: event.slug,
        name: event.name,
        moduleKey: event.moduleKey,
        state: event.state,
        room: event.room,
        division: { name: event.division.name, letter: event.division.letter, shape: event.division.shape },
      },
      setup: event.setup,
      setupVersion: event.setupVersion,
      locked: event.setupLockedAt !== null,
      teams: teams.map((team) => ({
        id: team.id,
        number: team.number,
        label: teamLabel(event.division.letter, team.number),
        name: team.name,
        schoolName: team.schoolName,
        kept: mine?.get(team.id) ?? {},
      })),
      asOf: now().toISOString(),
    };
  });
}

/** One team's line on the event's page. */
export interface EventLine extends FieldRow {
  /** A part's value in words, by part; null where nothing is kept. */
  words: { part: string; name: string; text: string | null; changed: boolean }[];
}

/** The event's page: where it stands, the field, what may be done next. */
export interface EventPage {
  event: EventRow;
  kind: string;
  scoreLabel: string;
  field: Field;
  lines: EventLine[];
  hasCsv: boolean;
  may: { lead: boolean; direct: boolean };
}

/** An event with its field as its leader and the director see it. @throws AppError not-found, not-allowed */
export async function loadEventPage(scope: Scope, slug: string): Promise<EventPage> {
  const { event, field } = await withScope(scope, async (tx) => {
    const found = await getEventBySlug(tx, scope, slug);
    if (!canLead(scope, found)) throw new AppError('not-allowed', 'Only this event’s leader sees its scores, or the tournament’s director.');
    return { event: found, field: await eventField(tx, scope, found) };
  });
  const module = getEventModule(event.moduleKey);
  const setup = setupOf(event);
  return {
    event,
    kind: module.name,
    scoreLabel: module.scoreScale(setup).label,
    field,
    hasCsv: module.parts.some((p) => p.csv),
    may: { lead: true, direct: canDirect(scope, event.tournamentId) },
    lines: field.ranked.map((row) => ({
      ...row,
      words: module.parts.map((part) => ({
        part: part.key,
        name: part.name,
        text: row.kept[part.key] ? part.describe(setup, row.kept[part.key]!.value) : null,
        changed: (row.kept[part.key]?.version ?? 0) > 1,
      })),
    })),
  };
}

/** One change in a team's history. */
export interface HistoryEntry {
  partName: string;
  version: number;
  words: string;
  reason: string;
  keptAt: Date;
  keptBy: string;
  stands: boolean;
}

/** A team's readings in an event: how each counts, and every value that was ever kept. */
export interface TeamHistory {
  event: EventRow;
  team: { id: string; label: string; name: string; schoolName: string };
  workings: { part: string; name: string; lines: { label: string; value: string }[] }[];
  details: { label: string; display: string }[];
  score: string | null;
  entries: HistoryEntry[];
}

function describeStatus(value: unknown): string {
  const { status, note } = readStatus(value);
  return `${STATUS_WORDS[status]}${note ? `: ${note}` : ''}`;
}

/** @throws AppError not-found, not-allowed */
export async function loadTeamHistory(scope: Scope, slug: string, teamId: string): Promise<TeamHistory> {
  const { event, team, revisions, kept } = await withScope(scope, async (tx) => {
    const found = await getEventBySlug(tx, scope, slug);
    requireLeader(scope, found);
    const who = await getTeamInScope(tx, scope, teamId);
    if (who.divisionId !== found.division.id) throw notFound();
    const [history, readings] = await Promise.all([listRevisions(tx, scope, found.id, teamId), keptReadings(tx, scope, { eventId: found.id })]);
    return { event: found, team: who, revisions: history, kept: readings.get(found.id)?.get(teamId) ?? {} };
  });
  const module = getEventModule(event.moduleKey);
  const setup = setupOf(event);
  const parts = Object.fromEntries(module.parts.flatMap((p) => (kept[p.key] ? [[p.key, kept[p.key]!.value]] : [])));
  const score = module.score(setup, parts);
  const faults = new Set<string>(score.faults.map((f) => f.part));
  return {
    event,
    team: { id: team.id, label: teamLabel(event.division.letter, team.number), name: team.name, schoolName: team.schoolName },
    workings: module.parts.flatMap((p) => {
      const value = kept[p.key]?.value;
      if (value === undefined) return [];
      if (faults.has(p.key)) return [{ part: p.key, name: p.name, lines: [{ label: 'Does not fit', value: score.faults.find((f) => f.part === p.key)!.message }] }];
      return [{ part: p.key, name: p.name, lines: p.workings(setup, value) }];
    }),
    details: score.details.map((d) => ({ label: d.label, display: d.display })),
    score: score.display,
    entries: revisions.map((r) => {
      const part = module.parts.find((p) => p.key === r.part);
      return {
        partName: part?.name ?? 'Takes part',
        version: r.version,
        words: part ? part.describe(setup, r.value) : describeStatus(r.value),
        reason: r.reason,
        keptAt: new Date(r.keptAt),
        keptBy: r.keptBy,
        stands: kept[r.part]?.version === r.version,
      };
    }),
  };
}

/** A file: header, rows and what to call it. */
export interface NamedFile {
  name: string[];
  header: string[];
  rows: CsvCell[][];
}

/** The template of a part that comes in by CSV, filled in with the teams and with what is kept. @throws AppError */
export async function loadTemplate(scope: Scope, slug: string, partKey: string): Promise<NamedFile> {
  const state = await loadEntry(scope, slug);
  const module = getEventModule(state.event.moduleKey);
  const part = module.parts.find((p) => p.key === partKey);
  if (!part?.csv || state.setup === null) throw notFound('There is no template for this.');
  const { csv } = part;
  const fields = csv.fields(state.setup);
  return {
    name: [state.event.name, state.event.division.name, part.name],
    header: ['Team number', 'Team', 'School', ...fields.map((f) => f.header)],
    rows: state.teams.map((team) => {
      const kept = team.kept[partKey];
      return [team.label, team.name, team.schoolName, ...(kept ? csv.toCsvCells(state.setup, kept.value) : fields.map(() => null))];
    }),
  };
}

/** Everything that was ever kept in a tournament, for the office's own records. @throws AppError not-allowed */
export async function loadEveryReading(scope: Scope): Promise<NamedFile> {
  requireDirector(scope, scope.tournamentId);
  const { events, teams, revisions } = await withScope(scope, async (tx) => ({
    events: await listEvents(tx, scope, scope.tournamentId!),
    teams: await listTeams(tx, scope, { tournamentId: scope.tournamentId!, states: ['waiting', 'confirmed', 'withdrawn'] }),
    revisions: await everyRevision(tx, scope, scope.tournamentId!),
  }));
  const eventById = new Map(events.map((e) => [e.id, e]));
  const teamById = new Map(teams.map((x) => [x.id, x]));
  return {
    name: ['readings'],
    header: ['Event', 'Division', 'Team number', 'Team', 'School', 'Part', 'Version', 'Stands', 'Value', 'Kept at', 'Kept by', 'Reason'],
    rows: revisions.map((r): CsvCell[] => {
      const event = eventById.get(r.eventId)!;
      const team = teamById.get(r.teamId)!;
      const module = getEventModule(event.moduleKey);
      const part = module.parts.find((p) => p.key === r.part);
      return [
        event.name,
        event.division.name,
        teamLabel(event.division.letter, team.number),
        team.name,
        team.schoolName,
        part?.name ?? 'Takes part',
        r.version,
        r.stands ? 'yes' : 'no',
        r.part === STATUS_PART ? describeStatus(r.value) : (part?.describe(setupOf(event), r.value) ?? groupThousands(JSON.stringify(r.value))),
        r.keptAt,
        r.keptBy,
        r.reason,
      ];
    }),
  };
}

