import type { TournamentInfo } from '~/server/request-scope';
import { getEventModule } from '~/event-modules/registry';
import { now } from '~/server/clock';
import { withScope } from '~/server/database';
import { AppError, notFound } from '~/server/errors';
import type { Scope } from '~/server/scope';
import { listTeams } from '../entries/queries';
import { schoolsOf } from '../schools/policy';
import { schoolNames } from '../schools/queries';
import { canDirect, requireDirector } from '../tournaments/policy';
import { getTournament, listDivisions } from '../tournaments/queries';
import { assembleSnapshot, divisionFile, everyEventFile, type CsvFile, type EventWithField } from './assembly';
import { obstaclesTo, snapshotMark } from './policy';
import { getRelease, listReleases, tournamentFields } from './queries';
import type { Obstacle, Release, ReleasedDivision, ReleasedEvent, ReleasedPlace, ReleasedTeam, ReleaseRow, ReleaseSnapshot } from './types';

/** Every event with its field, for the director. @throws AppError not-allowed */
export function loadScores(scope: Scope): Promise<EventWithField[]> {
  requireDirector(scope, scope.tournamentId);
  return withScope(scope, (tx) => tournamentFields(tx, scope, scope.tournamentId!));
}

/** What a release would hold, what stands in its way, and the releases there are. */
export interface ReleasePage {
  obstacles: Obstacle[];
  /** Null while something stands in the way. */
  preview: ReleaseSnapshot | null;
  mark: string;
  releases: ReleaseRow[];
  /** How many places differ from the newest release; null without one. */
  changes: { team: string; division: string; event: string; before: string; after: string }[] | null;
}

function changesBetween(before: ReleaseSnapshot, after: ReleaseSnapshot): ReleasePage['changes'] {
  const out: NonNullable<ReleasePage['changes']> = [];
  const key = (d: ReleasedDivision, t: ReleasedTeam) => `${d.id}/${t.teamId}`;
  const earlier = new Map(before.divisions.flatMap((d) => d.rows.map((t) => [key(d, t), t] as const)));
  const words = (p: ReleasedPlace | undefined) => (p === undefined ? 'not there' : p.status === 'scored' ? `${p.place} (${p.display})` : p.status === 'dns' ? 'did not start' : 'disqualified');
  for (const d of after.divisions) {
    for (const t of d.rows) {
      const was = earlier.get(key(d, t));
      t.events.forEach((p, i) => {
        const old = was?.events.find((x) => x.eventId === p.eventId);
        if (words(old) !== words(p)) out.push({ team: t.name, division: d.name, event: d.events[i]!.name, before: words(old), after: words(p) });
      });
      if (was && (was.place !== t.place || was.total !== t.total)) {
        out.push({ team: t.name, division: d.name, event: 'All events', before: `${was.place} (${was.total})`, after: `${t.place} (${t.total})` });
      }
    }
  }
  return out;
}

/** @throws AppError not-allowed */
export async function loadReleasePage(scope: Scope): Promise<ReleasePage> {
  requireDirector(scope, scope.tournamentId);
  return withScope(scope, async (tx) => {
    const tournament = await getTournament(tx, scope);
    const [divisions, events, releases, newest] = await Promise.all([
      listDivisions(tx, scope, tournament.id),
      tournamentFields(tx, scope, tournament.id),
      listReleases(tx, scope, tournament.id),
      getRelease(tx, scope, tournament.id, 'newest'),
    ]);
    const obstacles = obstaclesTo(events);
    const preview = obstacles.length > 0 ? null : assembleSnapshot({ dropWorst: tournament.dropWorst, advance: tournament.advance, perSchool: tournament.perSchool }, divisions, events);
    return { obstacles, preview, mark: preview ? snapshotMark(preview) : '', releases, changes: preview && newest ? changesBetween(newest.snapshot, preview) : null };
  });
}

/** What the public may see of a tournament's results. */
export interface PublicResults {
  tournament: { name: string; shortName: string; day: string };
  /** Null while nothing is public. */
  release: Release | null;
  /** All public releases, newest first. */
  history: ReleaseRow[];
  /** When the next release becomes public, if one waits. */
  next: Date | null;
}

/**
 * The newest release that is public. A tournament that is not published and has nothing released is not there for the public.
 *
 * @throws AppError not-found
 */
export async function loadPublicResults(scope: Scope): Promise<PublicResults> {
  return withScope(scope, async (tx) => {
    const tournament = await getTournament(tx, scope);
    const [release, all] = await Promise.all([getRelease(tx, scope, tournament.id, 'public'), listReleases(tx, scope, tournament.id)]);
    if (!release && !tournament.isPublished && !canDirect(scope, tournament.id)) throw notFound();
    const waiting = all.filter((r) => r.publicFrom > now()).sort((a, b) => a.publicFrom.getTime() - b.publicFrom.getTime());
    return {
      tournament: { name: tournament.name, shortName: tournament.shortName, day: tournament.day },
      release,
      history: all.filter((r) => r.publicFrom <= now()),
      next: waiting[0]?.publicFrom ?? null,
    };
  });
}

