/**
 * The demo: two offices, one with a finished tournament and one that is live at mid-day. Everything is done by the product's own
 * commands, so that seeding exercises the rules. Always the same but for the day: the live tournament is today, in a zone where
 * it is late morning now.
 *
 * Does nothing when the demo is there already. Writes the accounts to FAIRLEAD_ACCOUNTS_FILE.
 */
import { writeFileSync } from 'node:fs';
import { dayOf, wallMinutes, wallTimeOf } from '../src/domain/time';
import { acceptEvent, handIn, takeBack } from '../src/features/results/commands/hand-in';
import { releaseResults } from '../src/features/results/commands/release-results';
import { settleFinding } from '../src/features/results/commands/settle-finding';
import { loadReleasePage, loadScores } from '../src/features/results/loaders';
import { addSchool } from '../src/features/schools/commands/keep-school';
import { keepReading } from '../src/features/scores/commands/keep-reading';
import { addresses } from '../src/features/organizations/tables';
import { addDivision } from '../src/features/tournaments/commands/add-division';
import { createTournament } from '../src/features/tournaments/commands/create-tournament';
import { addTeam } from '../src/features/entries/commands/keep-team';
import { addEvent } from '../src/features/events/commands/add-event';
import { closeDatabase, withPerson } from '../src/server/database';
import { newId } from '../src/server/ids';
import { eq } from 'drizzle-orm';
import { makeDraw } from './draw';
import { DEMO_PASSWORD, PEOPLE, SCHOOLS } from './names';
import { at, Device, Office } from './office';
import { makePeople, type Cast } from './people';
import { giveLeader, keepRuns, keepTests, makeTournament, setUp, type MadeTournament } from './tournament';

const DAY = 86_400_000;
/** Zones round the world, an hour or so apart. */
const ZONES = [
  'America/Chicago', 'America/New_York', 'America/Denver', 'America/Los_Angeles', 'America/Halifax', 'America/Sao_Paulo', 'America/Noronha', 'Atlantic/Azores', 'Europe/London', 'Europe/Paris',
  'Africa/Johannesburg', 'Africa/Nairobi', 'Asia/Dubai', 'Asia/Karachi', 'Asia/Dhaka', 'Asia/Bangkok', 'Asia/Singapore', 'Asia/Tokyo', 'Australia/Brisbane', 'Pacific/Noumea', 'Pacific/Auckland',
  'Pacific/Honolulu', 'America/Anchorage',
];
const MIDDAY = wallMinutes('11:42');

/** The zone in which the office's clock is nearest to late morning. */
function zoneForMidday(moment: Date): string {
  const off = (zone: string) => Math.abs(wallMinutes(wallTimeOf(moment, zone)) - MIDDAY);
  return [...ZONES].sort((a, b) => off(a) - off(b))[0]!;
}

async function finishAll(office: Office, cast: Cast, t: MadeTournament): Promise<void> {
  const director = () => office.as(cast.noor, t.id);
  for (const event of t.events) await at(office.moment(t.day, '13:50'), async () => handIn(await office.as(cast[event.leader], t.id), event.slug));
  await at(office.moment(t.day, '14:20'), async () => {
    const scope = await director();
    for (const { event, field } of await loadScores(scope)) {
      for (const finding of field.open) {
        const none = finding.words === 'Nothing is kept.';
        await settleFinding(scope, event.slug, {
          teamId: finding.teamId,
          fingerprint: finding.fingerprint,
          outcome: none ? 'did-not-start' : 'counts-as-nothing',
          reason: none ? 'Not in the room when called twice; its coach was told.' : 'The sheet was handed in blank.',
        });
      }
      await acceptEvent(scope, event.slug);
    }
  });
}

async function release(office: Office, cast: Cast, t: MadeTournament, wall: string, publicLine: string): Promise<void> {
  await at(office.moment(t.day, wall), async () => {
    const scope = await office.as(cast.noor, t.id);
    const { mark } = await loadReleasePage(scope);
    await releaseResults(scope, office.zone, { publicLine, when: 'now', at: '', seen: mark });
  });
}

