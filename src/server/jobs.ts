import PgBoss from 'pg-boss';
import type { Tx } from './database';
import { environment } from './environment';
import { errorForLog, logger } from './logger';
import { makeScope, type Scope } from './scope';
import { singleton } from './singleton';

/** What each queue's job carries: ids only, never a token, an address or a name. */
export interface JobData {
  /** Verification mail of a one-time code. */
  'mail-verify': { codeId: string };
  /** Someone signed up with an address that already has an account. */
  'mail-already': { personId: string };
  'mail-reset': { codeId: string };
  'mail-invitation': { orgId: string; invitationId: string };
  /** Old throttles, codes, sessions. */
  'housekeeping': Record<string, never>;
}

export type QueueName = keyof JobData;

/** Every queue, with how it retries. The owner's role makes them when migrating; the application may not. */
export const QUEUES: Record<QueueName, { retryLimit: number; retryDelay: number; retryBackoff: boolean }> = {
  'mail-verify': { retryLimit: 8, retryDelay: 5, retryBackoff: true },
  'mail-already': { retryLimit: 8, retryDelay: 5, retryBackoff: true },
  'mail-reset': { retryLimit: 8, retryDelay: 5, retryBackoff: true },
  'mail-invitation': { retryLimit: 8, retryDelay: 5, retryBackoff: true },
  housekeeping: { retryLimit: 1, retryDelay: 60, retryBackoff: false },
};

export const JOB_SCHEMA = 'pgboss';

function boss(): PgBoss {
  return singleton('boss', () => {
    const made = new PgBoss({
      connectionString: environment().DATABASE_URL,
      schema: JOB_SCHEMA,
      application_name: 'fairlead-jobs',
      max: 3,
      migrate: false,
      supervise: true,
      schedule: true,
    });
    made.on('error', (error) => logger().warn({ error: errorForLog(error) }, 'job queue'));
    return made;
  });
}

/** Put a job in the queue as part of the transaction: it exists if and only if the change does. */
export async function enqueue<Q extends QueueName>(tx: Tx, queue: Q, data: JobData[Q], options: { startAfter?: Date } = {}): Promise<void> {
  await boss().send(queue, data, {
    ...QUEUES[queue],
    ...options,
    db: { executeSql: (text: string, values: unknown[]) => tx.client.query(text, values) as never },
  });
}

/** The scope of a job in one organization: nobody acts, and no role is held. For queue handlers only. */
export function jobScope(orgId: string): Scope {
  return makeScope({ orgId, orgSlug: '', actor: { kind: 'job', personId: null, name: 'Fairlead' }, grants: [], tournamentId: null });
}

export type Handlers = { [Q in QueueName]: (data: JobData[Q], jobId: string) => Promise<void> };

/** Start working the queues. Each job runs at least once; handlers are safe to run twice. */
export async function startJobs(handlers: Handlers): Promise<void> {
  const b = boss();
  await b.start();
  for (const queue of Object.keys(QUEUES) as QueueName[]) {
    await b.work<JobData[QueueName]>(queue, { pollingIntervalSeconds: queue === 'housekeeping' ? 60 : 0.5, batchSize: 1 }, async (jobs) => {
      for (const job of jobs) {
        try {
          await (handlers[queue] as (data: unknown, id: string) => Promise<void>)(job.data, job.id);
        } catch (error) {
          logger().warn({ queue, job: job.id, error: errorForLog(error) }, 'job failed, will be tried again');
          throw error;
        }
      }
    });
  }
  await b.schedule('housekeeping', '17 * * * *', {});
  singleton('jobs-running', () => ({ yes: true }));
}

/** Let running jobs finish, then stop. */
export async function stopJobs(): Promise<void> {
  await boss().stop({ graceful: true, wait: true, timeout: 10_000 });
}
