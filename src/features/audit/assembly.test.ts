import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { expect, test } from 'vitest';
import { ACTION_WORDS, actionsSaying, auditLine } from './assembly';
import { AUDIT_KINDS } from './constants';
import type { AuditRow } from './types';

const features = fileURLToPath(new URL('..', import.meta.url));

/** Every action that a command or the database's own functions write. */
function writtenActions(): Set<string> {
  const found = new Set(['score.kept']);
  for (const feature of readdirSync(features)) {
    let files: string[] = [];
    try {
      files = readdirSync(join(features, feature, 'commands'));
    } catch {
      continue;
    }
    for (const file of files) {
      const text = readFileSync(join(features, feature, 'commands', file), 'utf8');
      if (text.includes('writeAudit')) for (const m of text.matchAll(/'([a-z]+\.[a-z]+(?:-[a-z]+)*)'/g)) found.add(m[1]!);
    }
  }
  return found;
}

const row = (over: Partial<AuditRow>): AuditRow => ({
  id: '',
  at: new Date(0),
  actor: 'Rosa Okonjo',
  action: 'event.changed',
  subjectType: 'event',
  subject: 'Optics Shoot (Senior)',
  tournament: 'Larkwater',
  team: null,
  person: null,
  detail: {},
  ...over,
});

test('every action has words, and belongs to one kind that the trail can be narrowed to', () => {
  for (const action of writtenActions()) expect(ACTION_WORDS, `${action} has no words`).toHaveProperty([action]);
  for (const action of Object.keys(ACTION_WORDS)) expect(AUDIT_KINDS.filter((k) => k.nouns.includes(action.split('.')[0]!)), action).toHaveLength(1);
});

test('an entry says who did what to which thing, and what was before', () => {
  expect(auditLine(row({ detail: { before: { name: 'Optics', room: 'Gym A', isTrial: false }, after: { name: 'Optics Shoot', room: 'Gym A', isTrial: true } } }))).toMatchObject({
    who: 'Rosa Okonjo',
    what: 'changed the event Optics Shoot (Senior)',
    facts: ['Name: Optics → Optics Shoot', 'Trial event: no → yes'],
  });
  expect(auditLine(row({ action: 'score.kept', team: 'S09 Wrenfield', detail: { team: 'an id', part: 'test', version: 2, value: { points: 42, order: [1, 2] }, reason: 'misread' } }))).toMatchObject({
    what: 'changed a reading of S09 Wrenfield in Optics Shoot (Senior)',
    facts: ['Part: test', 'Version: 2', 'Value: points 42, order 1 2', 'Reason: misread'],
  });
});

test('what is gone keeps the name it had; what is unknown is shown as it is', () => {
  expect(auditLine(row({ action: 'event.removed', subject: null, detail: { name: 'Pond Life', division: 'Junior' } })).what).toBe('removed the event Pond Life (Junior)');
  expect(auditLine(row({ action: 'robot.built-twice', actor: null }))).toMatchObject({ who: 'Fairlead', what: 'robot built twice', facts: [] });
});

test('words find their actions', () => {
  expect(actionsSaying('Handed In')).toEqual(['event.handed-in']);
  expect(actionsSaying('changed a reading')).toEqual(['score.kept']);
  expect(actionsSaying('no such words')).toEqual([]);
});
