/**
 * Who is told that something changed. A change is announced after its transaction has committed;
 * announcements are gathered for 20 ms and sent as one NOTIFY, because a NOTIFY inside a
 * transaction makes commits wait for each other. Every process listens and passes on to its own
 * listeners. What is announced is a topic, never data: whoever hears it asks again, under their own
 * rights. If a process dies between commit and NOTIFY, the announcement 'everything' that each
 * process makes when it starts, and every listener's own reconnect, cover what was lost.
 */
import pg from 'pg';
import { pool } from './database';
import { environment } from './environment';
import { errorForLog, logger } from './logger';
import { singleton } from './singleton';

const CHANNEL = 'fairlead';
export const EVERYTHING = '*';

/** The topic of what happens in one tournament. */
export function tournamentTopic(orgId: string, tournamentId: string): string {
  return `${orgId}:${tournamentId}`;
}
/** The topic of an organization's own particulars. */
export function orgTopic(orgId: string): string {
  return orgId;
}

type Listener = (topic: string) => void;

interface State {
  listeners: Set<Listener>;
  gathered: Set<string>;
  timer: NodeJS.Timeout | null;
  client: pg.Client | null;
  stopped: boolean;
}

const state = singleton<State>('live', () => ({ listeners: new Set(), gathered: new Set(), timer: null, client: null, stopped: false }));

/** Say that something under the topic has changed. Call it after the commit. */
export function announce(topic: string): void {
  state.gathered.add(topic);
  state.timer ??= setTimeout(flush, 20);
}

function flush(): void {
  state.timer = null;
  const topics = [...state.gathered];
  state.gathered.clear();
  // NOTIFY carries less than 8,000 bytes; a topic is 73.
  for (let i = 0; i < topics.length; i += 80) {
    pool()
      .query('select pg_notify($1, $2)', [CHANNEL, JSON.stringify(topics.slice(i, i + 80))])
      .catch((error: unknown) => logger().warn({ error: errorForLog(error) }, 'announcement not sent'));
  }
}

/** Hear every announcement of every process. Returns a function that ends it. */
export function hear(listener: Listener): () => void {
  state.listeners.add(listener);
  return () => state.listeners.delete(listener);
}

/** Open the connection that listens, and keep it open. */
export async function startListening(): Promise<void> {
  const client = new pg.Client({
    connectionString: environment().DATABASE_DIRECT_URL ?? environment().DATABASE_URL,
    application_name: 'fairlead-listen',
    keepAlive: true,
  });
  const again = () => {
    if (state.stopped || state.client !== client) return;
    state.client = null;
    setTimeout(() => startListening().catch(() => undefined), 500);
  };
  state.client = client;
  client.on('error', again);
  client.on('end', again);
  client.on('notification', (message) => {
    if (!message.payload) return;
    for (const topic of JSON.parse(message.payload) as string[]) {
      for (const listener of state.listeners) listener(topic);
    }
  });
  try {
    await client.connect();
    await client.query(`listen ${CHANNEL}`);
    // Whatever was announced while nobody listened here.
    for (const listener of state.listeners) listener(EVERYTHING);
  } catch (error) {
    logger().warn({ error: errorForLog(error) }, 'not listening yet');
    client.end().catch(() => undefined);
    again();
  }
}

/** Send what is gathered, stop listening. */
export async function stopListening(): Promise<void> {
  state.stopped = true;
  if (state.timer) {
    clearTimeout(state.timer);
    flush();
  }
  await state.client?.end().catch(() => undefined);
}
