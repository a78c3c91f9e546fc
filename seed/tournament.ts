/** One tournament of the demo, from its first draft to as far as its day has come. */
import { opticsDefaults, type OpticsSetup } from '../src/event-modules/optics-shoot/setup';
import type { OpticsRun } from '../src/event-modules/optics-shoot/run';
import type { WrittenTestSetup } from '../src/event-modules/written-test/module';
import { addTeam } from '../src/features/entries/commands/keep-team';
import { addEvent } from '../src/features/events/commands/add-event';
import { assignLeader } from '../src/features/events/commands/assign-leader';
import { keepSetup } from '../src/features/profiles/commands/keep-setup';
import { lockSetup } from '../src/features/profiles/commands/lock-setup';
import { importPart, keepReading } from '../src/features/scores/commands/keep-reading';
import { addDivision } from '../src/features/tournaments/commands/add-division';
import { createTournament } from '../src/features/tournaments/commands/create-tournament';
import { updateTournament } from '../src/features/tournaments/commands/update-tournament';
import { newId } from '../src/server/ids';
import type { Scope } from '../src/server/scope';
import { EVENTS, SCHOOLS, type DemoEvent, type PersonKey } from './names';
import { at, Device, type Office } from './office';
import type { Cast } from './people';

export interface Team {
  id: string;
  number: number;
  name: string;
  /** 0 to 1: how well it does on the whole. */
  ability: number;
}

export interface MadeEvent {
  id: string;
  slug: string;
  demo: DemoEvent;
  division: 'junior' | 'senior';
  leader: PersonKey;
}

export interface MadeTournament {
  id: string;
  slug: string;
  day: string;
  teams: { junior: Team[]; senior: Team[] };
  events: MadeEvent[];
}

const TEST_GROUPS = [
  { key: 'a', name: 'Part A', max: '40' },
  { key: 'b', name: 'Part B', max: '35' },
  { key: 'c', name: 'Part C', max: '25' },
];

function opticsSetup(division: 'junior' | 'senior'): OpticsSetup {
  return {
    ...opticsDefaults(),
    barriersStanding: division === 'junior' ? 1 : 3,
    laser: { class: '2', note: 'red, 650 nm, under 1 mW, kits 1 to 6' },
    fullScale: '500',
    testMax: '40',
    barrierRule: 'A barrier counts when the beam meets its silvered face on the way to the spot, whatever it meets before or after.',
  };
}

function testSetup(demo: DemoEvent): WrittenTestSetup {
  return demo.isTrial ? { max: '60', groups: [], tieBreak: [] } : { max: '100', groups: TEST_GROUPS, tieBreak: ['c', 'b', 'a'] };
}

/** Divisions, teams, events, leaders and plan of the day, as a director would set them up some weeks before. */
export async function makeTournament(
  office: Office,
  cast: Cast,
  schoolIds: readonly string[],
  particulars: { name: string; shortName: string; slug: string; day: string; venue: string; venueNote: string; summary: string },
  draw: () => number,
): Promise<MadeTournament> {
  const { id, slug } = await createTournament(await office.as(office.owner), { ...particulars, startsAt: '08:00', endsAt: '15:30' });
  await office.enlist(cast.noor, 'director', { tournamentId: id });
  const director = await office.as(cast.noor, id);
  await updateTournament(director, {
    advance: 6,
    perSchool: 2,
    dropWorst: 1,
    isPublished: true,
    dayPlan: [
      { label: 'Check-in', from: '08:00', to: '08:45' },
      { label: 'Block 1', from: '09:00', to: '09:50' },
      { label: 'Block 2', from: '10:05', to: '10:55' },
      { label: 'Block 3', from: '11:10', to: '12:00' },
      { label: 'Lunch', from: '12:00', to: '12:40' },
      { label: 'Block 4', from: '12:45', to: '13:35' },
      { label: 'Scoring', from: '13:35', to: '14:30' },
      { label: 'Awards', from: '14:45', to: '15:30' },
    ],
  });
  const junior = await addDivision(director, { name: 'Junior', letter: 'J', shape: 'round' });
  const senior = await addDivision(director, { name: 'Senior', letter: 'S', shape: 'square' });
  const entered = { junior: [] as Team[], senior: [] as Team[] };
  const enter = async (division: 'junior' | 'senior', school: number, name: string) => {
    const made = await addTeam(director, { divisionId: division === 'junior' ? junior.id : senior.id, schoolId: schoolIds[school]!, name });
    entered[division].push({ ...made, name, ability: 0.35 + 0.6 * draw() });
  };
  // 30 seniors of 17 schools, 28 juniors of 18: Wrenfield enters both.
  for (let s = 0; s < 17; s++) {
    const two = s >= 1 && s <= 13;
    await enter('senior', s, two || s === 0 ? `${SCHOOLS[s]!.name} 1` : SCHOOLS[s]!.name);
    if (two) await enter('senior', s, `${SCHOOLS[s]!.name} 2`);
  }
  for (let s = 17; s < 34; s++) {
    const two = s <= 26;
    await enter('junior', s, two ? `${SCHOOLS[s]!.name} 1` : SCHOOLS[s]!.name);
    if (two) await enter('junior', s, `${SCHOOLS[s]!.name} 2`);
  }
  await enter('junior', 0, `${SCHOOLS[0]!.name} 2`);

  const events: MadeEvent[] = [];
  for (const demo of EVENTS) {
    const made = await addEvent(director, { name: demo.name, moduleKey: demo.module, divisionIds: [junior.id, senior.id], room: demo.room, isTrial: demo.isTrial ?? false });
    for (const event of made) {
      events.push({ id: event.id, slug: event.slug, demo, division: event.divisionId === junior.id ? 'junior' : 'senior', leader: demo.leader as PersonKey });
    }
  }
  return { id, slug, day: particulars.day, teams: entered, events };
}

