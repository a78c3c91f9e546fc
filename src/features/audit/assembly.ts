import type { AuditLine, AuditRow } from './types';

type Detail = Record<string, unknown>;

const text = (value: unknown): string => (value === null || value === undefined || value === '' ? 'nothing' : typeof value === 'boolean' ? (value ? 'yes' : 'no') : String(value));
const said = (d: Detail, key: string): string => (d[key] === undefined ? '' : text(d[key]));

/** The thing an entry is about, by its present name or the one it had then. */
function thing(row: AuditRow, fallback: string): string {
  const d = row.detail;
  const after = d['after'] as Detail | undefined;
  const before = d['before'] as Detail | undefined;
  const then = d['name'] ?? after?.['name'] ?? before?.['name'];
  const division = typeof d['division'] === 'string' ? ` (${d['division']})` : '';
  return row.subject ?? (typeof then === 'string' ? `${then}${division}` : fallback);
}

/** Every action of the commands in words that follow a person's name. A test compares the list with the commands. */
export const ACTION_WORDS: Record<string, (row: AuditRow) => string> = {
  'organization.created': (r) => `started the organization ${thing(r, '')}`.trim(),
  'organization.changed': () => 'changed the office’s settings',
  'invitation.sent': (r) => `invited ${said(r.detail, 'email')}: ${said(r.detail, 'words')}`,
  'invitation.resent': (r) => `sent the invitation of ${said(r.detail, 'email')} again: ${said(r.detail, 'words')}`,
  'invitation.withdrawn': (r) => `withdrew the invitation of ${said(r.detail, 'email')}: ${said(r.detail, 'words')}`,
  'invitation.accepted': (r) => `accepted the invitation: ${said(r.detail, 'words')}`,
  'invitation.declined': (r) => `declined the invitation: ${said(r.detail, 'words')}`,
  'role.changed': (r) => `changed a role of ${thing(r, 'somebody')}`,
  'role.removed': (r) => `took a role away from ${thing(r, 'somebody')}: ${said(r.detail, 'before')}`,
  'person.suspended': (r) => `suspended ${thing(r, 'somebody')}`,
  'person.restored': (r) => `restored ${thing(r, 'somebody')}`,
  'person.removed': (r) => `removed ${thing(r, 'somebody')} from the organization`,
  'leader.assigned': (r) => `put ${r.person ?? 'somebody'} in charge of ${thing(r, 'an event')}`,
  'leader.unassigned': (r) => `took ${r.person ?? 'somebody'} out of the charge of ${thing(r, 'an event')}`,
  'tournament.created': (r) => `added the tournament ${thing(r, '')}`.trim(),
  'tournament.changed': (r) => `changed the tournament ${thing(r, '')}`.trim(),
  'tournament.published': (r) => `published the programme of ${thing(r, 'a tournament')}`,
  'tournament.withdrawn': (r) => `took the programme of ${thing(r, 'a tournament')} from public view`,
  'division.added': (r) => `added the division ${thing(r, '')}`.trim(),
  'division.changed': (r) => `changed the division ${thing(r, '')}`.trim(),
  'division.removed': (r) => `removed the division ${thing(r, '')}`.trim(),
  'school.added': (r) => `added the school ${thing(r, '')}`.trim(),
  'school.changed': (r) => `changed the school ${thing(r, '')}`.trim(),
  'team.entered': (r) => `entered the team ${thing(r, '')}`.trim(),
  'team.changed': (r) => `changed the team ${thing(r, '')}`.trim(),
  'team.withdrawn': (r) => `withdrew the team ${thing(r, '')}`.trim(),
  'team.restored': (r) => `brought the team ${thing(r, '')} back`,
  'event.added': (r) => `added the event ${thing(r, '')}`.trim(),
  'event.changed': (r) => `changed the event ${thing(r, '')}`.trim(),
  'event.removed': (r) => `removed the event ${thing(r, '')}`.trim(),
  'event.handed-in': (r) => `handed in ${thing(r, 'an event')}`,
  'event.accepted': (r) => `accepted ${thing(r, 'an event')}`,
  'event.taken-back': (r) => `took ${thing(r, 'an event')} back`,
  'setup.kept': (r) => `kept the set-up of ${thing(r, 'an event')}`,
  'setup.locked': (r) => `locked the set-up of ${thing(r, 'an event')}`,
  'setup.unlocked': (r) => `unlocked the set-up of ${thing(r, 'an event')}`,
  'score.kept': (r) => `${Number(r.detail['version']) > 1 ? 'changed' : 'kept'} a reading of ${r.team ?? 'a team'} in ${thing(r, 'an event')}`,
  'score.settled': (r) => `settled a finding about ${r.team ?? said(r.detail, 'label')} in ${thing(r, 'an event')}`,
  'score.unsettled': (r) => `opened a settled finding about ${r.team ?? 'a team'} in ${thing(r, 'an event')} again`,
  'results.released': (r) => `released the results of ${thing(r, 'a tournament')}: release ${said(r.detail, 'number')}`,
};

