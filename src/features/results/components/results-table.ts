/**
 * The public results as one escaped string: a component call per cell would make the page eight times dearer. The drawing
 * is a rule of places: one dot an event, dots of one place stacked.
 */
import { markup, raw, type Markup } from '~/components/markup';
import { schoolBeside, teamLabel } from '../../scores/assembly';
import { placeWords } from '../assembly';
import type { ReleasedDivision, ReleasedTeam } from '../types';

const WIDTH = 400;
const ROW = 40;
const STEP = 7;

function ordinal(n: number): string {
  const tens = n % 100;
  const suffix = tens >= 11 && tens <= 13 ? 'th' : (['th', 'st', 'nd', 'rd'][n % 10] ?? 'th');
  return `${n}${suffix}`;
}

function xOf(value: number, most: number): number {
  return most <= 1 ? 6 : 6 + ((Math.min(value, most) - 1) / (most - 1)) * (WIDTH - 12);
}

/** The scale above the dots: a mark every place, a number every ten. */
function scale(most: number): Markup {
  const every = most > 60 ? 5 : 1;
  const ticks: Markup[] = [];
  for (let n = 1; n <= most; n += every) {
    const major = n === 1 || (n - 1) % 10 === 0 || n === most;
    ticks.push(markup`<path class="${major ? 'mm-major' : 'mm-minor'}" d="M${xOf(n, most).toFixed(1)} 20V${major ? 32 : 27}"></path>`);
  }
  const labels = [...new Set([1, ...[11, 21, 31, 41, 51, 61].filter((n) => n < most - 4), most])];
  return markup`<svg class="places-scale" viewBox="0 0 ${WIDTH} 33" aria-hidden="true"><path class="mm-major" d="M6 20H${WIDTH - 6}"></path>${ticks}${labels.map(
    (n) => markup`<text class="mm-label" x="${xOf(n, most).toFixed(1)}" y="12" text-anchor="${n === 1 ? 'start' : n === most ? 'end' : 'middle'}">${ordinal(n)}</text>`,
  )}</svg>`;
}

function dots(team: ReleasedTeam, most: number): Markup {
  const at = new Map<number, number>();
  const drawn = team.events.map((p) => {
    const value = Math.min(p.points, most);
    const level = at.get(value) ?? 0;
    at.set(value, level + 1);
    const tone = p.status === 'scored' && p.place !== null && p.place <= 3 ? 'first' : p.dropped ? 'left-out' : 'plain';
    return markup`<circle class="${tone}" cx="${xOf(value, most).toFixed(1)}" cy="${ROW - 7 - Math.min(level, 4) * STEP}" r="2.8"></circle>`;
  });
  return markup`<svg class="places" viewBox="0 0 ${WIDTH} ${ROW}" aria-hidden="true"><path d="M6 ${ROW - 0.5}H${WIDTH - 6}"></path>${drawn}</svg>`;
}

/** One team's places on a rule of its own, for the school's page. */
export function teamPlaces(team: ReleasedTeam, most: number): string {
  return markup`<div class="places-wide">${dots(team, most)}${scale(most)}</div>`.html;
}

function bestTwo(division: ReleasedDivision, team: ReleasedTeam): Markup {
  const best = team.events
    .map((p, i) => ({ p, name: division.events[i]!.name }))
    .filter(({ p }) => p.status === 'scored')
    .sort((a, b) => a.p.place! - b.p.place!)
    .slice(0, 2);
  return markup`${best.map(({ p, name }, i) => markup`${i > 0 ? ' · ' : ''}<b>${p.place}</b> ${name}`)}`;
}

/** The division's table: place, team, the rule of places, total, best two. */
export function resultsTable(division: ReleasedDivision): string {
  const most = division.rows.length;
  return markup`<table class="table results">
<caption class="sr-only">${division.name} division: places, totals and best events</caption>
<thead><tr><th scope="col" class="n">Place</th><th scope="col">Team</th><th scope="col" class="places-head"><span class="sr-only">Places in the events</span>${scale(most)}</th><th scope="col" class="n">Total</th><th scope="col" class="best">Best two</th></tr></thead>
<tbody>${division.rows.map(
    (team) => markup`<tr id="${teamLabel(division.letter, team.number)}"><td class="n">${team.place ?? '–'}</td><th scope="row"><span>${team.name}</span>${
      team.goesOn ? raw(' <span class="tag ok">goes on</span>') : team.cutTie ? raw(' <span class="tag wait">equal at the cut</span>') : ''
    }${schoolBeside(team) === null ? '' : markup`<small>${team.schoolName}</small>`}</th><td class="places-cell">${dots(team, most)}</td><td class="n"><b>${team.total}</b></td><td class="best">${bestTwo(division, team)}</td></tr>
`,
  )}</tbody></table>`.html;
}

/** Every team's place in every event, the event's name leading to its own page. */
export function placesTable(division: ReleasedDivision, base: string): string {
  return markup`<table class="table dense every">
<caption class="sr-only">${division.name} division: every team’s place in every event</caption>
<thead><tr><th scope="col">Team</th><th scope="col" class="n">Total</th>${division.events.map(
    (e) => markup`<th scope="col" class="n"><a href="${base}/${e.slug}">${e.name}</a>${e.isTrial ? raw('<small>trial</small>') : ''}</th>`,
  )}</tr></thead>
<tbody>${division.rows.map(
    (team) => markup`<tr><th scope="row"><span class="num">${teamLabel(division.letter, team.number)}</span> ${team.name}</th><td class="n"><b>${team.total}</b></td>${team.events.map(
      (p) => markup`<td class="n${p.dropped ? ' out' : ''}">${p.status === 'scored' ? p.place : p.status === 'dns' ? 'dns' : 'dq'}</td>`,
    )}</tr>
`,
  )}</tbody></table>`.html;
}

/** One event's ranking with scores. */
export function eventTable(division: ReleasedDivision, index: number): string {
  const event = division.events[index]!;
  const rows = division.rows
    .map((team) => ({ team, p: team.events[index]! }))
    .sort((a, b) => a.p.points - b.p.points || a.team.number - b.team.number);
  return markup`<table class="table results-event">
<caption class="sr-only">${event.name}, ${division.name} division: places and scores</caption>
<thead><tr><th scope="col" class="n">Place</th><th scope="col">Team</th><th scope="col" class="n">${event.scoreLabel}</th></tr></thead>
<tbody>${rows.map(
    ({ team, p }) => markup`<tr><td class="n">${p.status === 'scored' ? p.place : '–'}</td><th scope="row"><span class="num">${teamLabel(division.letter, team.number)}</span> ${team.name}${
      schoolBeside(team) === null ? '' : markup`<small>${team.schoolName}</small>`
    }</th><td class="n">${
      p.status === 'scored' ? (p.display ?? '–') : placeWords(p)
    }</td></tr>
`,
  )}</tbody></table>`.html;
}