/** One division's public file. @throws AppError not-found */
export async function loadDivisionFile(scope: Scope, divisionSlug: string): Promise<CsvFile & { number: number; next: Date | null }> {
  const { release, next } = await loadPublicResults(scope);
  const division = release?.snapshot.divisions.find((d) => d.slug === divisionSlug);
  if (!release || !division) throw notFound();
  return { ...divisionFile(division), number: release.number, next };
}

/** A whole release as a file, for the office. @throws AppError not-found, not-allowed */
export async function loadReleaseFile(scope: Scope, tournament: TournamentInfo, number: string): Promise<CsvFile> {
  requireDirector(scope, scope.tournamentId);
  if (!/^[1-9]\d{0,5}$/.test(number)) throw notFound();
  const release = await withScope(scope, (tx) => getRelease(tx, scope, tournament.id, Number(number)));
  if (!release) throw notFound();
  return everyEventFile(tournament, release);
}

/** One event of one of the school's teams against the field. */
export interface SchoolEvent {
  event: ReleasedEvent;
  place: ReleasedPlace;
  kind: string;
  /** The parts of the score beside the field's median and best, where they are numbers. */
  parts: { header: string; own: string | null; median: string | null; best: string | null }[];
}

export interface SchoolTeam {
  team: ReleasedTeam;
  division: ReleasedDivision;
  events: SchoolEvent[];
}

export interface SchoolResults {
  schools: { id: string; name: string }[];
  /** Teams of the school in this tournament, whatever is released. */
  teams: { label: string; name: string; schoolName: string; division: string }[];
  release: Release | null;
  next: Date | null;
  results: SchoolTeam[];
}

function coachSchools(scope: Scope): string[] {
  const ids = schoolsOf(scope);
  if (ids.length === 0) throw new AppError('not-allowed', 'This page is for a school’s coaches.');
  return ids;
}

function partsOf(division: ReleasedDivision, index: number, own: ReleasedPlace): SchoolEvent['parts'] {
  const event = division.events[index]!;
  return event.columns.map((column, at) => {
    const mine = own.cells[at] ?? null;
    if (column.type !== 'number') return { header: column.header, own: mine, median: null, best: null };
    const field = division.rows
      .flatMap((r) => {
        const p = r.events[index]!;
        return p.status === 'scored' && p.cells[at] != null ? [p.cells[at]] : [];
      })
      .sort((a, b) => Number(a) - Number(b));
    // For showing only: nothing is decided by it.
    return { header: column.header, own: mine, median: field[Math.floor((field.length - 1) / 2)] ?? null, best: division.rows.map((r) => r.events[index]!).find((p) => p.place === 1)?.cells[at] ?? null };
  });
}

/** A coach's page: the school's teams against the field. @throws AppError not-allowed, not-found */
export async function loadSchoolResults(scope: Scope): Promise<SchoolResults> {
  const schoolIds = coachSchools(scope);
  return withScope(scope, async (tx) => {
    const tournament = await getTournament(tx, scope);
    const [schools, divisions, teams, release, all] = await Promise.all([
      schoolNames(tx, scope, schoolIds),
      listDivisions(tx, scope, tournament.id),
      listTeams(tx, scope, { tournamentId: tournament.id, schoolIds }),
      getRelease(tx, scope, tournament.id, 'public'),
      listReleases(tx, scope, tournament.id),
    ]);
    const mine = new Set(schoolIds);
    return {
      schools,
      teams: teams.map((x) => {
        const d = divisions.find((v) => v.id === x.divisionId)!;
        return { label: `${d.letter}${String(x.number).padStart(2, '0')}`, name: x.name, schoolName: x.schoolName, division: d.name };
      }),
      release,
      next: all.find((r) => r.publicFrom > now())?.publicFrom ?? null,
      results: (release?.snapshot.divisions ?? []).flatMap((division) =>
        division.rows
          .filter((r) => mine.has(r.schoolId))
          .map((team) => ({
            team,
            division,
            events: team.events.map((place, i) => ({ event: division.events[i]!, place, kind: getEventModule(division.events[i]!.moduleKey).name, parts: partsOf(division, i, place) })),
          })),
      ),
    };
  });
}

/** The coach's file: every event of the school's own teams. @throws AppError not-allowed, not-found */
export async function loadSchoolFile(scope: Scope, tournament: TournamentInfo): Promise<CsvFile & { number: number }> {
  const mine = new Set(coachSchools(scope));
  const release = await withScope(scope, (tx) => getRelease(tx, scope, tournament.id, 'public'));
  if (!release) throw notFound('Nothing is released yet.');
  const teamIds = new Set(release.snapshot.divisions.flatMap((d) => d.rows.filter((r) => mine.has(r.schoolId)).map((r) => r.teamId)));
  return { ...everyEventFile(tournament, release, teamIds), number: release.number };
}