/** What a member of a detail is called. Members that are not listed are ids, or are in the sentence already. */
const FACT_WORDS: Record<string, string> = {
  reason: 'Reason',
  version: 'Version',
  part: 'Part',
  value: 'Value',
  outcome: 'Outcome',
  words: 'Finding',
  publicLine: 'Public line',
  publicFrom: 'Public from',
  kept: 'Readings kept',
  keptReadings: 'Readings kept',
  missing: 'Missing',
  teams: 'Teams',
  settled: 'Settled',
  was: 'Was',
  roles: 'Roles until then',
  slug: 'Address',
  name: 'Name',
  shortName: 'Short name',
  day: 'Day',
  startsAt: 'Begins',
  endsAt: 'Ends',
  venue: 'Place',
  venueNote: 'About the place',
  summary: 'Summary',
  dayPlan: 'Plan of the day',
  dropWorst: 'Worst events left out',
  advance: 'Teams that go on',
  perSchool: 'Of one school at most',
  isTrial: 'Trial event',
  trial: 'Trial event',
  room: 'Room',
  letter: 'Letter',
  shape: 'Mark',
  number: 'Number',
  town: 'Town',
  timeZone: 'Time zone',
  currency: 'Currency',
  contact: 'Contact',
  email: 'E-mail',
};

/** What of a detail the sentence has said. */
const IN_SENTENCE: Record<string, string[]> = {
  invitation: ['email', 'words'],
  'role.removed': ['before'],
  'results.released': ['number'],
  'score.kept': [],
};

const MOST = 160;
const short = (s: string): string => (s.length > MOST ? `${s.slice(0, MOST - 1)}…` : s);

/** Any value on one line: '{"points":42,"order":[1,2]}' as 'points 42, order 1 2'. */
function flat(value: unknown): string {
  if (Array.isArray(value)) return value.map(flat).join(value.some((v) => typeof v === 'string') ? '; ' : ' ');
  if (value !== null && typeof value === 'object') {
    return Object.entries(value as Detail)
      .map(([k, v]) => `${k} ${flat(v)}`)
      .join(', ');
  }
  return text(value);
}

const label = (key: string): string => FACT_WORDS[key] ?? key;

function factsOf(row: AuditRow): string[] {
  const { before, after } = row.detail;
  if (typeof before === 'string' && typeof after === 'string') return [`${before} → ${after}`];
  const changes: string[] = [];
  if (row.action !== 'setup.kept' && after !== null && typeof after === 'object') {
    for (const [key, now] of Object.entries(after as Detail)) {
      const then = (before as Detail | undefined)?.[key];
      if (then === undefined || JSON.stringify(then) === JSON.stringify(now) || /Id$/.test(key)) continue;
      const isPlain = [then, now].every((v) => v === null || typeof v !== 'object');
      changes.push(isPlain ? short(`${label(key)}: ${text(then)} → ${text(now)}`) : `${label(key)} changed`);
    }
  }
  const skip = new Set(['before', 'after', 'team', 'person', 'division', 'label', 'role', 'name', 'kind', ...(IN_SENTENCE[row.action] ?? IN_SENTENCE[row.action.split('.')[0]!] ?? [])]);
  for (const [key, value] of Object.entries(row.detail)) {
    if (skip.has(key) || !(key in FACT_WORDS) || value === null || value === '' || value === false || (Array.isArray(value) && value.length === 0)) continue;
    changes.push(short(`${label(key)}: ${flat(value)}`));
  }
  return changes;
}

/** One entry in plain words. What no command writes any more is shown by its own name. */
export function auditLine(row: AuditRow): AuditLine {
  return {
    id: row.id,
    at: row.at,
    who: row.actor ?? 'Fairlead',
    what: ACTION_WORDS[row.action]?.(row) ?? row.action.replace(/[.-]/g, ' '),
    facts: factsOf(row),
    tournament: row.tournament,
  };
}

/** The actions whose words hold the text, whatever they are about: somebody looks for 'handed in'. */
export function actionsSaying(what: string): string[] {
  const blank: AuditRow = { id: '', at: new Date(0), actor: '', action: '', subjectType: '', subject: '…', tournament: '', team: '…', person: '…', detail: { email: '…', words: '…', before: '…', number: '…' } };
  return Object.entries(ACTION_WORDS).flatMap(([action, words]) =>
    [words(blank), words({ ...blank, detail: { ...blank.detail, version: 2 } })].some((w) => w.toLowerCase().includes(what.toLowerCase())) ? [action] : [],
  );
}
