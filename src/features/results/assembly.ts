/** Puts together what the queries give: a release's frozen contents, and its files. Pure. */
import { csvNumber, type CsvCell } from '~/domain/csv';
import { fromRatioText, toShortText } from '~/domain/exact';
import { quartiles } from '~/domain/ranking/quartiles';
import { teamTotals } from '~/domain/ranking/team-totals';
import { getEventModule } from '~/event-modules/registry';
import type { EventRow } from '../events/types';
import type { Field } from '../scores/types';
import { teamLabel } from '../scores/assembly';
import type { DivisionRow } from '../tournaments/types';
import type { ReleasedDivision, ReleasedEvent, ReleasedPlace, ReleasedTeam, ReleaseSnapshot } from './types';

/** An event with its field. */
export interface EventWithField {
  event: EventRow;
  field: Field;
}

function plainCell(cell: CsvCell): string | null {
  if (cell === null) return null;
  return typeof cell === 'object' ? cell.decimal : String(cell);
}

function releasedEvent({ event, field }: EventWithField): ReleasedEvent {
  const module = getEventModule(event.moduleKey);
  const scores = field.ranked.flatMap((r) => (r.status === 'scored' && r.exact !== null ? [fromRatioText(r.exact)] : []));
  const q = quartiles(scores);
  return {
    id: event.id,
    slug: event.slug,
    name: event.name,
    moduleKey: event.moduleKey,
    isTrial: event.isTrial,
    fieldSize: field.rows.length,
    scored: scores.length,
    scoreLabel: module.scoreScale(event.setup).label,
    quartiles: q && { q1: toShortText(q.lower), median: toShortText(q.median), q3: toShortText(q.upper) },
    columns: module.resultColumns(event.setup),
  };
}

/** Which of a team's counted values are left out: for equal values the later event. */
function markDropped(places: ReleasedPlace[], counts: boolean[], dropped: readonly number[]): void {
  const left = [...dropped];
  for (let i = places.length - 1; i >= 0; i--) {
    const at = counts[i] ? left.indexOf(places[i]!.points) : -1;
    if (at >= 0) {
      left.splice(at, 1);
      places[i]!.dropped = true;
    }
  }
}

/**
 * Everything the results pages and files show. Every event's field must be complete (nothing open).
 *
 * @throws Error when a team of the division has no place in one of its events: an event was not settled
 */
export function assembleSnapshot(rules: ReleaseSnapshot['rules'], divisions: readonly DivisionRow[], events: readonly EventWithField[]): ReleaseSnapshot {
  return {
    format: 1,
    rules,
    divisions: divisions.flatMap((division): ReleasedDivision[] => {
      const mine = events.filter((e) => e.event.division.id === division.id);
      if (mine.length === 0) return [];
      const released = mine.map(releasedEvent);
      const teams = mine[0]!.field.rows;
      const cells = mine.map(({ event, field }) => {
        const module = getEventModule(event.moduleKey);
        return new Map(
          field.rows.map((row) => [row.teamId, { row, cells: row.status === 'scored' ? module.resultCells(event.setup, row.counted).map(plainCell) : module.resultColumns(event.setup).map(() => null) }]),
        );
      });
      const placesOf = (teamId: string): ReleasedPlace[] =>
        mine.map(({ event }, i) => {
          const found = cells[i]!.get(teamId);
          if (!found || found.row.points === null) throw new Error(`${event.slug} is not settled`);
          const { row } = found;
          return {
            eventId: event.id,
            status: row.status,
            place: row.place,
            points: row.points!,
            display: row.display,
            exact: row.exact,
            cells: found.cells,
            dropped: false,
          };
        });
      const counts = mine.map(({ event }) => !event.isTrial);
      const counted = counts.filter(Boolean).length;
      const withPlaces = teams.map((team) => ({ team, places: placesOf(team.teamId) }));
      const totals =
        counted === 0
          ? null
          : teamTotals({
              events: mine.map(({ event }) => ({ name: event.name, trial: event.isTrial })),
              teams: withPlaces.map(({ team, places }) => ({ team: team.number, school: team.schoolId, places: places.map((p) => p.points) })),
              drop: Math.min(rules.dropWorst, counted - 1),
              advance: rules.advance,
              perSchool: rules.perSchool,
            });
      const byNumber = new Map(withPlaces.map((w) => [w.team.number, w]));
      const order = totals ? totals.rows.map((r) => ({ number: r.team, total: r.total, place: r.place as number | null, dropped: r.dropped })) : withPlaces.map((w) => ({ number: w.team.number, total: 0, place: null, dropped: [] as number[] }));
      return [
        {
          id: division.id,
          slug: division.slug,
          name: division.name,
          letter: division.letter,
          shape: division.shape,
          events: released,
          rows: order.map((r): ReleasedTeam => {
            const { team, places } = byNumber.get(r.number)!;
            markDropped(places, counts, r.dropped);
            return {
              teamId: team.teamId,
              number: team.number,
              name: team.name,
              schoolId: team.schoolId,
              schoolName: team.schoolName,
              place: r.place,
              total: r.total,
              goesOn: totals?.advance.includes(team.number) ?? false,
              cutTie: totals?.cutTie.includes(team.number) ?? false,
              events: places,
            };
          }),
        },
      ];
    }),
  };
}

