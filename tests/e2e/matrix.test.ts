/**
 * Role × route × organization, made from the routes themselves: a new route is in the matrix the
 * moment its file exists. Every visitor tries every route; whoever the declared access does not let
 * in gets nothing, and nobody gets anything of another organization's.
 */
import { beforeAll, describe, expect, test } from 'vitest';
import { grant, makeDivision, makeEvent, makeOrganization, makePerson, makeSchool, makeTeam, makeTournament, type TestOrganization, type TestPerson } from '../factories/world';
import { ROLES, type Role } from '~/server/scope';
import { useApplication } from './application';
import { listRoutes, type Route } from './routes';

const app = useApplication({ DATABASE_POOL: '12' });
const routes = listRoutes();

interface World {
  org: TestOrganization;
  tournament: string;
  event: string;
  division: string;
  divisionId: string;
  schoolId: string;
  teamId: string;
  secret: string;
  people: Record<Role, TestPerson>;
}

async function makeWorld(secret: string): Promise<World> {
  const org = await makeOrganization({ name: `Office ${secret}` });
  const t = await makeTournament(org, { name: `Tournament ${secret}`, shortName: secret, slug: `cup-${secret.toLowerCase()}` });
  const d = await makeDivision(org, t.id);
  const s = await makeSchool(org, `School ${secret}`);
  const team = await makeTeam(org, { tournamentId: t.id, divisionId: d.id, schoolId: s.id, name: `Team ${secret}` });
  const e = await makeEvent(org, { tournamentId: t.id, divisionId: d.id, name: `Event ${secret}` });
  const people = { owner: org.owner } as Record<Role, TestPerson>;
  for (const role of ROLES) {
    if (role === 'owner') continue;
    people[role] = await makePerson({ name: `${role} ${secret}` });
    await grant(org, people[role], role, {
      tournamentId: role === 'treasurer' || role === 'coach' ? null : t.id,
      eventId: role === 'leader' ? e.id : null,
      schoolId: role === 'coach' ? s.id : null,
    });
  }
  return { org, tournament: t.slug, event: e.slug, division: d.slug, divisionId: d.id, schoolId: s.id, teamId: team.id, secret, people };
}

let mine: World;
let other: World;
let stranger: TestPerson;

beforeAll(async () => {
  mine = await makeWorld('Quillbrook');
  other = await makeWorld('Zephyrdale');
  stranger = await makePerson({ name: 'Stranger' });
});

function address(route: Route, world: World): string {
  const values: Record<string, string> = {
    org: world.org.slug,
    tournament: world.tournament,
    event: world.event,
    division: world.division,
    team: world.teamId,
    part: 'test',
    school: world.schoolId,
    person: world.people.coach.id,
    number: '1',
  };
  if (route.pattern.startsWith('/api/') && route.pattern.includes('[division]')) values['division'] = world.divisionId;
  return route.pattern.replace(/\[(?:\.\.\.)?(\w+)\]/g, (_, name: string) => values[name] ?? '018f0000-0000-7000-8000-000000000000');
}

async function tryRoute(route: Route, world: World, cookie: string | null): Promise<{ status: number; text: string; location: string }> {
  const abort = new AbortController();
  const response = await fetch(`${app.url}${address(route, world)}`, {
    method: route.method,
    redirect: 'manual',
    signal: abort.signal,
    headers: {
      ...(cookie ? { cookie } : {}),
      ...(route.method === 'GET' ? {} : { origin: app.url, 'content-type': 'application/json' }),
    },
    ...(route.method === 'GET' ? {} : { body: '{}' }),
  });
  // A stream never ends by itself.
  const text = route.kind === 'stream' && response.status === 200 ? '' : await response.text();
  if (route.kind === 'stream') abort.abort();
  return { status: response.status, text, location: response.headers.get('location') ?? '' };
}

/** True when the answer gives nothing away: sent to sign in, refused, or not found. */
function refused(answer: { status: number; location: string }): boolean {
  return [401, 403, 404].includes(answer.status) || (answer.status === 302 && /^\/(sign-in|check-mail)/.test(answer.location));
}

test('every route declares who may come in, and there are as many as there are files', () => {
  expect(routes.length).toBeGreaterThan(20);
  const table = routes.map((r) => `${r.method.padEnd(6)} ${r.pattern.padEnd(64)} ${typeof r.access === 'string' ? r.access : r.access.roles.join(', ')}`);
  console.log(`${routes.length} routes\n${table.join('\n')}`);
});

describe('each route', () => {
  for (const route of routes) {
    test(`${route.method} ${route.pattern}`, async () => {
      const inOrg = route.pattern.includes('[org]');
      const visitors: [string, string | null, Role | null][] = [
        ['nobody', null, null],
        ['a stranger', await app.cookieFor(stranger), null],
      ];
      for (const role of ROLES) visitors.push([role, await app.cookieFor(mine.people[role]), role]);
      for (const [who, cookie, role] of visitors) {
        const answer = await tryRoute(route, mine, cookie);
        expect(answer.status, `${who}: ${answer.text.slice(0, 300)}`).toBeLessThan(500);
        const { access } = route;
        const allowed =
          access === 'public' || access === 'signed'
            ? true
            : access === 'operator'
              ? false
              : access === 'person'
                ? cookie !== null
                : role !== null && (role === 'owner' || access.roles.includes(role));
        if (!allowed) expect(refused(answer), `${who} got ${answer.status} ${answer.location}`).toBe(true);
        if (!allowed && inOrg) expect(answer.text, who).not.toContain(`Team ${mine.secret}`);
        // Signing out would end the session the next route needs; it has its own test.
      }
      if (!inOrg || route.access === 'public' || route.access === 'signed') return;
      // Everybody of the other organization, at this one's address: the same as if it were not there.
      for (const role of ROLES) {
        const answer = await tryRoute(route, mine, await app.cookieFor(other.people[role]));
        expect(answer.status, `${role} of the other organization`).toBe(404);
        expect(answer.text).not.toMatch(/Quillbrook/);
      }
    });
  }
});

describe('public routes', () => {
  for (const route of routes.filter((r) => r.access === 'public' && r.pattern.includes('[org]') && r.method === 'GET')) {
    test(`${route.pattern} shows nothing of the other organization`, async () => {
      for (const cookie of [null, await app.cookieFor(other.people.owner), await app.cookieFor(mine.people.owner)]) {
        const answer = await tryRoute(route, mine, cookie);
        expect(answer.text).not.toMatch(/Zephyrdale/);
      }
    });
  }
});