/** Fernhollow, four weeks ago: everything is in, released, and corrected once. */
async function finished(office: Office, cast: Cast, schoolIds: string[], day: string, enlisted: Set<string>): Promise<void> {
  const draw = makeDraw(11);
  const t = await at(new Date(office.moment(day, '09:00').getTime() - 30 * DAY), () =>
    makeTournament(office, cast, schoolIds, {
      name: 'Fernhollow Tournament', shortName: 'Fernhollow', slug: 'fernhollow', day, venue: 'Fernhollow High School', venueNote: 'Parking behind the gym; enter by the north doors.',
      summary: 'The first date of the season: 58 teams, 12 events in each division.',
    }, draw),
  );
  for (const event of t.events) {
    await at(new Date(office.moment(day, '18:00').getTime() - 6 * DAY), async () => {
      await giveLeader(office, cast, t, event, enlisted);
      await setUp(await office.as(cast[event.leader], t.id), event);
    });
    const scope = await office.as(cast[event.leader], t.id);
    const teams = t.teams[event.division];
    // One team never came to one event; another left its sheet blank.
    const came = event.demo.name === 'Heat Loss' && event.division === 'senior' ? teams.filter((x) => x.number !== 17) : teams;
    if (event.demo.module === 'optics-shoot') {
      await keepRuns(scope, event, came, office.moment(day, '09:02'), 8, draw);
      await at(office.moment(day, '13:20'), () => keepTests(scope, event, came.filter((x) => event.division === 'junior' || x.number !== 22), draw));
      if (event.division === 'senior') {
        const device = new Device();
        await at(office.moment(day, '12:05'), () =>
          keepReading(scope, event.slug, {
            teamId: teams[25]!.id, part: 'status', value: { status: 'dq', note: 'A student looked along the beam after two warnings.' }, baseVersion: 0, setupVersion: 1, key: newId(), device: device.id, sequence: device.next(), reason: '',
          }),
        );
      }
    } else {
      await at(office.moment(day, '12:30'), () => keepTests(scope, event, came, draw));
    }
  }
  await finishAll(office, cast, t);
  await release(office, cast, t, '15:12', '');
  // A page had stuck to another: one test is marked again, and release 2 says so.
  const corrected = t.events.find((e) => e.demo.name === 'Pond Life' && e.division === 'senior')!;
  await at(office.moment(day, '16:05'), async () => {
    const director = await office.as(cast.noor, t.id);
    const leader = await office.as(cast[corrected.leader], t.id);
    await takeBack(director, corrected.slug, 'A coach found a page that had not been marked.');
    const device = new Device();
    await keepReading(leader, corrected.slug, {
      teamId: t.teams.senior[1]!.id, part: 'test', value: { points: '', groups: { a: '38', b: '33', c: '23.5' } }, baseVersion: 1, setupVersion: 1, key: newId(), device: device.id, sequence: device.next(),
      reason: 'Page 4 had stuck to page 5 and was not marked.',
    });
    await handIn(leader, corrected.slug);
    await acceptEvent(director, corrected.slug);
  });
  await release(office, cast, t, '16:20', 'Pond Life, Senior: one test had an unmarked page and was marked again.');
}

/** Larkwater, today: the morning's events are in, the rest on their way. */
async function live(office: Office, cast: Cast, schoolIds: string[], day: string, moment: Date, enlisted: Set<string>): Promise<void> {
  const draw = makeDraw(29);
  const t = await at(new Date(moment.getTime() - 40 * DAY), () =>
    makeTournament(office, cast, schoolIds, {
      name: 'Larkwater Tournament', shortName: 'Larkwater', slug: 'larkwater', day, venue: 'Larkwater High School', venueNote: 'Park in lot C, enter by the gym. Step-free way in from Mill Lane.',
      summary: 'Twelve events in each division. Junior teams start in block 1, Seniors in block 2; awards are in the auditorium.',
    }, draw),
  );
  await at(new Date(moment.getTime() - 12 * DAY), () => office.enlist(cast.juno, 'volunteer', { tournamentId: t.id }));
  const before = (minutes: number) => new Date(moment.getTime() - minutes * 60_000);
  for (const event of t.events) {
    const { name } = event.demo;
    // Two things a director still has to see to.
    const noLeader = name === 'Signal Codes' && event.division === 'junior';
    const notLocked = name === 'Seed Lines' && event.division === 'senior';
    if (noLeader) continue;
    await at(new Date(moment.getTime() - 5 * DAY), async () => {
      await giveLeader(office, cast, t, event, enlisted);
      await setUp(await office.as(cast[event.leader], t.id), event, !notLocked);
    });
    const scope = await office.as(cast[event.leader], t.id);
    const teams = t.teams[event.division];
    if (name === 'Optics Shoot') {
      const done = event.division === 'junior' ? 17 : 14;
      await keepRuns(scope, event, teams.slice(0, done), before(done * 8 + 3), 8, draw);
      if (event.division === 'junior') await at(before(55), () => keepTests(scope, event, teams, draw));
    } else if (name === 'Body Systems' || name === 'Heat Loss') {
      await at(before(95), () => keepTests(scope, event, teams, draw));
      await at(before(70), () => handIn(scope, event.slug));
      await at(before(48), async () => acceptEvent(await office.as(cast.noor, t.id), event.slug));
    } else if (name === 'Pond Life' || (name === 'Reaction Rate' && event.division === 'junior')) {
      const missing = event.division === 'senior' ? [7, 19] : name === 'Pond Life' ? [12] : [];
      await at(before(62), () => keepTests(scope, event, teams.filter((x) => !missing.includes(x.number)), draw));
      await at(before(21), () => handIn(scope, event.slug));
    } else if (name === 'Night Charts' || name === 'Reaction Rate') {
      await at(before(26), () => keepTests(scope, event, teams, draw));
    } else if (name === 'Sound Pipes') {
      await at(before(9), () => keepTests(scope, event, teams.slice(0, Math.floor(teams.length * 0.6)), draw));
    }
  }
}