/** Put its leader in charge of an event. The first event of a leader comes by invitation. */
export async function giveLeader(office: Office, cast: Cast, tournament: MadeTournament, event: MadeEvent, enlisted: Set<string>): Promise<void> {
  const leader = cast[event.leader];
  if (enlisted.has(leader.personId)) {
    await assignLeader(await office.as(cast.noor, tournament.id), event.slug, leader.personId);
  } else {
    await office.enlist(leader, 'leader', { tournamentId: tournament.id, eventId: event.id });
    enlisted.add(leader.personId);
  }
}

/** The leader sets the scoring profile and locks it, unless it is left for later. */
export async function setUp(scope: Scope, event: MadeEvent, lock = true): Promise<void> {
  const setup = event.demo.module === 'optics-shoot' ? opticsSetup(event.division) : testSetup(event.demo);
  const { version } = await keepSetup(scope, { eventSlug: event.slug, setup, baseVersion: 0 });
  if (lock) await lockSetup(scope, { eventSlug: event.slug, version });
}

/** Half points between 0 and `most`. */
function points(most: number, ability: number, draw: () => number): string {
  const share = Math.min(1, Math.max(0, ability + (draw() - 0.5) * 0.35));
  return String(Math.round(most * share * 2) / 2);
}

function testValue(demo: DemoEvent, ability: number, draw: () => number): unknown {
  if (demo.module === 'optics-shoot') return { points: points(40, ability, draw) };
  if (demo.isTrial) return { points: points(60, ability, draw) };
  return { points: '', groups: { a: points(40, ability, draw), b: points(35, ability * 0.9, draw), c: points(25, ability * 0.75, draw) } };
}

/** Points of an event's teams, from the leader's file. */
export async function keepTests(scope: Scope, event: MadeEvent, teams: readonly Team[], draw: () => number): Promise<void> {
  if (teams.length === 0) return;
  const device = new Device();
  await importPart(scope, event.slug, {
    part: 'test',
    setupVersion: 1,
    device: device.id,
    rows: teams.map((team) => ({ teamId: team.id, value: testValue(event.demo, team.ability, draw), baseVersion: 0, key: newId(), sequence: device.next() })),
  });
}

/** One run at the box: good teams come near, some miss every wall, now and then one hits a side wall. */
function drawRun(event: MadeEvent, ability: number, draw: () => number): OpticsRun {
  const standing = event.division === 'junior' ? 1 : 3;
  const used = { mirrorsUsed: 2 + Math.floor(draw() * 4), barriersUsed: Math.min(standing, Math.floor(draw() * (standing + 1) + ability * 0.6)), timeUsedSeconds: String(120 + Math.floor(draw() * 121)) };
  const luck = draw();
  if (luck < 0.05) return { reading: { kind: 'none' }, ...used };
  if (luck < 0.14) return { reading: { kind: 'tape', wall: luck < 0.1 ? 'left' : 'right', tape: String(Math.round(300 + draw() * 280)) }, ...used };
  const off = (1.05 - ability) * 380 * (draw() - 0.5) * 2;
  const tape = Math.min(1000, Math.max(0, 500 + off));
  return { reading: { kind: 'tape', wall: 'back', tape: (Math.round(tape * 2) / 2).toString() }, ...used };
}

/** Runs of an optics shoot, one after the other from a moment on, `minutes` apart. */
export async function keepRuns(scope: Scope, event: MadeEvent, teams: readonly Team[], from: Date, minutes: number, draw: () => number): Promise<void> {
  const device = new Device();
  for (const [i, team] of teams.entries()) {
    await at(new Date(from.getTime() + i * minutes * 60_000), async () => {
      const value = drawRun(event, team.ability, draw);
      const { version } = await keepReading(scope, event.slug, { teamId: team.id, part: 'run', value, baseVersion: 0, setupVersion: 1, key: newId(), device: device.id, sequence: device.next(), reason: '' });
      // Now and then a reading is read again.
      if (i % 9 === 4 && value.reading.kind === 'tape') {
        await keepReading(scope, event.slug, {
          teamId: team.id,
          part: 'run',
          value: { ...value, reading: { ...value.reading, tape: String(Number(value.reading.tape) > 999 ? 999 : Number(value.reading.tape) + 1) } },
          baseVersion: version,
          setupVersion: 1,
          key: newId(),
          device: device.id,
          sequence: device.next(),
          reason: 'read again with the other leader',
        });
      }
    });
  }
}