/** A place in words for a table: '3', 'did not start', 'disqualified'. */
export function placeWords(place: ReleasedPlace): string {
  return place.status === 'dns' ? 'did not start' : place.status === 'dq' ? 'disqualified' : String(place.place);
}

/** A file: header and rows, for `writeCsv`. */
export interface CsvFile {
  header: string[];
  rows: CsvCell[][];
}

const number = (text: string | null): CsvCell => (text === null ? null : csvNumber(text));

/** One division as the public may download it: a row a team, two columns an event. */
export function divisionFile(division: ReleasedDivision): CsvFile {
  return {
    header: ['Place', 'Team number', 'Team', 'School', 'Total', 'Goes on', ...division.events.flatMap((e) => [`${e.name}: place`, `${e.name}: ${e.scoreLabel.toLowerCase()}`])],
    rows: division.rows.map((row) => [
      row.place,
      teamLabel(division.letter, row.number),
      row.name,
      row.schoolName,
      row.total,
      row.goesOn ? 'yes' : row.cutTie ? 'equal at the cut' : 'no',
      ...row.events.flatMap((p): CsvCell[] => [p.status === 'scored' ? p.place : placeWords(p), number(p.display)]),
    ]),
  };
}

/**
 * A row for every team and event: places, scores, the parts of each score, field size and quartiles. Columns of the parts are the
 * union over the events, in the order in which they first come up.
 *
 * @param teamIds only these teams; all of them when left out
 */
export function everyEventFile(tournament: { name: string; day: string }, release: { number: number; snapshot: ReleaseSnapshot }, teamIds?: ReadonlySet<string>): CsvFile {
  const { divisions } = release.snapshot;
  const headers: string[] = [];
  for (const d of divisions) for (const e of d.events) for (const c of e.columns) if (!headers.includes(c.header)) headers.push(c.header);
  const rows: CsvCell[][] = [];
  for (const division of divisions) {
    for (const team of division.rows) {
      if (teamIds && !teamIds.has(team.teamId)) continue;
      team.events.forEach((p, i) => {
        const event = division.events[i]!;
        const parts = new Map<string, CsvCell>(event.columns.map((c, at) => [c.header, c.type === 'number' ? number(p.cells[at] ?? null) : (p.cells[at] ?? null)]));
        rows.push([
          tournament.name,
          tournament.day,
          release.number,
          division.name,
          teamLabel(division.letter, team.number),
          team.name,
          team.schoolName,
          event.name,
          event.isTrial ? 'trial' : p.dropped ? 'left out' : 'yes',
          p.status === 'scored' ? 'scored' : placeWords(p),
          p.place,
          event.fieldSize,
          p.points,
          number(p.display),
          number(event.quartiles?.q1 ?? null),
          number(event.quartiles?.median ?? null),
          number(event.quartiles?.q3 ?? null),
          team.place,
          team.total,
          ...headers.map((h) => parts.get(h) ?? null),
        ]);
      });
    }
  }
  return {
    header: [
      'Tournament', 'Day', 'Release', 'Division', 'Team number', 'Team', 'School', 'Event', 'Counts', 'Status', 'Place', 'Field', 'Place points', 'Score',
      'Field: lower quartile', 'Field: median', 'Field: upper quartile', 'Team place', 'Team total', ...headers,
    ],
    rows,
  };
}
