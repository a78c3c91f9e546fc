import { createHash } from 'node:crypto';
import { checkValue } from '~/domain/fields';
import type { AnyEventModule } from '~/event-modules/contract';
import { getEventModule } from '~/event-modules/registry';
import { STATUS_PART, statusSchema } from '~/event-modules/status-part';
import { now } from '~/server/clock';
import { callInScope, prepared, withScope, type Tx } from '~/server/database';
import { AppError, notFound } from '~/server/errors';
import { newId } from '~/server/ids';
import { announce, tournamentTopic } from '~/server/live';
import { personOf, type Scope } from '~/server/scope';
import { singleton } from '~/server/singleton';
import { requireLeader } from '../../events/policy';
import { getEventBySlug } from '../../events/queries';
import type { ImportPart, KeepReading } from '../schema';
import type { KeptAnswer } from '../types';

/** What a reading is checked against. Immutable for a version of a set-up, so it is kept in memory. */
interface Rules {
  eventId: string;
  tournamentId: string;
  module: AnyEventModule;
  setup: unknown;
  setupVersion: number;
  /** By part, made when first asked for: making one costs more than using it. */
  schemas: Map<string, Parameters<typeof checkValue<unknown>>[0]>;
}

const rulesKept = singleton('keep-reading-rules', () => new Map<string, Rules>());
const MOST_RULES = 500;

async function readRules(scope: Scope, eventSlug: string): Promise<Rules> {
  const event = await withScope(scope, (tx) => getEventBySlug(tx, scope, eventSlug));
  const module = getEventModule(event.moduleKey);
  const rules: Rules = { eventId: event.id, tournamentId: event.tournamentId, module, setup: event.setup, setupVersion: event.setupVersion, schemas: new Map() };
  if (rulesKept.size >= MOST_RULES) rulesKept.delete(rulesKept.keys().next().value!);
  rulesKept.set(`${scope.orgId}/${scope.tournamentId}/${eventSlug}`, rules);
  return rules;
}

/** The rules under which the device typed, or a refusal that says which are in force. */
async function rulesFor(scope: Scope, eventSlug: string, setupVersion: number): Promise<Rules> {
  const known = rulesKept.get(`${scope.orgId}/${scope.tournamentId}/${eventSlug}`);
  const rules = known?.setupVersion === setupVersion ? known : await readRules(scope, eventSlug);
  requireLeader(scope, { id: rules.eventId, tournamentId: rules.tournamentId });
  if (rules.setupVersion !== setupVersion || rules.setup === null) throw setupChanged(rules.setupVersion);
  return rules;
}

function setupChanged(setupVersion: number): AppError {
  return new AppError('conflict', 'The event’s set-up was changed meanwhile. Load it, look at this reading again, then keep it.', { extra: { setupVersion } });
}

/** The value in canonical form. @throws AppError bad-input with the fields as typed */
function checkPart(rules: Rules, part: string, value: unknown, prefix = 'value'): unknown {
  const schema = rules.schemas.get(part) ?? (part === STATUS_PART ? statusSchema : rules.module.parts.find((p) => p.key === part)?.schema(rules.setup));
  if (!schema) throw notFound();
  rules.schemas.set(part, schema as never);
  const checked = checkValue<unknown>(schema, value);
  if (checked.ok) return checked.value;
  throw new AppError('bad-input', checked.fields.length === 1 ? checked.fields[0]!.message : `${checked.fields.length} things need another look.`, {
    fields: checked.fields.map((f) => ({ path: f.path === '' ? prefix : `${prefix}.${f.path}`, message: f.message })),
  });
}

type Outcome =
  | { outcome: 'kept' | 'replayed'; answer: KeptAnswer }
  | { outcome: 'key-reused' | 'not-found' }
  | { outcome: 'locked-out'; state: string }
  | { outcome: 'setup-changed'; setupVersion: number; locked: boolean }
  | { outcome: 'stale'; current: { version: number; value: unknown; keptAt: string; keptBy: string } | null };