async function main(): Promise<void> {
  const already = await withPerson(null, (tx) => tx.select({ slug: addresses.slug }).from(addresses).where(eq(addresses.slug, 'thistlemoor')));
  if (already.length > 0) {
    console.log('The demo is there already.');
    return;
  }
  const moment = new Date();
  const zone = zoneForMidday(moment);
  const today = dayOf(moment, zone);
  const cast = await at(new Date(moment.getTime() - 90 * DAY), makePeople);
  const { office, schoolIds } = await at(new Date(moment.getTime() - 80 * DAY), async () => {
    const founded = await Office.found(cast.ilse, { name: 'Thistlemoor Regional', slug: 'thistlemoor', timeZone: zone, currency: 'USD', contact: 'office@thistlemoor.example' });
    const scope = await founded.as(cast.ilse);
    const ids: string[] = [];
    for (const school of SCHOOLS) ids.push((await addSchool(scope, school)).id);
    await founded.enlist(cast.tobin, 'treasurer');
    await founded.enlist(cast.amara, 'coach', { schoolId: ids[0]! });
    await founded.enlist(cast.leif, 'coach', { schoolId: ids[1]! });
    return { office: founded, schoolIds: ids };
  });
  const enlisted = new Set<string>();
  await finished(office, cast, schoolIds, dayOf(new Date(moment.getTime() - 28 * DAY), zone), enlisted);
  await live(office, cast, schoolIds, today, moment, enlisted);

  // Another office, which none of the first may see into.
  await at(new Date(moment.getTime() - 20 * DAY), async () => {
    const league = await Office.found(cast.rafe, { name: 'Ambermarsh League', slug: 'ambermarsh', timeZone: 'America/New_York', currency: 'USD', contact: 'league@ambermarsh.example' });
    const owner = await league.as(cast.rafe);
    const { id } = await createTournament(owner, {
      name: 'Sedgeway Cup', shortName: 'Sedgeway', slug: 'sedgeway', day: dayOf(new Date(moment.getTime() + 45 * DAY), 'America/New_York'), startsAt: '09:00', endsAt: '14:00',
      venue: 'Sedgeway Hall', venueNote: '', summary: 'A small first date for new schools.',
    });
    const scope = await league.as(cast.rafe, id);
    const division = await addDivision(scope, { name: 'Open', letter: 'A', shape: 'square' });
    for (const name of ['Millrace School', 'Ostler’s Green School', 'Reedholm School']) {
      const school = await addSchool(owner, { name, town: 'Ambermarsh' });
      await addTeam(scope, { divisionId: division.id, schoolId: school.id, name });
    }
    await addEvent(scope, { name: 'Optics Shoot', moduleKey: 'optics-shoot', divisionIds: [division.id], room: 'Hall', isTrial: false });
  });
  console.log(`The demo is filled in; it is ${wallTimeOf(moment, zone)} at Thistlemoor.`);
}

await main();
const file = process.env['FAIRLEAD_ACCOUNTS_FILE'];
if (file) {
  const shown = Object.values(PEOPLE).filter((p) => p.words !== '');
  writeFileSync(file, `${JSON.stringify(shown.map((p) => ({ who: p.words, name: p.name, email: p.email, password: DEMO_PASSWORD })), null, 2)}\n`, { mode: 0o600 });
}
await closeDatabase();
process.exit(0);