/** The answer, or the refusal, that an outcome means. */
function answerOf(result: Outcome): KeptAnswer {
  switch (result.outcome) {
    case 'kept':
    case 'replayed':
      return result.answer;
    case 'key-reused':
      throw new AppError('key-reused', 'This key was used for another reading. Load the page again and keep it once more.');
    case 'not-found':
      throw notFound('This team is not in this event any more.');
    case 'locked-out':
      throw new AppError('out-of-order', result.state === 'accepted' ? 'This event is accepted: its scores stand. Ask the director to take it back.' : 'This event is handed in. Take it back first, then change the reading.');
    case 'setup-changed':
      if (!result.locked) throw new AppError('out-of-order', 'Scoring waits: the event’s set-up is not locked.', { extra: { setupVersion: result.setupVersion } });
      throw setupChanged(result.setupVersion);
    case 'stale':
      throw new AppError('stale', 'Somebody kept another value for this team meanwhile. Which one is right?', { extra: { current: result.current } });
  }
}

interface Row {
  teamId: string;
  part: string;
  value: unknown;
  baseVersion: number;
  setupVersion: number;
  key: string;
  device: string;
  sequence: number;
  reason: string;
}

const CALL = 'keep_reading($1, $2, $3, $4, $5, $6, $7::jsonb, $8, $9, $10, $11, $12, $13, $14, $15)';

function argumentsOf(rules: Rules, row: Row): unknown[] {
  const value = JSON.stringify(row.value);
  // What makes two requests the same one: everything but the device's own counters.
  const hash = createHash('sha256')
    .update(JSON.stringify([rules.eventId, row.teamId, row.part, value, row.baseVersion, row.setupVersion]))
    .digest('hex');
  return [rules.eventId, row.setupVersion, row.teamId, row.part, value, row.baseVersion, row.key, hash, row.device, row.sequence, row.reason, newId(), now()];
}

/**
 * Keep one reading: the effect, its revision, the audit row, the key and the answer are committed together, in one round trip.
 * A repeat of the key gets the answer of the first time. What was kept before stays in the history.
 *
 * @throws AppError not-found, not-allowed, bad-input (fields under `value`), conflict with `setupVersion` when the set-up was
 *   changed meanwhile, out-of-order when the event takes no readings, stale with `current` when another version stands,
 *   key-reused
 */
export async function keepReading(scope: Scope, eventSlug: string, input: KeepReading): Promise<KeptAnswer> {
  personOf(scope);
  const rules = await rulesFor(scope, eventSlug, input.setupVersion);
  const value = checkPart(rules, input.part, input.value);
  const result = await callInScope<Outcome>(scope, 'keep_reading', CALL, argumentsOf(rules, { ...input, value }));
  if (result.outcome === 'setup-changed') rulesKept.delete(`${scope.orgId}/${scope.tournamentId}/${eventSlug}`);
  const answer = answerOf(result);
  if (result.outcome === 'kept') announce(tournamentTopic(scope.orgId, rules.tournamentId));
  return answer;
}

async function callIn(tx: Tx, scope: Scope, values: unknown[]): Promise<Outcome> {
  const { rows } = await tx.client.query(prepared('keep_reading', `select ${CALL} as r`, [scope.orgId, personOf(scope), ...values]));
  return rows[0]!.r as Outcome;
}

/**
 * Keep one part of many teams, from a file: all of them or none. A refusal names the rows it is about (`rows.3.value.points`).
 *
 * @throws AppError as {@link keepReading}
 */
export async function importPart(scope: Scope, eventSlug: string, input: ImportPart): Promise<{ kept: number }> {
  const rules = await rulesFor(scope, eventSlug, input.setupVersion);
  const values = input.rows.map((row, i) => checkPart(rules, input.part, row.value, `rows.${i}.value`));
  await withScope(scope, async (tx) => {
    for (const [i, row] of input.rows.entries()) {
      const result = await callIn(
        tx,
        scope,
        argumentsOf(rules, { ...row, part: input.part, value: values[i], setupVersion: input.setupVersion, device: input.device, reason: 'from a file' }),
      );
      try {
        answerOf(result);
      } catch (error) {
        if (!(error instanceof AppError) || result.outcome === 'setup-changed' || result.outcome === 'locked-out') throw error;
        throw new AppError(error.code, result.outcome === 'stale' ? 'Somebody kept other points meanwhile, so nothing of this file was kept. Load the page again and choose the file once more.' : error.message, {
          fields: [{ path: `rows.${i}`, message: error.message }],
        });
      }
    }
  });
  announce(tournamentTopic(scope.orgId, rules.tournamentId));
  return { kept: input.rows.length };
}
